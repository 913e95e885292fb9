"""How far the senses of a drawing are stated; what geometry forces is not called open. Counted by hand."""

from __future__ import annotations

import pytest
from rdkit import Chem

from verify.structure.stereo import stereo_state


@pytest.mark.parametrize(
    ("name", "smiles", "state", "open_diastereomers"),
    [
        ("hexane", "CCCCCC", "none", False),
        ("butan-2-ol", "CCC(C)O", "one-undefined", False),
        ("(R)-butan-2-ol", "CC[C@@H](C)O", "complete", False),
        ("2,3-butanediol", "CC(O)C(C)O", "several-undefined", True),
        ("but-2-ene", "CC=CC", "one-undefined", True),
        ("decalin", "C1CCC2CCCCC2C1", "several-undefined", True),
        ("norbornane", "C1CC2CCC1C2", "one-undefined", False),
        ("1,4-cineole", "CC(C)C12CCC(C)(CC1)O2", "one-undefined", False),
        ("adamantane", "C1C2CC3CC1CC(C2)C3", "one-undefined", False),
        ("norbornan-2-ol", "OC1CC2CCC1C2", "several-undefined", True),
        ("camphor drawn flat", "CC1(C)C2CCC1(C)C(=O)C2", "one-undefined", False),
        ("camphor", "CC1(C)[C@@H]2CC[C@@]1(C)C(=O)C2", "complete", False),
        ("camphor, one sense drawn", "CC1(C)[C@@H]2CCC1(C)C(=O)C2", "complete", False),
        ("two cages", "C1CC2CC1CC2CC3CC4CCC3C4", "several-undefined", True),
    ],
)
def test_state_of_a_drawing(name: str, smiles: str, state: str, open_diastereomers: bool) -> None:
    assert stereo_state(Chem.MolFromSmiles(smiles)) == (state, open_diastereomers), name
