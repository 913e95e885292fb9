"""SARIF against the published schema, and the sense of what it carries.

source: OASIS, Static Analysis Results Interchange Format (SARIF) Version 2.1.0, errata 01; the schema is an unmodified
copy of sarif-2.1/schema/sarif-schema-2.1.0.json of the OASIS repository oasis-tcs/sarif-spec, commit e0583813964e.
"""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import jsonschema
import pytest

from verify.api import gate
from verify.report.sarif import sarif_of, uri_of
from verify.rulebook.source import load_rulebook

REFERENCE = Path(__file__).parents[1] / "reference"
EXAMPLE = Path(__file__).parents[2] / "registry_example"
RULES = load_rulebook("registration").rules


@pytest.fixture(scope="module")
def incoming() -> dict[str, Any]:
    return sarif_of(gate(str(EXAMPLE / "incoming")), RULES)


def test_the_log_is_valid(incoming: dict[str, Any]) -> None:
    schema = json.loads((REFERENCE / "sarif-schema-2.1.0.json").read_text(encoding="utf-8"))
    jsonschema.Draft4Validator(schema, format_checker=jsonschema.FormatChecker()).validate(incoming)


def test_every_region_holds_the_text_it_speaks_of(incoming: dict[str, Any]) -> None:
    seen = 0
    for result in incoming["runs"][0]["results"]:
        logical = result["locations"][0]["logicalLocations"]
        if result["ruleId"] != "impossible-coupling" or logical[0]["name"] != "INC-05":
            continue
        physical = result["locations"][0]["physicalLocation"]
        region = physical["region"]
        file = Path(physical["artifactLocation"]["uri"].removeprefix("file://"))
        line = file.read_text(encoding="utf-8").splitlines()[region["startLine"] - 1]
        assert line[region["startColumn"] - 1 : region["endColumn"] - 1] == "67.0"
        assert [place["name"] for place in logical] == ["INC-05", "1H", "signal 1"]
        seen += 1
    assert seen > 0


def test_rules_are_described_and_pointed_at(incoming: dict[str, Any]) -> None:
    driver = incoming["runs"][0]["tool"]["driver"]
    for result in incoming["runs"][0]["results"]:
        assert driver["rules"][result["ruleIndex"]]["id"] == result["ruleId"]
    assert all("help" in rule for rule in driver["rules"])


def test_accepted_findings_are_suppressed_and_not_lost() -> None:
    log = sarif_of(gate(str(EXAMPLE)), RULES)
    suppressed = [r for r in log["runs"][0]["results"] if r.get("suppressions")]
    assert len(suppressed) == 2
    assert all(r["suppressions"][0]["justification"] for r in suppressed)


def test_file_names_become_uris() -> None:
    assert uri_of("registry/compounds/A 1/record.yaml") == "registry/compounds/A%201/record.yaml"
    assert uri_of("/data/δ.yaml") == "file:///data/%CE%B4.yaml"
