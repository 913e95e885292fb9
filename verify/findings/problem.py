"""What a stage could not read or decide; the rulebook turns each into a finding."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from verify.findings.location import Locus

Scalar = str | int | float | bool | None


@dataclass(frozen=True, slots=True)
class Problem:
    """``code`` is kebab-case and stable; a rule of scope ``problem`` decides what it means.

    ``blocks`` names what cannot be judged because of it: "record", "spectrum", "signal" or "" (read on).
    """

    code: str
    message: str
    locus: Locus = Locus()
    blocks: str = ""
    expected: str = ""
    evidence: Mapping[str, Scalar] = field(default_factory=dict)
