"""The result of one record and of a run."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from enum import StrEnum
from typing import Any

from verify.findings.finding import Finding, Level
from verify.findings.plain import finding_entry, plain


class Verdict(StrEnum):
    """What the list says against the structure; ``CONSISTENT`` is no proof of identity."""

    CONSISTENT = "consistent"
    QUERIED = "queried"
    CONTRADICTED = "contradicted"
    UNASSESSED = "unassessed"


@dataclass(frozen=True, slots=True)
class RecordResult:
    """``assignment`` holds one plain mapping per spectrum, as the report schema describes it.

    ``unassessed_because`` is a sentence, empty unless the verdict is ``UNASSESSED``.
    ``seconds`` is measured by the engine and stays out of reports that must be reproducible.
    """

    compound: str
    file: str
    verdict: Verdict
    findings: tuple[Finding, ...]
    assignment: tuple[Mapping[str, Any], ...] = ()
    unassessed_because: str = ""
    summary: Mapping[str, Any] = field(default_factory=dict)

    def standing(self, level: Level) -> tuple[Finding, ...]:
        """Findings of this level that no deviation accepts."""
        return tuple(f for f in self.findings if f.level is level and f.stands)

    def as_dict(self) -> dict[str, Any]:
        """One ``records[]`` entry of the report schema; every key is always there."""
        return {
            "compound": self.compound,
            "file": self.file,
            "verdict": str(self.verdict),
            "unassessed_because": self.unassessed_because,
            "summary": plain(self.summary),
            "findings": [finding_entry(finding) for finding in self.findings],
            "assignment": plain(self.assignment),
        }


def verdict_of(findings: tuple[Finding, ...], unassessed: bool) -> Verdict:
    """Worst standing finding decides; an unassessed record with a standing error stays contradicted."""
    levels = {f.level for f in findings if f.stands}
    if Level.ERROR in levels:
        return Verdict.CONTRADICTED
    if unassessed:
        return Verdict.UNASSESSED
    return Verdict.QUERIED if Level.WARNING in levels else Verdict.CONSISTENT
