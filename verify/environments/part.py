"""One component with everything the environment stage knows about it."""

from __future__ import annotations

from dataclasses import dataclass

from verify.environments.elements import Elements
from verify.environments.skeleton import Skeleton
from verify.environments.symmetry import Orbits


@dataclass(frozen=True, slots=True)
class Part:
    """``place[i]``: index in ``Structure.mol`` of atom i; ``first_hydrogen[i]``: of its first explicit H.

    ``scale``: how many per molecule of the compound. ``offset`` keeps constitution numbers of components apart.
    """

    component: int
    skeleton: Skeleton
    elements: Elements
    orbits: Orbits
    place: list[int]
    first_hydrogen: list[int]
    scale: float
    offset: int

    def hydrogens_of(self, atom: int, which: int) -> list[int]:
        """Indices in ``Structure.mol`` of the hydrogens of a node: one of a CH2 told apart, else all."""
        first = self.first_hydrogen[atom]
        if atom in self.orbits.pairs:
            return [first + which]
        return list(range(first, first + self.skeleton.hydrogens[atom]))
