"""The published lists and the referee's verdicts as the benchmarks read them."""

from __future__ import annotations

import hashlib
import json
import os
from dataclasses import dataclass
from pathlib import Path
from typing import Any

ROOT = Path(__file__).parents[2]
DATA = Path(os.environ.get("PEAKWITNESS_DATA", ROOT.parent / "shared" / "data"))


@dataclass(frozen=True, slots=True)
class Published:
    """One published compound. ``half`` is "A" (may be read while developing) or "B" (figures only).

    ``referee`` is "passes" (a careful reader would not return it), "returns", or "" (not read, or unclear).
    """

    id: str
    smiles: str
    texts: dict[str, str]
    in_bounds: bool
    half: str
    referee: str
    cause: str

    def record(self) -> dict[str, Any]:
        """The mapping that ``verify.examine`` takes."""
        spectra = [{"nucleus": nucleus, "report": text} for nucleus, text in self.texts.items()]
        return {"compound": self.id, "structure": {"smiles": self.smiles}, "spectra": spectra}


def half_of(group: str) -> str:
    """Half of an article, fixed by its name alone, so that no article stands in both.

    The second bit decides: the data folder itself was cut by the first.
    """
    return "B" if int(hashlib.sha256(group.encode()).hexdigest(), 16) >> 1 & 1 else "A"


def _lines(name: str) -> list[dict[str, Any]]:
    path = DATA / name
    return [json.loads(line) for line in path.read_text(encoding="utf-8").splitlines() if line.strip()]


def _referee() -> dict[str, tuple[str, str]]:
    found: dict[str, tuple[str, str]] = {}
    for row in _lines("adjudication.jsonl"):
        word = "returns" if row["severity"] == "yes" else "passes"
        found[row["id"]] = ("" if row["verdict"] == "unclear" else word, row["cause"])
    return found


def available() -> bool:
    """True where the data folder is beside the repository."""
    return (DATA / "published_lists.jsonl").is_file()


def load() -> list[Published]:
    """All published lists in file order."""
    referee = _referee()
    rows = []
    for row in _lines("published_lists.jsonl"):
        word, cause = referee.get(row["id"], ("", ""))
        half = half_of(row["group"])
        texts = dict(row["nucleus_texts"])
        rows.append(Published(row["id"], row["smiles"], texts, row["scan"]["in_bounds"], half, word, cause))
    return rows
