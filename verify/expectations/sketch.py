"""The few facts about a molecule that coupling paths are classified by, read from the toolkit once."""

from __future__ import annotations

from dataclasses import dataclass

from rdkit import Chem
from rdkit.Chem.rdchem import BondStereo, BondType

CIS = frozenset({BondStereo.STEREOZ, BondStereo.STEREOCIS})
TRANS = frozenset({BondStereo.STEREOE, BondStereo.STEREOTRANS})


@dataclass(frozen=True, slots=True)
class Sketch:
    """Per atom index: ``element`` symbol, ``state`` ("sp3", "sp2", "sp", "ar"), ``around`` (its
    neighbours) and ``charge``. ``order`` maps a sorted pair of atoms to its bond order (1.5 in aromatic
    rings). ``rings`` holds every smallest ring as a tuple in ring order; ``ring_of`` maps an atom to the
    numbers of its rings. ``stereo`` maps a sorted pair to (reference atom on the first, on the second,
    True if these are cis)."""

    element: tuple[str, ...]
    state: tuple[str, ...]
    around: tuple[tuple[int, ...], ...]
    charge: tuple[int, ...]
    order: dict[tuple[int, int], float]
    rings: tuple[tuple[int, ...], ...]
    ring_of: tuple[tuple[int, ...], ...]
    stereo: dict[tuple[int, int], tuple[int, int, bool]]

    def bond(self, first: int, second: int) -> float:
        """Order of the bond between two atoms; 0.0 if there is none."""
        return self.order.get((first, second) if first < second else (second, first), 0.0)

    def hydrogens(self, atom: int) -> int:
        """Number of H (deuterium included) on an atom."""
        return sum(self.element[n] == "H" for n in self.around[atom])

    def shared_ring(self, *atoms: int) -> tuple[int, ...]:
        """The smallest ring that holds all these atoms, in ring order; empty if there is none."""
        best: tuple[int, ...] = ()
        for number in self.ring_of[atoms[0]]:
            ring = self.rings[number]
            if all(a in ring for a in atoms) and (not best or len(ring) < len(best)):
                best = ring
        return best

    def double_to(self, atom: int, elements: str) -> bool:
        """True if the atom has a double bond to one of these one-letter elements."""
        return any(self.element[n] in elements and self.bond(atom, n) == 2.0 for n in self.around[atom])


def _state(orders: list[float], aromatic: bool) -> str:
    if aromatic:
        return "ar"
    if 3.0 in orders or orders.count(2.0) >= 2:
        return "sp"
    return "sp2" if 2.0 in orders else "sp3"


def _order(bond: Chem.Bond) -> float:
    return 1.0 if bond.GetBondType() == BondType.DATIVE else float(bond.GetBondTypeAsDouble())


def draw_sketch(mol: Chem.Mol) -> Sketch:
    """Read a molecule with explicit H."""
    atoms = list(mol.GetAtoms())
    around: list[list[int]] = [[] for _ in atoms]
    orders: list[list[float]] = [[] for _ in atoms]
    order: dict[tuple[int, int], float] = {}
    stereo: dict[tuple[int, int], tuple[int, int, bool]] = {}
    for bond in mol.GetBonds():
        first, second = bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()
        value = _order(bond)
        pair = (first, second) if first < second else (second, first)
        order[pair] = value
        for one, other in ((first, second), (second, first)):
            around[one].append(other)
            orders[one].append(value)
        if value == 2.0 and (bond.GetStereo() in CIS or bond.GetStereo() in TRANS):
            references = list(bond.GetStereoAtoms())
            if first > second:
                references.reverse()
            if len(references) == 2:
                stereo[pair] = (references[0], references[1], bond.GetStereo() in CIS)
    rings = tuple(tuple(ring) for ring in mol.GetRingInfo().AtomRings())
    ring_of: list[list[int]] = [[] for _ in atoms]
    for number, ring in enumerate(rings):
        for atom in ring:
            ring_of[atom].append(number)
    return Sketch(
        tuple(a.GetSymbol() for a in atoms),
        tuple(_state(orders[n], a.GetIsAromatic()) for n, a in enumerate(atoms)),
        tuple(tuple(n) for n in around),
        tuple(a.GetFormalCharge() for a in atoms),
        order,
        rings,
        tuple(tuple(n) for n in ring_of),
        stereo,
    )


def geometry(sketch: Sketch, near: int, first: int, second: int, far: int) -> str:
    """"cis" or "trans" for substituents ``near`` on ``first`` and ``far`` on ``second`` of a double bond;
    "" if the drawing does not say."""
    if first > second:
        near, first, second, far = far, second, first, near
    found = sketch.stereo.get((first, second))
    if found is None:
        return ""
    reference_first, reference_second, cis = found
    same = cis ^ (near != reference_first) ^ (far != reference_second)
    return "cis" if same else "trans"
