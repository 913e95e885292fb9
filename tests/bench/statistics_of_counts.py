"""Interval of a measured share, and a plain text table."""

from __future__ import annotations

import math
from collections.abc import Sequence

Z_95 = 1.959964  # two-sided 95 % point of the normal distribution


def wilson(hits: int, total: int) -> tuple[float, float]:
    """Wilson score interval (95 %) of a share (E. B. Wilson, J. Am. Stat. Assoc. 1927, 22, 209)."""
    if total == 0:
        return (0.0, 1.0)
    share = hits / total
    scale = 1 + Z_95**2 / total
    middle = (share + Z_95**2 / (2 * total)) / scale
    half = Z_95 * math.sqrt(share * (1 - share) / total + Z_95**2 / (4 * total**2)) / scale
    return (max(0.0, middle - half), min(1.0, middle + half))


def share_with_interval(hits: int, total: int) -> str:
    """``hits`` as a percentage with its interval: "12 = 4.5 % (2.6-7.7)"."""
    if total == 0:
        return "-"
    low, high = wilson(hits, total)
    return f"{hits} = {100 * hits / total:.1f} % ({100 * low:.1f}-{100 * high:.1f})"


def table(head: Sequence[str], rows: Sequence[Sequence[str]]) -> str:
    """Columns padded to their widest cell; the first column is left-aligned."""
    widths = [max(len(str(row[i])) for row in [head, *rows]) for i in range(len(head))]
    lines = []
    for row in [head, ["-" * width for width in widths], *rows]:
        rest = [str(cell).rjust(width) for cell, width in zip(row[1:], widths[1:], strict=True)]
        lines.append("  ".join([str(row[0]).ljust(widths[0]), *rest]))
    return "\n".join(lines)
