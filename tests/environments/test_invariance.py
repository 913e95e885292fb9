"""Environments do not depend on how a structure is written: atom order, SMILES, molfile."""

from __future__ import annotations

import json
import random
from collections import Counter
from pathlib import Path

import pytest
import yaml
from rdkit import Chem

from verify.environments.stage import find_environments
from verify.record.model import StructureText
from verify.structure.stage import read_structure

REFERENCE = Path(__file__).parents[1] / "reference"
TABLE = yaml.safe_load((REFERENCE / "environment_counts.yaml").read_text(encoding="utf-8"))
TEXTBOOK = [row[1] for row in TABLE["molecules"]]
PUBLISHED = [
    json.loads(line)["smiles"]
    for line in (REFERENCE / "published_facts.jsonl").read_text(encoding="utf-8").splitlines()
]
MOLECULES = sorted({*TEXTBOOK, *PUBLISHED})


def described(style: str, text: str) -> Counter[tuple[object, ...]]:
    """What the environments of a structure are, without the numbers of atoms."""
    structure = read_structure(StructureText(style, text, ""), ()).structure
    assert structure is not None, text
    return Counter(
        (e.nucleus, e.count, e.kind, e.exchangeable, e.attached_h, bool(e.may_double), e.magnetically_equivalent)
        for e in find_environments(structure).all
    )


@pytest.mark.parametrize("smiles", MOLECULES)
def test_rewriting_the_smiles_changes_nothing(smiles: str) -> None:
    mol = Chem.MolFromSmiles(smiles)
    wanted = described("smiles", smiles)
    dice = random.Random(smiles)
    for _ in range(3):
        order = list(range(mol.GetNumAtoms()))
        dice.shuffle(order)
        rewritten = Chem.MolToSmiles(Chem.RenumberAtoms(mol, order), canonical=False)
        assert described("smiles", rewritten) == wanted, rewritten


@pytest.mark.parametrize("smiles", MOLECULES[::3])
def test_going_through_a_molfile_changes_nothing(smiles: str) -> None:
    mol = Chem.MolFromSmiles(smiles)
    if any(a.GetIsotope() for a in mol.GetAtoms()):
        pytest.skip("isotope labels of hydrogen are written differently in a molfile")
    assert described("molblock", Chem.MolToV3KMolBlock(mol)) == described("smiles", smiles)
