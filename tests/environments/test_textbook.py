"""Numbers of environments of textbook molecules, counted by hand (tests/reference/environment_counts.yaml)."""

from __future__ import annotations

from pathlib import Path

import pytest
import yaml

from verify.environments.stage import find_environments
from verify.record.model import StructureText
from verify.structure.stage import read_structure

TABLE = Path(__file__).parents[1] / "reference" / "environment_counts.yaml"
MOLECULES = yaml.safe_load(TABLE.read_text(encoding="utf-8"))["molecules"]


@pytest.mark.parametrize(("name", "smiles", "carbon", "c_h", "x_h", "split"), MOLECULES, ids=[m[0] for m in MOLECULES])
def test_counts(name: str, smiles: str, carbon: int, c_h: int, x_h: int, split: int) -> None:
    reading = read_structure(StructureText("smiles", smiles, "/structure/smiles"))
    assert reading.structure is not None, name
    found = find_environments(reading.structure)
    hydrogen = found.of("1H")
    counts = (
        len(found.of("13C")),
        sum(not e.exchangeable for e in hydrogen),
        sum(bool(e.exchangeable) for e in hydrogen),
        sum(e.kind == "diastereotopic" for e in hydrogen),
    )
    assert counts == (carbon, c_h, x_h, split)
