"""Lists of ordinary compounds as published or as handbooks give them must not be contradicted.

The source of each stands in its ``source`` field in tests/reference/worked_examples.yaml; entries from
memory say so.
"""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
import yaml

import verify

TABLE = Path(__file__).parents[1] / "reference" / "worked_examples.yaml"
EXAMPLES: list[dict[str, Any]] = yaml.safe_load(TABLE.read_text(encoding="utf-8"))["examples"]
# Name -> why the tool may hold it.
EXPLAINED: dict[str, str] = {}


def _proton(signal: dict[str, Any]) -> str:
    shift = signal["shift"]
    place = f"{shift[1]:.2f}–{shift[0]:.2f}" if isinstance(shift, list) else f"{shift:.2f}"
    couplings = ", ".join(f"{value:.1f}" for value in signal["J"])
    letters = f"{signal['mult']}, J = {couplings} Hz" if couplings else signal["mult"]
    return f"{place} ({letters}, {signal['nH']}H)"


def _carbon(line: float | dict[str, Any]) -> str:
    if isinstance(line, dict):
        return f"{line['shift']:.1f} ({line['mult']}, J = {line['J'][0]:.1f} Hz)"
    return f"{line:.1f}"


def _record(example: dict[str, Any]) -> dict[str, Any]:
    field = example["frequency_mhz"] or 400
    lists = {
        "1H": ", ".join(_proton(signal) for signal in example["signals"]),
        "13C": ", ".join(_carbon(line) for line in example["carbons"] or ()),
    }
    spectra = [
        {"nucleus": nucleus, "field_mhz": field if nucleus == "1H" else field / 4, "report": text}
        | ({"solvent": example["solvent"]} if example["solvent"] else {})
        for nucleus, text in lists.items()
        if text
    ]
    return {"compound": example["name"], "structure": {"smiles": example["smiles"]}, "spectra": spectra}


@pytest.mark.parametrize("example", EXAMPLES, ids=[f"{e['name']}-{e['solvent']}" for e in EXAMPLES])
def test_worked_example_is_not_contradicted(example: dict[str, Any]) -> None:
    result = verify.examine(_record(example), policy="registration")
    if example["name"] in EXPLAINED:
        assert result.verdict in ("contradicted", "unassessed"), "explained exception is no longer needed"
        return
    errors = [f"{finding.rule}: {finding.message}" for finding in result.findings if finding.level == "error"]
    assert result.verdict in ("consistent", "queried"), errors or result.unassessed_because
