"""Bridgeheads of small cages: the sense that geometry forces is the drawn one; fused rings are left open."""

from __future__ import annotations

import pytest
from rdkit import Chem

from verify.environments.cages import settle_cages
from verify.environments.elements import Elements, find_elements
from verify.environments.reading import read_skeleton
from verify.environments.stage import find_environments
from verify.record.model import StructureText
from verify.structure.stage import read_structure

# Natural products with their drawn senses, from memory; each can exist only as drawn or as its mirror image.
DRAWN = {
    "camphor": "CC1(C)[C@@H]2CC[C@@]1(C)C(=O)C2",
    "alpha-pinene": "CC1=CC[C@H]2C[C@@H]1C2(C)C",
    "cocaine": "CN1[C@H]2CC[C@@H]1[C@H]([C@H](C2)OC(=O)C3=CC=CC=C3)C(=O)OC",
}


def _elements(smiles: str) -> Elements:
    skeleton = read_skeleton(Chem.MolFromSmiles(smiles))
    elements = find_elements(skeleton)
    settle_cages(skeleton, elements)
    return elements


@pytest.mark.parametrize(
    ("name", "atom"),
    [("camphor", 3), ("camphor", 6), ("alpha-pinene", 4), ("alpha-pinene", 6), ("cocaine", 2), ("cocaine", 5)],
)
def test_the_forced_sense_is_the_drawn_one(name: str, atom: int) -> None:
    whole = _elements(DRAWN[name])
    mol = Chem.MolFromSmiles(DRAWN[name])
    assert mol.GetAtomWithIdx(atom).GetChiralTag() != Chem.ChiralType.CHI_UNSPECIFIED
    mol.GetAtomWithIdx(atom).SetChiralTag(Chem.ChiralType.CHI_UNSPECIFIED)
    skeleton = read_skeleton(mol)
    elements = find_elements(skeleton)
    assert atom in elements.open_centres
    elements.centre[atom] = -whole.centre[atom]
    settle_cages(skeleton, elements)
    assert elements.centre == whole.centre
    assert atom not in elements.open_centres


@pytest.mark.parametrize("smiles", ["C1CCC2CCCCC2C1", "C1CC2CCCC3CCCC(C1)C23"], ids=["decalin", "perhydrophenalene"])
def test_fused_rings_keep_their_choice(smiles: str) -> None:
    assert _elements(smiles).open_centres == find_elements(read_skeleton(Chem.MolFromSmiles(smiles))).open_centres


@pytest.mark.parametrize(
    ("name", "smiles", "carbons"),
    [
        ("tropine without senses", "CN1C2CCC1CC(O)C2", 5),
        ("1-adamantanol", "OC12CC3CC(CC(C3)C1)C2", 4),
        ("2-adamantanone", "O=C1C2CC3CC(C2)CC1C3", 5),
        ("norbornane-2,3-dione", "O=C1C(=O)C2CCC1C2", 4),
        ("hexamine", "C1N2CN3CN1CN(C2)C3", 1),
        ("quinuclidine", "C1CN2CCC1CC2", 3),
    ],
)
def test_cages_drawn_flat_show_their_symmetry(name: str, smiles: str, carbons: int) -> None:
    """Numbers of 13C signals counted by hand."""
    reading = read_structure(StructureText("smiles", smiles, "/structure/smiles"))
    assert reading.structure is not None, name
    assert len(find_environments(reading.structure).of("13C")) == carbons
