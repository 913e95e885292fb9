"""What the guards look at: this repository, and small trees with a planted offence."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest


@pytest.fixture
def root() -> Path:
    """The top folder of the repository."""
    return Path(__file__).parents[2]


@pytest.fixture
def plant(tmp_path: Path) -> Callable[[dict[str, str]], Path]:
    """Write files by their path under a fresh top folder, and return that folder."""

    def write(texts: dict[str, str]) -> Path:
        for name, text in texts.items():
            path = tmp_path / name
            path.parent.mkdir(parents=True, exist_ok=True)
            path.write_text(text, encoding="utf-8")
        return tmp_path

    return write
