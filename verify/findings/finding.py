"""A finding: which rule, how serious, where, why, and what to do."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from enum import StrEnum

from verify.findings.location import Locus, Place
from verify.findings.problem import Scalar


class Level(StrEnum):
    """Levels of SARIF 2.1.0 (OASIS), section 3.27.10."""

    ERROR = "error"
    WARNING = "warning"
    NOTE = "note"


@dataclass(frozen=True, slots=True)
class Deviation:
    """A finding that a person accepted for one compound, with reason and expiry (ISO dates)."""

    compound: str
    fingerprint: str
    reason: str
    accepted_by: str
    accepted_on: str
    expires_on: str


@dataclass(frozen=True, slots=True)
class Finding:
    """One statement of one rule about one record.

    ``subject`` is the normalised thing spoken of (such as ``1H:7.26``); with compound, nucleus and rule it
    makes the ``fingerprint``, which therefore survives reformatting and reordering of the list.
    """

    rule: str
    level: Level
    message: str
    locus: Locus
    place: Place | None
    remedy: str
    subject: str
    fingerprint: str
    nucleus: str = ""
    evidence: Mapping[str, Scalar] = field(default_factory=dict)
    deviation: Deviation | None = None

    @property
    def stands(self) -> bool:
        """True unless a valid deviation accepts it."""
        return self.deviation is None

    @property
    def sort_key(self) -> tuple[str, int, int, str, str]:
        """File, line, column, rule, fingerprint: the order of every report."""
        if self.place is None:
            return ("", 0, 0, self.rule, self.fingerprint)
        return (self.place.file, self.place.line, self.place.column, self.rule, self.fingerprint)
