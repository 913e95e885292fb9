"""Makers of findings, records and runs that say only what matters to a test."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import pytest

from verify.findings.finding import Deviation, Finding, Level
from verify.findings.location import Locus, Place, Span
from verify.findings.result import RecordResult, verdict_of
from verify.findings.run import RunResult

Make = Callable[..., Any]


@pytest.fixture
def deviation() -> Deviation:
    """An accepted finding of C-1."""
    return Deviation("C-1", "0" * 16, "rotamers", "A. Chemist", "2026-01-01", "2027-01-01")


@pytest.fixture
def make_finding() -> Make:
    """A finding at line 9, column 14 of a record, a warning unless said otherwise."""

    def make(rule: str = "shift-unlikely", level: Level = Level.WARNING, **given: Any) -> Finding:
        place = given.pop("place", Place("reg/compounds/C-1/record.yaml", 9, 14, 9, 18, "/spectra/0/report"))
        said = {"message": "8.38 fits OCH3 poorly", "remedy": "Check the digits.", "subject": "8.38"} | given
        locus = Locus("/spectra/0/report", Span(0, 4), 0, 1)
        return Finding(rule=rule, level=level, locus=locus, place=place, fingerprint="0123456789abcdef", **said)

    return make


@pytest.fixture
def make_record() -> Make:
    """A record with these findings and the verdict that follows from them."""

    def make(compound: str = "C-1", *findings: Finding, because: str = "") -> RecordResult:
        file = f"reg/compounds/{compound}/record.yaml"
        verdict = verdict_of(findings, bool(because))
        return RecordResult(compound, file, verdict, findings, (), because)

    return make


@pytest.fixture
def make_run() -> Make:
    """A run over these records under a policy that holds what is contradicted or unassessed."""

    def make(*records: RecordResult, **given: Any) -> RunResult:
        fixed = {"source": "reg", "registry": "R", "policy": "registration", "rulebook": "0" * 64, "version": "1"}
        fixed |= {"holds": ("contradicted", "unassessed"), "made_at": "2026-12-01T12:00:00+00:00"} | given
        return RunResult(records=records, **fixed)

    return make
