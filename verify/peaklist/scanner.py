"""Walks over a list and cuts it into signals: a shift or range, and the bracket or bare words that belong to it.

Every step moves forward by at least one character and looks ahead no further than ``LONGEST`` characters, so that
the work is proportional to the length of the text.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

LONGEST = 400
_SHIFT = re.compile(
    r"(?<![A-Za-z0-9_.])(?P<low>[-+]?\d{1,3}(?:\.\d{1,4}|\.\s\d{2,3}(?![.\d])|,\d{1,3}(?![\d.]))?)(?![\dA-Za-z'])"
    r"(?:\s*(?:-|to|~|–)\s*(?P<high>[-+]?\d{1,3}(?:[.,]\d{1,4})?)(?![\dA-Za-z'.]))?"
)
_UNIT = re.compile(r"\s*ppm\b\.?")
# Behind a bracket that was never closed the next signal begins like this.
_NEXT_SIGNAL = re.compile(
    r"[,;.]?\s+-?\d{1,2}\.\d{1,3}(?:\s*-\s*-?\d{1,2}\.\d{1,3})?\s*\(\s*(?:\d{1,2}\s?H|br|app|[sdtqmp]{1,4}\b|quint|sext|sept)"
)
_BARE_START = re.compile(r"[\s,:]{0,3}(?=(?:br?\.?\s*|app\.?\s*)?(?:s|d|t|q|m|dd|dt|td|ddd|quint?|sext|sept|p)(?:\s*[,;(.:\s]|$)|\d{1,2}\s?H\b)")
_BARE_NEXT = re.compile(r"(?:[;,.]|\band\b|\s)\s*-?\d{1,3}\.\d{1,3}\s*(?:-\s*-?\d{1,3}\.\d{1,3}\s*)?(?=[,:;(\s]|$)(?!\s*(?:,\s*\d{1,3}\.\d+\s*){0,4}Hz)")
_COUPLING_BEFORE = re.compile(r"[=J]\s*$")


@dataclass(frozen=True, slots=True)
class Cut:
    """One signal in plain text: shift offsets ``[start, shift_end)``, details ``[inside, outside)`` (equal: none),
    ``end`` behind everything. ``unclosed`` is the offset of a bracket without its end, else -1."""

    start: int
    shift_end: int
    low: str
    high: str | None
    inside: int
    outside: int
    end: int
    unclosed: int = -1


def _closing(text: str, opening: int) -> tuple[int, bool]:
    """Offset of the bracket that closes ``text[opening]`` and True, or where the details end and False."""
    depth = 0
    limit = min(len(text), opening + LONGEST)
    for here in range(opening, limit):
        character = text[here]
        if character == "(":
            depth += 1
        elif character == ")":
            depth -= 1
            if depth == 0:
                return here, True
        elif depth == 1 and character in ",;. " and text[here + 1 : here + 2].isspace() and _NEXT_SIGNAL.match(text, here):
            return here, False
    return limit, False


def _bare(text: str, position: int) -> tuple[int, int] | None:
    """Details without brackets ("7.26, s, 1H, ArH; ..."): where they begin and end."""
    begun = _BARE_START.match(text, position)
    if begun is None:
        return None
    limit = min(len(text), position + LONGEST)
    semicolon = text.find(";", begun.end(), limit)
    if semicolon >= 0:
        return begun.end(), semicolon
    for following in _BARE_NEXT.finditer(text, begun.end(), limit):
        if not _COUPLING_BEFORE.search(text, max(0, following.start() - 6), following.start()):
            return begun.end(), following.start()
    return begun.end(), limit


def cuts(text: str, start: int, *, carbon: bool) -> Iterator[Cut]:
    """Signals of plain text from ``start`` on; ``carbon``: lines need no details."""
    position = start
    while position < len(text):
        found = _SHIFT.search(text, position)
        if found is None:
            return
        cut = _cut(text, found, carbon, start)
        if cut is None:
            position = found.end()
            continue
        yield cut
        position = max(cut.end, found.start() + 1)


def _cut(text: str, found: re.Match[str], carbon: bool, start: int) -> Cut | None:
    low, high, shift_end = found["low"], found["high"], found.end()
    if not _plausible(text, found, carbon, start):
        return None
    if high is not None and carbon and "." not in high and "." in low:
        high, shift_end = None, found.end("low")
    unit = _UNIT.match(text, shift_end)
    after = unit.end() if unit else shift_end
    opening = after
    while opening < len(text) and text[opening] in " =:*":
        opening += 1
    if text[opening : opening + 1] == "(":
        closing, closed = _closing(text, opening)
        end = closing + 1 if closed else closing
        return Cut(found.start(), shift_end, low, high, opening + 1, closing, end, -1 if closed else opening)
    bare = None if carbon else _bare(text, after)
    if bare is not None:
        return Cut(found.start(), shift_end, low, high, bare[0], bare[1], bare[1])
    return Cut(found.start(), shift_end, low, high, after, after, after)


_UNITS_BEHIND = re.compile(r"(?:hz|mhz|k\)|°|%|x\s*c|h[,)]|carbons?|protons?|signals?|h\b|c\b)", re.IGNORECASE)
_LABEL_BEFORE = re.compile(r"(?:\bJ[\w',()-]{0,8}\s*=\s*|\bC-|\bH-|[A-Za-z]-|m/z\s*=?\s*|[A-Za-z']\s*=\s*)$")
_SHIFT_BEFORE = re.compile(r"(?:δ|ppm|[HC])\s*=\s*$")
SMALLEST_WHOLE = 10.0  # a whole number below is a count or a label, not a 13C shift


def _plausible(text: str, found: re.Match[str], carbon: bool, start: int) -> bool:
    """False for numbers that are no shifts: labels, counts, whole numbers in 1H text without details."""
    low = found["low"]
    behind = text[found.end() : found.end() + 12].lstrip()
    if _UNITS_BEHIND.match(behind):
        return False
    before = text[max(start, found.start() - 12) : found.start()]
    if _LABEL_BEFORE.search(before) and not _SHIFT_BEFORE.search(before):
        return False
    fraction = "." in low or "," in low
    if carbon:
        return fraction or abs(float(low)) >= SMALLEST_WHOLE
    return fraction or behind[:1] == "("
