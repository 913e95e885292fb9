"""No published list may break the tool: every one ends in a verdict, with a reason where it is not judged.

Sources: the ``source`` field of each record in tests/reference/published_facts.jsonl; the wider set is read
from the data folder beside the repository (``PEAKWITNESS_DATA`` or ``../shared/data``) where it is there.
"""

from __future__ import annotations

import json
import os
from pathlib import Path
from typing import Any

import pytest

import verify

ROOT = Path(__file__).parents[2]
FACTS = ROOT / "tests" / "reference" / "published_facts.jsonl"
WIDER = Path(os.environ.get("PEAKWITNESS_DATA", ROOT.parent / "shared" / "data")) / "published_lists.jsonl"
EVERY = 12  # of the wider set, one record in so many; tests/bench/accuracy.py runs them all


def _rows(path: Path) -> list[dict[str, Any]]:
    if not path.is_file():
        return []
    return [json.loads(line) for line in path.read_text(encoding="utf-8").splitlines()]


def _record(row: dict[str, Any]) -> dict[str, Any]:
    spectra = [{"nucleus": nucleus, "report": text} for nucleus, text in row["nucleus_texts"].items()]
    return {"compound": row["id"], "structure": {"smiles": row["smiles"]}, "spectra": spectra}


def _assert_judged(row: dict[str, Any]) -> None:
    result = verify.examine(_record(row), policy="registration")
    assert result.verdict in ("consistent", "queried", "contradicted", "unassessed")
    assert "tool-fault" not in {finding.rule for finding in result.findings}, result.findings
    if result.verdict == "unassessed":
        assert result.unassessed_because


def test_facts_are_complete() -> None:
    rows = _rows(FACTS)
    assert len(rows) == 68
    assert all(row["source"] and row["smiles"] and row["nucleus_texts"] for row in rows)


@pytest.mark.parametrize("row", _rows(FACTS), ids=lambda row: str(row["id"]))
def test_published_fact_ends_in_a_verdict(row: dict[str, Any]) -> None:
    _assert_judged(row)


@pytest.mark.skipif(not WIDER.is_file(), reason="the wider data set is not beside the repository")
def test_sample_of_the_wider_set_ends_in_verdicts() -> None:
    rows = _rows(WIDER)[::EVERY]
    assert rows
    for row in rows:
        _assert_judged(row)
