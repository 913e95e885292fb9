"""Joins what authors write together: "7.33-7.24, 6.96-6.87 (m, 4H)" and "8.15 and 7.79 (two m, 2H each)"."""

from __future__ import annotations

import re
from dataclasses import replace

from verify.findings.location import Span
from verify.peaklist.model import Signal

_BETWEEN = re.compile(r"\s*(?:[,;/&]|and)?\s*(?:and)?\s*")
_EACH = re.compile(r"\b(?:each|apiece)\b", re.IGNORECASE)
MOST_JOINED = 8


def _bare(signal: Signal) -> bool:
    return signal.multiplicity is None and signal.nuclei is None and not signal.couplings and not signal.annotation


def joined_ranges(signals: list[Signal], plain_text: str) -> list[Signal]:
    """Shifts without details of their own join the signal right behind them: as one range, or, where the text says
    "each", as signals with the same details."""
    found: list[Signal] = []
    waiting: list[Signal] = []
    for signal in signals:
        if waiting and not _BETWEEN.fullmatch(plain_text, waiting[-1].span.end, signal.span.start):
            found += waiting
            waiting = []
        if _bare(signal) and len(waiting) < MOST_JOINED:
            waiting.append(signal)
            continue
        found += _together(waiting, signal) if waiting else [signal]
        waiting = []
    return found + waiting


def _together(bare: list[Signal], signal: Signal) -> list[Signal]:
    if _EACH.search(signal.annotation):
        told = [replace(signal, low=b.low, high=b.high, span=b.span, shift_span=b.shift_span) for b in bare]
        return [*told, signal]
    low = min(signal.low, *(b.low for b in bare))
    high = max(signal.high, *(b.high for b in bare))
    return [replace(signal, low=low, high=high, span=Span(bare[0].span.start, signal.span.end))]
