"""A registry of as many small records as a test asks for."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest

ACETATE = 'structure: {smiles: "CCOC(C)=O"}\nspectra:\n- {nucleus: 1H, field_mhz: 400, solvent: CDCl3, report: "%s"}\n'
RIGHT = "4.12 (q, J = 7.1 Hz, 2H), 2.04 (s, 3H), 1.26 (t, J = 7.1 Hz, 3H)"
WRONG = "4.12 (q, J = 7.1 Hz, 2H), 1.26 (t, J = 7.1 Hz, 3H)"


@pytest.fixture
def make_registry(tmp_path: Path) -> Callable[[int], Path]:
    """Writes a registry with that many compounds, C-000 and so on, every third one short of a signal."""

    def make(count: int) -> Path:
        (tmp_path / "registry.yaml").write_text("name: small\n", encoding="utf-8")
        for number in range(count):
            folder = tmp_path / "compounds" / f"C-{number:03d}"
            folder.mkdir(parents=True)
            text = ACETATE % (WRONG if number % 3 == 2 else RIGHT)
            (folder / "record.yaml").write_text(text, encoding="utf-8")
        return tmp_path

    return make
