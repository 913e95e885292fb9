"""The result of a whole run: every record once, what concerns the registry as a whole, and what judged it."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass

from verify.findings.finding import Finding, Level
from verify.findings.result import RecordResult, Verdict


@dataclass(frozen=True, slots=True)
class RunResult:
    """``records`` in the order of the source; ``notices`` are findings about no single record.

    ``policy`` and ``rulebook`` (digest) say what judged; ``holds`` the verdicts that hold a record.
    ``made_at`` (ISO 8601, UTC) is the one value that differs between two runs over the same input.
    """

    source: str
    registry: str
    policy: str
    rulebook: str
    version: str
    holds: tuple[str, ...]
    records: tuple[RecordResult, ...]
    notices: tuple[Finding, ...] = ()
    made_at: str = ""

    @property
    def counts(self) -> dict[Verdict, int]:
        """Records by verdict, every verdict named."""
        found = Counter(record.verdict for record in self.records)
        return {verdict: found.get(verdict, 0) for verdict in Verdict}

    @property
    def held(self) -> tuple[RecordResult, ...]:
        """Records that the policy holds."""
        return tuple(record for record in self.records if record.verdict in self.holds)

    @property
    def accepted(self) -> int:
        """Findings that a deviation accepts."""
        return sum(not finding.stands for finding in self.findings())

    @property
    def is_clear(self) -> bool:
        """True where no record is held and no notice about the registry is an error."""
        return not self.held and not any(n.level is Level.ERROR and n.stands for n in self.notices)

    def number_of(self, level: Level) -> int:
        """Standing findings of one level, notices included."""
        return sum(finding.level is level and finding.stands for finding in self.findings())

    def findings(self) -> Iterator[Finding]:
        """Notices, then the findings of the records, in order."""
        yield from self.notices
        for record in self.records:
            yield from record.findings
