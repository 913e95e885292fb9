"""The real command on the example: accepted records pass, each planted fault is named where it stands."""

from __future__ import annotations

import json
import subprocess
import sys
from datetime import date
from pathlib import Path
from typing import Any

import pytest
import yaml

ROOT = Path(__file__).parents[2]
EXAMPLE = ROOT / "registry_example"
INCOMING = EXAMPLE / "incoming"
FAULTS = yaml.safe_load((INCOMING / "FAULTS.yaml").read_text(encoding="utf-8"))["faults"]
TODAY = date.today()


def _gate(path: Path, report: Path) -> tuple[int, dict[str, Any]]:
    command = [sys.executable, "-m", "verify.cli.main", "gate", str(path), "--json", str(report)]
    done = subprocess.run(command, cwd=ROOT, capture_output=True, text=True, timeout=120, check=False)
    assert "Traceback" not in done.stderr, done.stderr
    return done.returncode, json.loads(report.read_text(encoding="utf-8"))


@pytest.fixture(scope="module")
def accepted(tmp_path_factory: pytest.TempPathFactory) -> tuple[int, dict[str, Any]]:
    return _gate(EXAMPLE, tmp_path_factory.mktemp("accepted") / "report.json")


@pytest.fixture(scope="module")
def incoming(tmp_path_factory: pytest.TempPathFactory) -> tuple[int, dict[str, Any]]:
    return _gate(INCOMING, tmp_path_factory.mktemp("incoming") / "report.json")


def _folders(registry: Path) -> set[str]:
    return {path.parent.name for path in registry.glob("compounds/*/record.yaml")}


def _place_of(text: str, record: Path) -> tuple[int, int]:
    """Line and column, from 1, of a text that must stand in the file exactly once."""
    whole = record.read_text(encoding="utf-8")
    assert whole.count(text) == 1, f"{text!r} stands {whole.count(text)} times in {record}"
    before = whole[: whole.index(text)]
    return before.count("\n") + 1, len(before) - (before.rfind("\n") + 1) + 1


def test_accepted_registry_passes(accepted: tuple[int, dict[str, Any]]) -> None:
    status, report = accepted
    held = {r["compound"]: r["findings"] for r in report["records"] if r["verdict"] != "consistent"}
    assert held == {}
    assert status == 0


def test_every_accepted_record_is_reported_once(accepted: tuple[int, dict[str, Any]]) -> None:
    compounds = [record["compound"] for record in accepted[1]["records"]]
    assert sorted(compounds) == sorted(_folders(EXAMPLE))
    assert len(compounds) >= 34


def test_two_findings_are_accepted_by_deviations(accepted: tuple[int, dict[str, Any]]) -> None:
    deviations = yaml.safe_load((EXAMPLE / "deviations.yaml").read_text(encoding="utf-8"))["deviations"]
    silenced = {
        (record["compound"], finding["fingerprint"])
        for record in accepted[1]["records"]
        for finding in record["findings"]
        if finding.get("deviation")
    }
    assert {(d["compound"], d["fingerprint"]) for d in deviations} == silenced
    assert len({compound for compound, _ in silenced}) == 2
    assert all(d["reason"] and d["accepted_by"] and d["expires_on"] > TODAY.isoformat() for d in deviations)


def test_incoming_is_held(incoming: tuple[int, dict[str, Any]]) -> None:
    status, report = incoming
    assert status == 1
    assert sorted(record["compound"] for record in report["records"]) == sorted(_folders(INCOMING))


def test_every_submission_has_one_documented_fault() -> None:
    assert sorted(fault["compound"] for fault in FAULTS) == sorted(_folders(INCOMING))
    assert len({fault["rule"] for fault in FAULTS}) >= 14


@pytest.mark.parametrize("fault", FAULTS, ids=[f"{f['compound']}-{f['rule']}" for f in FAULTS])
def test_planted_fault_is_named_at_its_place(
    fault: dict[str, str], incoming: tuple[int, dict[str, Any]]
) -> None:
    record = INCOMING / "compounds" / fault["compound"] / "record.yaml"
    reported = next(r for r in incoming[1]["records"] if r["compound"] == fault["compound"])
    assert reported["verdict"] != "consistent"
    places = {
        (finding["rule"], finding["place"]["line"], finding["place"]["column"])
        for finding in reported["findings"]
        if Path(finding["place"]["file"]).parts[-2:] == record.parts[-2:]
    }
    assert (fault["rule"], *_place_of(fault["at"], record)) in places, reported["findings"]
