"""The heavy-atom graph of one component, read once from the toolkit into plain Python."""

from __future__ import annotations

from dataclasses import dataclass, field

from rdkit import Chem

SINGLE, AROMATIC, DOUBLE, TRIPLE = 2, 3, 4, 6  # twice the bond order


@dataclass(slots=True)
class Skeleton:
    """Atoms of one component without explicit hydrogen; labelled hydrogen counts as an atom.

    ``neighbours[i]`` ascending; ``order[i][j]`` is twice the bond order; ``tag[i]`` is +1/-1 for a drawn sense of
    a tetrahedral atom against ascending neighbours, 0 if none; ``stereo`` maps a double bond (low, high) to
    (atom at low, atom at high, trans); ``ring_neighbours[i]`` are those over ring bonds; ``block[i]`` numbers the
    ring system (-1: none); ``small_ring`` holds bonds in rings of fewer than eight atoms.
    ``colour``: constitutional class.
    """

    size: int
    number: list[int]
    hydrogens: list[int]
    charge: list[int]
    isotope: list[int]
    neighbours: list[list[int]]
    order: list[dict[int, int]]
    tag: list[int]
    stereo: dict[tuple[int, int], tuple[int, int, bool]]
    ring_neighbours: list[list[int]]
    block: list[int]
    rings: tuple[tuple[int, ...], ...]
    small_ring: frozenset[tuple[int, int]]
    colour: list[int]
    fragment: list[int] = field(default_factory=list)

    def bond(self, a: int, b: int) -> int:
        """Twice the order of the bond between ``a`` and ``b``."""
        return self.order[a][b]

    def aromatic(self, atom: int) -> bool:
        """True if an aromatic bond ends here."""
        return AROMATIC in self.order[atom].values()

    def unsaturated(self, atom: int) -> bool:
        """True if a double, triple or aromatic bond ends here."""
        return any(o != SINGLE for o in self.order[atom].values())


def permutation_sign(images: list[int]) -> int:
    """Sign of the permutation that sorts distinct numbers: +1 even, -1 odd."""
    sign = 1
    for i, first in enumerate(images):
        for second in images[i + 1 :]:
            if first > second:
                sign = -sign
    return sign


def read_skeleton(mol: Chem.Mol, stereo: bool = True) -> Skeleton:
    """Skeleton of a sane molecule without explicit H. ``stereo`` False skips reading senses (none are drawn)."""
    atoms = list(mol.GetAtoms())
    size = len(atoms)
    neighbours: list[list[int]] = [[] for _ in atoms]
    order: list[dict[int, int]] = [{} for _ in atoms]
    senses: dict[tuple[int, int], tuple[int, int, bool]] = {}
    ring_neighbours: list[list[int]] = [[] for _ in atoms]
    for bond in mol.GetBonds():
        a, b = bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()
        neighbours[a].append(b)
        neighbours[b].append(a)
        code = int(2 * bond.GetBondTypeAsDouble())
        order[a][b] = order[b][a] = code
        if bond.IsInRing():
            ring_neighbours[a].append(b)
            ring_neighbours[b].append(a)
        if stereo and code == DOUBLE:
            _read_double_bond(bond, senses)
    tags = [0] * size
    if stereo:
        for i, atom in enumerate(atoms):
            tags[i] = _drawn_sense(atom, neighbours[i])
    for listed in neighbours:
        listed.sort()
    rings = mol.GetRingInfo().AtomRings()
    return Skeleton(
        size=size,
        number=[a.GetAtomicNum() for a in atoms],
        hydrogens=[a.GetTotalNumHs() for a in atoms],
        charge=[a.GetFormalCharge() for a in atoms],
        isotope=[a.GetIsotope() for a in atoms],
        neighbours=neighbours,
        order=order,
        tag=tags,
        stereo=senses,
        ring_neighbours=ring_neighbours,
        block=_blocks(ring_neighbours),
        rings=rings,
        small_ring=_small_ring_bonds(rings),
        colour=list(Chem.CanonicalRankAtoms(mol, breakTies=False, includeChirality=False)),
    )


def _drawn_sense(atom: Chem.Atom, in_bond_order: list[int]) -> int:
    """+1/-1 against ascending neighbours for a drawn tetrahedral sense, else 0."""
    tag = atom.GetChiralTag()
    if tag == Chem.ChiralType.CHI_TETRAHEDRAL_CW:
        return permutation_sign(in_bond_order)
    if tag == Chem.ChiralType.CHI_TETRAHEDRAL_CCW:
        return -permutation_sign(in_bond_order)
    return 0


def _read_double_bond(bond: Chem.Bond, senses: dict[tuple[int, int], tuple[int, int, bool]]) -> None:
    """Store which two substituents of a double bond are drawn cis or trans."""
    word = bond.GetStereo()
    if word in (Chem.BondStereo.STEREONONE, Chem.BondStereo.STEREOANY):
        return
    ends = list(bond.GetStereoAtoms())
    if len(ends) != 2:
        return
    a, b = bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()
    trans = word in (Chem.BondStereo.STEREOE, Chem.BondStereo.STEREOTRANS)
    senses[(min(a, b), max(a, b))] = (ends[0], ends[1], trans) if a < b else (ends[1], ends[0], trans)


def _blocks(ring_neighbours: list[list[int]]) -> list[int]:
    """Number of the ring system of each atom; rings that share an atom are one system."""
    block = [-1] * len(ring_neighbours)
    count = 0
    for start, linked in enumerate(ring_neighbours):
        if not linked or block[start] >= 0:
            continue
        stack = [start]
        block[start] = count
        while stack:
            for other in ring_neighbours[stack.pop()]:
                if block[other] < 0:
                    block[other] = count
                    stack.append(other)
        count += 1
    return block


def _small_ring_bonds(rings: tuple[tuple[int, ...], ...]) -> frozenset[tuple[int, int]]:
    """Bonds (both directions) in rings of fewer than eight atoms."""
    found: set[tuple[int, int]] = set()
    for ring in rings:
        if len(ring) < 8:
            for a, b in zip(ring, (*ring[1:], ring[0]), strict=True):
                found.add((a, b))
                found.add((b, a))
    return frozenset(found)
