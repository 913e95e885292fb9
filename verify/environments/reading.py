"""Reads the skeleton of a component from the toolkit."""

from __future__ import annotations

from rdkit import Chem

from verify.environments.resonance import even_out
from verify.environments.skeleton import DOUBLE, Rows, Skeleton


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
    atoms = [mol.GetAtomWithIdx(n) for n in range(mol.GetNumAtoms())]
    size = len(atoms)
    neighbours: list[list[int]] = [[] for _ in atoms]
    order: Rows = [{} for _ in atoms]
    senses: dict[tuple[int, int], tuple[int, int, bool]] = {}
    ring_neighbours: list[list[int]] = [[] for _ in atoms]
    for bond in map(mol.GetBondWithIdx, range(mol.GetNumBonds())):
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
    tags = [_drawn_sense(atom, neighbours[i]) for i, atom in enumerate(atoms)] if stereo else [0] * size
    for listed in neighbours:
        listed.sort()
    rings = mol.GetRingInfo().AtomRings()
    charge = [a.GetFormalCharge() for a in atoms]
    number = [a.GetAtomicNum() for a in atoms]
    evened = even_out(mol, order, rings) if any(charge) else None
    return Skeleton(
        size=size,
        number=number,
        hydrogens=[a.GetTotalNumHs() for a in atoms],
        charge=charge,
        isotope=[a.GetIsotope() for a in atoms],
        neighbours=neighbours,
        order=order,
        tag=tags,
        stereo=senses,
        ring_neighbours=ring_neighbours,
        block=_blocks(ring_neighbours),
        rings=rings,
        small_ring=_small_ring_bonds(rings),
        colour=evened.colour if evened else list(
            Chem.CanonicalRankAtoms(mol, breakTies=False, includeChirality=False)),
        bonding=evened.bonding if evened else order,
        delocalised=evened.bonds if evened else (),
        blurred=evened.blurred if evened else frozenset(),
        labelled=1 in number,
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
