"""A measured share with its interval, so that no percentage stands without the number of cases behind it."""

from __future__ import annotations

import math

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
