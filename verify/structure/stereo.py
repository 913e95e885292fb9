"""How completely the stereochemistry of a drawing is stated."""

from __future__ import annotations

from typing import Any

from rdkit import Chem
from rdkit.Chem import rdMolDescriptors

LARGEST_CAGE_RING = 8  # members; bridgeheads of larger rings may point inwards. common practice


def stereo_state(mol: Chem.Mol) -> tuple[str, bool]:
    """Word of ``Structure.stereo_state``, and whether the drawing leaves open which diastereomer is meant.

    ``mol`` is not changed. OR groups count as undefined.
    """
    every = [s for s in Chem.FindPotentialStereo(mol, cleanIt=False, flagPossible=True) if _counts(mol, s)]
    found = _without_forced(mol, every)
    if not found:
        return "none", False
    unspecified = [s for s in found if s.specified != Chem.StereoSpecified.Specified]
    open_groups = sum(
        1 for group in mol.GetStereoGroups() if group.GetGroupType() == Chem.StereoGroupType.STEREO_OR
    )
    undefined = len(unspecified) + max(0, open_groups - 1)
    if not undefined:
        return "complete", False
    double = any(s.type == Chem.StereoType.Bond_Double for s in unspecified)
    centres = sum(1 for s in found if s.type != Chem.StereoType.Bond_Double)
    return "one-undefined" if undefined == 1 else "several-undefined", double or centres > 1


def _without_forced(mol: Chem.Mol, found: list[Chem.StereoInfo]) -> list[Chem.StereoInfo]:
    """Leave out open bridgeheads of small bridged rings but one of each cage: geometry gives them their sense."""
    heads: Any = []  # its stubs ask for another type than the list it fills
    rdMolDescriptors.CalcNumBridgeheadAtoms(mol, heads)
    small = [set(ring) for ring in mol.GetRingInfo().AtomRings() if len(ring) <= LARGEST_CAGE_RING]
    kept = []
    led: list[set[int]] = []
    for info in sorted(found, key=lambda s: s.specified != Chem.StereoSpecified.Specified):
        atom = info.centeredOn
        cage = {head for head in heads for ring in small if {atom, head} <= ring}
        if info.type != Chem.StereoType.Atom_Tetrahedral or atom not in cage:
            kept.append(info)
            continue
        partners = [other for other in led if other & cage]
        if not partners or info.specified == Chem.StereoSpecified.Specified:
            kept.append(info)
        led = [other for other in led if other not in partners] + [cage.union(*partners)]
    return kept


def is_declared_mixture(mol: Chem.Mol) -> bool:
    """True if AND groups of the drawing describe more than one pair of enantiomers."""
    groups = [g for g in mol.GetStereoGroups() if g.GetGroupType() == Chem.StereoGroupType.STEREO_AND]
    if not groups:
        return False
    grouped = {a.GetIdx() for g in groups for a in g.GetAtoms()}
    tagged = {a.GetIdx() for a in mol.GetAtoms() if a.GetChiralTag() != Chem.ChiralType.CHI_UNSPECIFIED}
    return len(groups) > 1 or bool(tagged - grouped)


def _counts(mol: Chem.Mol, info: Chem.StereoInfo) -> bool:
    """Leave out imine N-H, which isomerises, and nitrogen centres, which invert."""
    if info.type == Chem.StereoType.Bond_Double:
        bond = mol.GetBondWithIdx(info.centeredOn)
        ends = (bond.GetBeginAtom(), bond.GetEndAtom())
        return not any(a.GetAtomicNum() == 7 and (a.GetTotalNumHs() or _amidine(a)) for a in ends)
    if info.type == Chem.StereoType.Atom_Tetrahedral:
        return bool(mol.GetAtomWithIdx(info.centeredOn).GetAtomicNum() != 7)
    return bool(info.specified == Chem.StereoSpecified.Specified)


def _amidine(nitrogen: Chem.Atom) -> bool:
    """C=N of an amidine, guanidine, imidate: its configuration changes quickly."""
    for bond in nitrogen.GetBonds():
        if bond.GetBondType() == Chem.BondType.DOUBLE:
            carbon = bond.GetOtherAtom(nitrogen)
            return any(n.GetIdx() != nitrogen.GetIdx() and n.GetAtomicNum() == 7 for n in carbon.GetNeighbors())
    return False
