"""Near relatives of a structure that a chemist could have drawn by mistake: isomers made by one small move.

Families: "ring-position" (a substituent on another carbon of its aromatic ring system, or two exchanged),
"reversed-ester" (ester, thioester or amide the other way round), "branching" (a methyl on the next carbon of its
chain), "chain-position" (O, N, S or halogen on the next sp3 carbon), "oxygen-or-nitrogen" (alkyl on O or on N of a
lactam or azine), "stereo" (another E/Z form or diastereomer).
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from functools import partial
from itertools import combinations

from rdkit import Chem, rdBase

CHEAP = ("ring-position", "reversed-ester", "branching")
Edit = Callable[[Chem.RWMol], None]


@dataclass(frozen=True, slots=True)
class Relative:
    """An isomer: SMILES, family and one line in words."""

    smiles: str
    family: str
    words: str


def isomers(smiles: str, families: tuple[str, ...] = CHEAP, limit: int = 12) -> tuple[Relative, ...]:
    """Distinct isomers of a structure, family by family, at most ``limit`` a family; never the structure itself."""
    mol = Chem.MolFromSmiles(smiles)
    if mol is None:
        return ()
    seen = {Chem.MolToSmiles(mol)}
    found: list[Relative] = []
    for family in families:
        count = 0
        for edit, words in MOVES[family](mol):
            other = _edited(mol, edit)
            if other is None or other in seen:
                continue
            seen.add(other)
            found.append(Relative(other, family, words))
            count += 1
            if count == limit:
                break
    return tuple(found)


def homologues(smiles: str) -> tuple[str, ...]:
    """Canonical SMILES of the structures in which one CH3 has become C2H5."""
    mol = Chem.MolFromSmiles(smiles)
    if mol is None:
        return ()
    made = [_edited(mol, partial(_lengthen, methyl=a.GetIdx())) for a in mol.GetAtoms() if _is_methyl(a)]
    return tuple(sorted({other for other in made if other is not None}))


def _is_methyl(atom: Chem.Atom) -> bool:
    return bool(atom.GetAtomicNum() == 6 and atom.GetDegree() == 1 and atom.GetTotalNumHs() == 3)


def _lengthen(editable: Chem.RWMol, methyl: int) -> None:
    editable.AddBond(methyl, editable.AddAtom(Chem.Atom(6)), Chem.BondType.SINGLE)


def _edited(mol: Chem.Mol, edit: Edit) -> str | None:
    """Canonical SMILES after the move, None where it makes no valid molecule."""
    editable = Chem.RWMol(mol)
    edit(editable)
    with rdBase.BlockLogs():
        if Chem.SanitizeMol(editable, catchErrors=True) != Chem.SanitizeFlags.SANITIZE_NONE:
            return None
        # Written and read once more: stereo notes of the parent must not outlive the edit.
        again = Chem.MolFromSmiles(Chem.MolToSmiles(editable))
    if again is None or len(Chem.GetMolFrags(again)) != len(Chem.GetMolFrags(mol)):
        return None
    return str(Chem.MolToSmiles(again))


def _move(editable: Chem.RWMol, moved: int, old: int, new: int) -> None:
    """Take ``moved`` off ``old`` and put it on ``new``; the sense of ``moved`` as a centre is kept."""
    atom = editable.GetAtomWithIdx(moved)
    order = [n.GetIdx() for n in atom.GetNeighbors()]
    editable.RemoveBond(moved, old)
    editable.AddBond(moved, new, Chem.BondType.SINGLE)
    for end in (editable.GetAtomWithIdx(old), editable.GetAtomWithIdx(new)):
        if end.GetAtomicNum() == 6 and end.GetFormalCharge() == 0:  # [C@H] holds its H by number: count anew
            end.SetNumExplicitHs(0)
            end.SetNoImplicit(False)
            end.SetChiralTag(Chem.ChiralType.CHI_UNSPECIFIED)
    if atom.GetChiralTag() != Chem.ChiralType.CHI_UNSPECIFIED and (len(order) - 1 - order.index(old)) % 2:
        atom.InvertChirality()


def _exchange(editable: Chem.RWMol, first: tuple[int, int], second: tuple[int, int]) -> None:
    """Two (substituent, ring atom) pairs trade places."""
    _move(editable, first[0], first[1], second[1])
    _move(editable, second[0], second[1], first[1])


def _ring_systems(mol: Chem.Mol) -> list[set[int]]:
    """Fused aromatic ring systems as sets of atoms."""
    systems: list[set[int]] = []
    for ring in mol.GetRingInfo().AtomRings():
        if not all(mol.GetAtomWithIdx(i).GetIsAromatic() for i in ring):
            continue
        joined = set(ring)
        for other in [s for s in systems if s & joined]:
            systems.remove(other)
            joined |= other
        systems.append(joined)
    return systems


def _substituent(atom: Chem.Atom) -> int | None:
    """The atom outside all rings of ``atom`` that hangs on it by a single bond, if there is exactly one."""
    outside = [b for b in atom.GetBonds() if not b.IsInRing()]
    if len(outside) != 1 or outside[0].GetBondType() != Chem.BondType.SINGLE:
        return None
    return int(outside[0].GetOtherAtomIdx(atom.GetIdx()))


def _ring_position(mol: Chem.Mol) -> Iterator[tuple[Edit, str]]:
    """Nearest free places first: the slip of one position is the likeliest."""
    distances = Chem.GetDistanceMatrix(mol)
    moves = []
    for system in _ring_systems(mol):
        carbons = [i for i in sorted(system) if mol.GetAtomWithIdx(i).GetAtomicNum() == 6]
        bearing = {i: s for i in carbons if (s := _substituent(mol.GetAtomWithIdx(i))) is not None}
        free = [i for i in carbons if mol.GetAtomWithIdx(i).GetTotalNumHs() == 1]
        for old, substituent in bearing.items():
            for new in free:
                edit = partial(_move, moved=substituent, old=old, new=new)
                moves.append((distances[old, new], edit, "a ring substituent in another position"))
        for first, second in combinations(sorted(bearing), 2):
            exchange = partial(_exchange, first=(bearing[first], first), second=(bearing[second], second))
            moves.append((distances[first, second] + 0.5, exchange, "two ring substituents exchanged"))
    moves.sort(key=lambda move: move[0])
    for _, edit, words in moves:
        yield edit, words


_ACYL = Chem.MolFromSmarts("[#6:1][CX3;!R](=[OX1])[O,S,$([NX3;H1]):2][#6;!$([CX3]=[OX1]):3]")


def _reversed_ester(mol: Chem.Mol) -> Iterator[tuple[Edit, str]]:
    for left, carbonyl, _, bridge, right in mol.GetSubstructMatches(_ACYL):
        if mol.GetBondBetweenAtoms(carbonyl, bridge).IsInRing():
            continue
        edit = partial(_exchange, first=(left, carbonyl), second=(right, bridge))
        yield edit, "an ester or amide the other way round"


def _sp3_carbon(atom: Chem.Atom) -> bool:
    return bool(atom.GetAtomicNum() == 6 and atom.GetHybridization() == Chem.HybridizationType.SP3)


def _branching(mol: Chem.Mol) -> Iterator[tuple[Edit, str]]:
    for methyl in mol.GetAtoms():
        if not _is_methyl(methyl):
            continue
        owner = methyl.GetNeighbors()[0]
        if owner.GetAtomicNum() != 6 or owner.GetIsAromatic():
            continue
        for new in owner.GetNeighbors():
            if new.GetIdx() != methyl.GetIdx() and _sp3_carbon(new) and new.GetTotalNumHs() > 0:
                edit = partial(_move, moved=methyl.GetIdx(), old=owner.GetIdx(), new=new.GetIdx())
                yield edit, "a chain branched elsewhere"


def _chain_position(mol: Chem.Mol) -> Iterator[tuple[Edit, str]]:
    for bond in mol.GetBonds():
        if bond.IsInRing() or bond.GetBondType() != Chem.BondType.SINGLE:
            continue
        for hetero, carbon in ((bond.GetBeginAtom(), bond.GetEndAtom()), (bond.GetEndAtom(), bond.GetBeginAtom())):
            if hetero.GetAtomicNum() not in (7, 8, 9, 16, 17, 35, 53) or not _sp3_carbon(carbon):
                continue
            for new in carbon.GetNeighbors():
                if new.GetIdx() != hetero.GetIdx() and _sp3_carbon(new) and new.GetTotalNumHs() > 0:
                    edit = partial(_move, moved=hetero.GetIdx(), old=carbon.GetIdx(), new=new.GetIdx())
                    yield edit, "a heteroatom on the next carbon of its chain"


_LACTAM = Chem.MolFromSmarts("[#6;X4;!R:1][#7;R:2]~[#6;R](=[OX1])")


def _oxygen_or_nitrogen(mol: Chem.Mol) -> Iterator[tuple[Edit, str]]:
    kekule = Chem.Mol(mol)
    Chem.Kekulize(kekule, clearAromaticFlags=True)
    for alkyl, nitrogen, carbon, oxygen in kekule.GetSubstructMatches(_LACTAM):
        edit = partial(_to_oxygen, alkyl=alkyl, nitrogen=nitrogen, carbon=carbon, oxygen=oxygen)
        yield edit, "alkyl on oxygen instead of nitrogen"


def _to_oxygen(editable: Chem.RWMol, alkyl: int, nitrogen: int, carbon: int, oxygen: int) -> None:
    Chem.Kekulize(editable, clearAromaticFlags=True)
    _move(editable, alkyl, nitrogen, oxygen)
    editable.GetBondBetweenAtoms(carbon, oxygen).SetBondType(Chem.BondType.SINGLE)
    editable.GetBondBetweenAtoms(nitrogen, carbon).SetBondType(Chem.BondType.DOUBLE)


# The stereo atoms of a parsed E/Z bond are those of higher rank, so that E is trans and Z is cis of them.
_OTHER_FORM = {
    Chem.BondStereo.STEREOE: Chem.BondStereo.STEREOCIS,
    Chem.BondStereo.STEREOTRANS: Chem.BondStereo.STEREOCIS,
    Chem.BondStereo.STEREOZ: Chem.BondStereo.STEREOTRANS,
    Chem.BondStereo.STEREOCIS: Chem.BondStereo.STEREOTRANS,
}


def _stereo(mol: Chem.Mol) -> Iterator[tuple[Edit, str]]:
    for bond in mol.GetBonds():
        if bond.GetStereo() in _OTHER_FORM:
            yield partial(_flip, bond=bond.GetIdx()), "the other E/Z form"
    centres = [a.GetIdx() for a in mol.GetAtoms() if a.GetChiralTag() != Chem.ChiralType.CHI_UNSPECIFIED]
    for centre in centres if len(centres) > 1 else []:
        yield partial(_invert, centre=centre), "the other sense at one centre"


def _flip(editable: Chem.RWMol, bond: int) -> None:
    double = editable.GetBondWithIdx(bond)
    for atom in (double.GetBeginAtom(), double.GetEndAtom()):
        for neighbour in atom.GetBonds():
            neighbour.SetBondDir(Chem.BondDir.NONE)  # else the old directions are written again
    double.SetStereo(_OTHER_FORM[double.GetStereo()])
    Chem.SetDoubleBondNeighborDirections(editable)  # sanitising forgets a sense that no direction shows


def _invert(editable: Chem.RWMol, centre: int) -> None:
    editable.GetAtomWithIdx(centre).InvertChirality()


MOVES: dict[str, Callable[[Chem.Mol], Iterator[tuple[Edit, str]]]] = {
    "ring-position": _ring_position,
    "reversed-ester": _reversed_ester,
    "branching": _branching,
    "chain-position": _chain_position,
    "oxygen-or-nitrogen": _oxygen_or_nitrogen,
    "stereo": _stereo,
}
