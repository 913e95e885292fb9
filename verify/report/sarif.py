"""The report as SARIF 2.1.0 (OASIS), for code hosts and editors: every finding at its characters in the record."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from pathlib import PurePath
from typing import Any
from urllib.parse import quote

from verify.findings.finding import Finding
from verify.findings.location import Place
from verify.findings.run import RunResult
from verify.rulebook.model import Rule

SCHEMA = "https://docs.oasis-open.org/sarif/sarif/v2.1.0/errata01/os/schemas/sarif-schema-2.1.0.json"
FINGERPRINT = "peakwitnessFinding/v1"


def sarif_of(run: RunResult, rules: Sequence[Rule]) -> dict[str, Any]:
    """The SARIF log of a run; ``rules`` are those of its rulebook. Accepted findings are suppressed, not left out."""
    used = sorted({finding.rule for finding in run.findings()} | {rule.id for rule in rules})
    known = {rule.id: rule for rule in rules}
    number = {rule: n for n, rule in enumerate(used)}
    results = [_result(finding, "", number) for finding in run.notices]
    for record in run.records:
        results += [_result(finding, record.compound, number) for finding in record.findings]
    return {
        "$schema": SCHEMA,
        "version": "2.1.0",
        "runs": [
            {
                "tool": {
                    "driver": {
                        "name": "peakwitness",
                        "semanticVersion": run.version,
                        "rules": [_descriptor(name, known.get(name)) for name in used],
                    }
                },
                "columnKind": "unicodeCodePoints",
                "invocations": [{"executionSuccessful": True, "endTimeUtc": run.made_at.replace("+00:00", "Z")}],
                "properties": {"policy": run.policy, "rulebook": run.rulebook},
                "results": results,
            }
        ],
    }


def _descriptor(name: str, rule: Rule | None) -> dict[str, Any]:
    """What the tool says of a rule as such."""
    if rule is None:
        return {"id": name}
    return {
        "id": rule.id,
        "shortDescription": {"text": rule.title},
        "help": {"text": f"{rule.remedy} Basis: {rule.basis}."},
        "defaultConfiguration": {"level": str(rule.level)},
        "properties": {"scope": rule.scope, "nuclei": list(rule.nuclei)},
    }


def _result(finding: Finding, compound: str, number: dict[str, int]) -> dict[str, Any]:
    found: dict[str, Any] = {
        "ruleId": finding.rule,
        "ruleIndex": number[finding.rule],
        "level": str(finding.level),
        "message": {"text": finding.message},
        "partialFingerprints": {FINGERPRINT: finding.fingerprint},
        "locations": [_location(finding, compound)],
        "properties": {"remedy": finding.remedy, "evidence": dict(finding.evidence)},
    }
    if finding.deviation is not None:
        reason = f"{finding.deviation.reason} ({finding.deviation.accepted_by}, until {finding.deviation.expires_on})"
        found["suppressions"] = [{"kind": "external", "status": "accepted", "justification": reason}]
    return found


def _location(finding: Finding, compound: str) -> dict[str, Any]:
    found: dict[str, Any] = {}
    if finding.place is not None and finding.place.file:
        found["physicalLocation"] = {
            "artifactLocation": {"uri": uri_of(finding.place.file)},
            "region": _region(finding.place),
        }
    logical = list(_logical(finding, compound))
    if logical:
        found["logicalLocations"] = logical
    return found


def _region(place: Place) -> dict[str, int]:
    """Lines and columns from 1; the end column is the one behind the last character."""
    end_column = max(place.end_column, place.column + 1) if place.end_line == place.line else place.end_column
    return {"startLine": place.line, "startColumn": place.column, "endLine": place.end_line, "endColumn": end_column}


def _logical(finding: Finding, compound: str) -> Iterator[dict[str, Any]]:
    """Compound, spectrum and signal, the outermost first."""
    names = [(compound, "compound")]
    if finding.nucleus:
        names.append((finding.nucleus, "spectrum"))
    if finding.locus.signal is not None:
        names.append((f"signal {finding.locus.signal + 1}", "signal"))
    path = ""
    for name, kind in names:
        if not name:
            return
        path = f"{path}/{name}" if path else name
        yield {"name": name, "fullyQualifiedName": path, "kind": kind}


def uri_of(file: str) -> str:
    """A file name as a URI reference: relative names stay relative, with forward slashes."""
    path = PurePath(file)
    posix = quote(path.as_posix(), safe="/-_.~")
    return f"file://{posix}" if path.is_absolute() else posix
