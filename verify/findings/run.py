"""The result of a run over many records: what reports are written from."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass

from verify.findings.finding import Finding, Level
from verify.findings.result import RecordResult, Verdict


@dataclass(frozen=True, slots=True)
class RunResult:
    """``records`` in the order of the source; ``findings`` speak of the registry as a whole.

    ``holds`` are the verdicts at which the policy holds a record. ``made_at`` (ISO 8601, UTC) is the one value
    that differs between two runs over the same input.
    """

    records: tuple[RecordResult, ...]
    findings: tuple[Finding, ...]
    registry: str
    path: str
    policy: str
    holds: tuple[str, ...]
    rulebook_digest: str
    tool_version: str
    made_at: str

    @property
    def verdicts(self) -> dict[Verdict, int]:
        """Number of records of each verdict, zeros included."""
        counted = Counter(record.verdict for record in self.records)
        return {verdict: counted[verdict] for verdict in Verdict}

    @property
    def held(self) -> tuple[RecordResult, ...]:
        """Records that the policy does not let pass."""
        return tuple(record for record in self.records if record.verdict in self.holds)

    def number_of(self, level: Level) -> int:
        """Standing findings of one level, those about the registry included."""
        return sum(f.level is level and f.stands for f in self.all_findings())

    @property
    def accepted(self) -> int:
        """Findings that a deviation accepts."""
        return sum(not f.stands for f in self.all_findings())

    @property
    def is_clear(self) -> bool:
        """True where no record is held and nothing about the registry as a whole is an error."""
        return not self.held and not any(f.level is Level.ERROR and f.stands for f in self.findings)

    def all_findings(self) -> tuple[Finding, ...]:
        """Findings about the registry, then those of the records, in order."""
        return self.findings + tuple(f for record in self.records for f in record.findings)
