"""Accepted deviations: read from their file, matched by fingerprint, reported when expired or without match."""

from __future__ import annotations

import hashlib
from collections.abc import Sequence
from dataclasses import replace
from datetime import date
from pathlib import Path

from verify.errors import ConfigurationError
from verify.findings.finding import Deviation, Finding
from verify.rulebook.documents import read_document


def fingerprint(compound: str, rule: str, nucleus: str, subject: str) -> str:
    """Sixteen hexadecimal digits that stay the same when the list is reformatted or put in another order."""
    return hashlib.sha256("\n".join((compound, rule, nucleus, subject)).encode()).hexdigest()[:16]


def load_deviations(path: str | Path) -> tuple[Deviation, ...]:
    """Entries of a deviations file; raises ConfigurationError naming file, entry and key."""
    found = read_document(Path(path), "deviations")
    entries = []
    for number, entry in enumerate(found["deviations"]):
        for key in ("accepted_on", "expires_on"):
            try:
                date.fromisoformat(entry[key])
            except ValueError as error:
                raise ConfigurationError(f"{path}: deviations/{number}/{key}: {error}") from error
        entries.append(Deviation(**entry))
    doubled = {(d.compound, d.fingerprint) for d in entries if sum(_same(d, o) for o in entries) > 1}
    if doubled:
        compound, mark = sorted(doubled)[0]
        raise ConfigurationError(f"{path}: {compound} accepts {mark} twice")
    return tuple(entries)


def _same(one: Deviation, other: Deviation) -> bool:
    return (one.compound, one.fingerprint) == (other.compound, other.fingerprint)


def accept(findings: Sequence[Finding], deviations: Sequence[Deviation], today: str) -> tuple[Finding, ...]:
    """Findings with the deviation that accepts them; one that has expired accepts nothing."""
    valid = {d.fingerprint: d for d in deviations if d.expires_on >= today}
    return tuple(replace(f, deviation=valid.get(f.fingerprint)) for f in findings)
