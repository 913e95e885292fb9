"""The typed text around a finding, with the characters it speaks of underlined."""

from __future__ import annotations

from verify.findings.location import Span

CUT = "…"


def excerpt(text: str, span: Span, width: int) -> tuple[str, str]:
    """The text and a line of marks to stand below it, both at most ``width`` characters.

    Where the text is longer, the part around the span is kept. Line breaks become spaces, so that columns hold.
    """
    line = "".join(c if c.isprintable() else " " for c in text)
    start = min(max(span.start, 0), len(line))
    end = min(max(span.end, start), len(line))
    first = 0
    if len(line) > width:
        middle = (start + min(end, start + width)) // 2
        first = min(max(middle - width // 2, 0), len(line) - width)
    last = min(first + width, len(line))
    shown = line[first:last]
    if first > 0:
        shown = CUT + shown[1:]
    if last < len(line):
        shown = shown[:-1] + CUT
    begin, behind = max(start, first), min(end, last)
    return shown, " " * (begin - first) + "^" * max(behind - begin, 1)
