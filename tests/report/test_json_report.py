"""The JSON report against its shipped schema, for real runs and for odd values."""

from __future__ import annotations

import json
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import Any

import jsonschema
import pytest

from verify.engine.run import gate_folder
from verify.findings.finding import Deviation, Level
from verify.findings.plain import plain
from verify.report.json_report import json_text, report_of, report_schema, write_json

EXAMPLE = Path(__file__).parents[2] / "registry_example"
Make = Callable[..., Any]


def _check(report: dict[str, Any]) -> None:
    jsonschema.Draft202012Validator(report_schema()).validate(report)


def test_schema_is_itself_valid_and_closed() -> None:
    schema = report_schema()
    jsonschema.Draft202012Validator.check_schema(schema)
    assert schema["additionalProperties"] is False
    assert all(schema["$defs"][name]["additionalProperties"] is False for name in ("record", "finding", "place"))


@pytest.mark.parametrize("folder", ["", "incoming"])
def test_real_runs_follow_the_schema(folder: str) -> None:
    run = gate_folder(str(EXAMPLE / folder), today="2026-12-01")
    report = json.loads(write_json(run))
    _check(report)
    assert report["counts"]["records"] == len(report["records"]) == sum(report["counts"]["verdicts"].values())
    assert report["clear"] == (report["counts"]["held"] == 0)


def test_only_the_time_differs_between_two_runs() -> None:
    one, two = (gate_folder(str(EXAMPLE / "incoming"), today="2026-12-01") for _ in range(2))
    assert write_json(replace(one, made_at="")) == write_json(replace(two, made_at=""))


def test_every_kind_of_finding_follows_the_schema(
    make_finding: Make, make_record: Make, make_run: Make, deviation: Deviation
) -> None:
    findings = (
        make_finding(level=Level.ERROR, evidence={"shift": 8.38, "far": float("inf"), "text": "δ", "none": None}),
        make_finding(deviation=deviation),
        make_finding(place=None, nucleus="13C"),
    )
    record = make_record("C-1", *findings)
    run = make_run(record, make_record("C-2", because="no list"), notices=(make_finding("deviation-unmatched"),))
    report = json.loads(write_json(run))
    _check(report)
    assert report["counts"]["findings"] == {"error": 1, "warning": 2, "note": 0, "accepted": 1}
    first = report["records"][0]["findings"][0]
    assert first["evidence"]["far"] is None
    assert first["place"]["length"] == 4
    assert report["records"][0]["findings"][1]["stands"] is False
    assert report["records"][1]["unassessed_because"] == "no list"


def test_a_key_that_is_not_described_is_refused(make_record: Make, make_run: Make) -> None:
    report = report_of(make_run(make_record()))
    _check(report)
    report["records"][0]["mood"] = "good"
    with pytest.raises(jsonschema.ValidationError, match="mood"):
        _check(report)


def test_an_unassessed_record_must_say_why(make_record: Make, make_run: Make) -> None:
    report = report_of(make_run(make_record("C-1", because="no list")))
    report["records"][0]["unassessed_because"] = ""
    with pytest.raises(jsonschema.ValidationError):
        _check(report)


def test_letters_stay_readable_and_no_number_escapes_json() -> None:
    assert "δ" in json_text({"text": "δ 4.12"})
    with pytest.raises(ValueError, match="JSON"):
        json_text(float("nan"))


@pytest.mark.parametrize(
    ("value", "expected"),
    [
        (Level.ERROR, "error"),
        (float("nan"), None),
        ((1, 2.5), [1, 2.5]),
        ({"b", "a"}, ["a", "b"]),
        ({1: True}, {"1": True}),
        (Path("a"), "a"),
    ],
)
def test_plain_values(value: object, expected: object) -> None:
    found = plain(value)
    assert found == expected
    assert type(found) is type(expected)


def test_plain_values_of_numerical_libraries() -> None:
    import numpy as np

    assert plain(np.float64(2.5)) == 2.5
    assert type(plain(np.int64(3))) is int
    assert plain(np.array([1.0, np.inf])) == [1.0, None]
