"""The report for machines: one JSON document, described by ``report.schema.json``."""

from __future__ import annotations

import json
from functools import lru_cache
from importlib.resources import files
from typing import Any

from verify.findings.finding import Level
from verify.findings.plain import finding_entry
from verify.findings.run import RunResult

FORMAT = "peakwitness-report/1"


def report_of(run: RunResult, *, with_records: bool = True) -> dict[str, Any]:
    """The report as plain data; only ``made_at`` differs between two runs over the same input."""
    return {
        "format": FORMAT,
        "tool": {"name": "peakwitness", "version": run.version},
        "made_at": run.made_at,
        "registry": {"name": run.registry, "source": run.source},
        "policy": {"name": run.policy, "holds": list(run.holds)},
        "rulebook": {"digest": run.rulebook},
        "counts": _counts(run),
        "clear": run.is_clear,
        "notices": [finding_entry(notice) for notice in run.notices],
        "records": [record.as_dict() for record in run.records] if with_records else [],
    }


def write_json(run: RunResult, *, with_records: bool = True) -> str:
    """The report as text, keys in a fixed order, ending in a line break."""
    return json_text(report_of(run, with_records=with_records))


def json_text(value: Any) -> str:
    """Indented JSON that keeps δ and other letters; raises ValueError for numbers JSON cannot hold."""
    return json.dumps(value, ensure_ascii=False, indent=2, allow_nan=False) + "\n"


@lru_cache(maxsize=1)
def report_schema() -> dict[str, Any]:
    """The shipped JSON Schema (2020-12) of the report."""
    text = files("verify.report").joinpath("report.schema.json").read_text(encoding="utf-8")
    schema: dict[str, Any] = json.loads(text)
    return schema


def _counts(run: RunResult) -> dict[str, Any]:
    return {
        "records": len(run.records),
        "held": len(run.held),
        "verdicts": {str(verdict): number for verdict, number in run.counts.items()},
        "findings": {str(level): run.number_of(level) for level in Level} | {"accepted": run.accepted},
    }
