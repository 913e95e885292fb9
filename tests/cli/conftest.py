"""A registry of two records, one right and one short of a signal."""

from __future__ import annotations

from pathlib import Path

import pytest

RECORD = (
    'structure: {smiles: "CCOC(C)=O"}\nspectra:\n'
    '- {nucleus: 1H, field_mhz: 400, solvent: CDCl3, report: "%s"}\n'
)
RIGHT = "4.12 (q, J = 7.1 Hz, 2H), 2.04 (s, 3H), 1.26 (t, J = 7.1 Hz, 3H)"
WRONG = "4.12 (q, J = 7.1 Hz, 2H), 1.26 (t, J = 7.1 Hz, 3H)"


@pytest.fixture
def registry(tmp_path: Path) -> Path:
    """Folder of the registry."""
    root = tmp_path / "registry"
    for name, text in (("GOOD", RIGHT), ("SHORT", WRONG)):
        (root / "compounds" / name).mkdir(parents=True)
        (root / "compounds" / name / "record.yaml").write_text(RECORD % text, encoding="utf-8")
    (root / "registry.yaml").write_text("name: two\n", encoding="utf-8")
    return root
