"""Findings as plain data: the entries that every machine report and ``as_dict`` share."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import asdict
from typing import Any

from verify.findings.finding import Finding
from verify.findings.location import Locus, Place


def finding_entry(finding: Finding) -> dict[str, Any]:
    """One ``findings[]`` entry of the report schema; every key is always there."""
    return {
        "rule": finding.rule,
        "level": str(finding.level),
        "stands": finding.stands,
        "message": finding.message,
        "remedy": finding.remedy,
        "nucleus": finding.nucleus,
        "subject": finding.subject,
        "fingerprint": finding.fingerprint,
        "place": place_entry(finding.place),
        "locus": _locus_entry(finding.locus),
        "evidence": plain(finding.evidence),
        "deviation": asdict(finding.deviation) if finding.deviation else None,
    }


def place_entry(place: Place | None) -> dict[str, Any] | None:
    """Where it stands; None for what has no place, such as a whole registry."""
    return asdict(place) | {"length": place.length} if place is not None else None


def _locus_entry(locus: Locus) -> dict[str, Any]:
    return {
        "pointer": locus.pointer,
        "span": [locus.span.start, locus.span.end] if locus.span else None,
        "spectrum": locus.spectrum,
        "signal": locus.signal,
    }


def plain(value: Any) -> Any:
    """Values that JSON can hold; numbers that are not finite become None, anything unknown its text."""
    if value is None or isinstance(value, bool | int | str):
        return value if type(value) in (bool, int, str, type(None)) else _plain_subclass(value)
    if isinstance(value, float):
        return float(value) if math.isfinite(value) else None
    if isinstance(value, Mapping):
        return {str(key): plain(held) for key, held in value.items()}
    if isinstance(value, set | frozenset):
        return sorted(str(held) for held in value)
    if isinstance(value, list | tuple):
        return [plain(held) for held in value]
    return plain(value.tolist()) if hasattr(value, "tolist") else str(value)


def _plain_subclass(value: Any) -> Any:
    """Enumerations of text or numbers, as what they stand for."""
    return str(value) if isinstance(value, str) else int(value)
