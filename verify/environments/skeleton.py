"""The heavy-atom graph of one component, read once from the toolkit into plain Python."""

from __future__ import annotations

from dataclasses import dataclass

SINGLE, AROMATIC, DOUBLE, TRIPLE = 2, 3, 4, 6  # twice the bond order
Rows = list[dict[int, int]]


@dataclass(slots=True)
class Skeleton:
    """Atoms of one component without explicit hydrogen; labelled hydrogen counts as an atom.

    ``neighbours[i]`` ascending; ``order[i][j]`` is twice the bond order; ``tag[i]`` is +1/-1 for a drawn sense of
    a tetrahedral atom against ascending neighbours, 0 if none; ``stereo`` maps a double bond (low, high) to
    (atom at low, atom at high, trans); ``ring_neighbours[i]`` are those over ring bonds; ``block[i]`` numbers the
    ring system (-1: none); ``small_ring`` holds bonds in rings of fewer than eight atoms.
    ``colour``: constitutional class. ``bonding`` is ``order`` with the charge of conjugated ions spread,
    ``delocalised`` their chain bonds and ``blurred`` the bonds at their rings. ``labelled``: deuterium or tritium
    is present.
    """

    size: int
    number: list[int]
    hydrogens: list[int]
    charge: list[int]
    isotope: list[int]
    neighbours: list[list[int]]
    order: Rows
    tag: list[int]
    stereo: dict[tuple[int, int], tuple[int, int, bool]]
    ring_neighbours: list[list[int]]
    block: list[int]
    rings: tuple[tuple[int, ...], ...]
    small_ring: frozenset[tuple[int, int]]
    colour: list[int]
    bonding: Rows
    delocalised: tuple[tuple[int, int], ...] = ()
    blurred: frozenset[tuple[int, int]] = frozenset()
    labelled: bool = False

    def aromatic(self, atom: int) -> bool:
        """True if an aromatic bond ends here."""
        return AROMATIC in self.order[atom].values()

    def unsaturated(self, atom: int) -> bool:
        """True if a double, triple or aromatic bond ends here."""
        return any(o != SINGLE for o in self.order[atom].values())
