"""Relatives made by one small move: right formula, right family, never the structure itself."""

from __future__ import annotations

import pytest
from rdkit import Chem
from rdkit.Chem.rdMolDescriptors import CalcMolFormula

from verify.structure.isomers import MOVES, isomers

STRUCTURES = [
    "CC(=O)OCCc1ccccc1", "COc1ccc(C=O)cc1O", "CC(C)CC(N)=O", "Cn1ccccc1=O", "C/C=C/C(C)=O", "C[C@H](O)[C@@H](C)Br",
    "CC1=CC[C@@H](C(C)=C)CC1", "Cc1cnc(C)c(OC)n1", "CCNC(C)=O", "CC(C)[C@@H]1CC[C@@H](C)C[C@H]1O",
    "Cc1c[nH]c2ccccc12", "O=C1CCCCO1",
]  # fmt: skip


@pytest.mark.parametrize("smiles", STRUCTURES)
def test_relatives_are_distinct_isomers(smiles: str) -> None:
    own = Chem.MolFromSmiles(smiles)
    found = isomers(smiles, tuple(MOVES))
    written = [relative.smiles for relative in found]
    assert len(set(written)) == len(written)
    assert Chem.MolToSmiles(own) not in written
    for relative in found:
        other = Chem.MolFromSmiles(relative.smiles)
        assert CalcMolFormula(other) == CalcMolFormula(own)
        assert sum(a.GetNumRadicalElectrons() for a in other.GetAtoms()) == 0


# from memory: the isomers any chemist would name
@pytest.mark.parametrize(
    ("smiles", "family", "expected"),
    [
        ("COC(=O)c1ccccc1", "reversed-ester", ["CC(=O)Oc1ccccc1"]),
        ("CCNC(C)=O", "reversed-ester", ["CCC(=O)NC"]),
        ("Cn1ccccc1=O", "oxygen-or-nitrogen", ["COc1ccccn1"]),
        ("CC(C)CC(N)=O", "branching", ["CCCCC(N)=O", "CCC(C)C(N)=O"]),
        ("CCCO", "chain-position", ["CC(C)O"]),
        ("C/C=C/C(C)=O", "stereo", ["C/C=C\\C(C)=O"]),
        ("Cc1ccc(O)cc1", "ring-position", ["Cc1cccc(O)c1", "Cc1ccccc1O"]),
        ("c1ccccc1", "ring-position", []),
    ],
)
def test_named_families(smiles: str, family: str, expected: list[str]) -> None:
    wanted = {Chem.CanonSmiles(other) for other in expected}
    assert {relative.smiles for relative in isomers(smiles, (family,))} == wanted


def test_one_centre_has_no_diastereomer() -> None:
    assert isomers("C[C@H](O)CC", ("stereo",)) == ()


def test_limit_holds_for_each_family() -> None:
    assert len(isomers("Cc1cc(Cl)c(Br)c(O)c1", ("ring-position",), limit=3)) == 3
