"""Finds a common offset of a whole list: a reference fault, to be said once and not signal by signal."""

from __future__ import annotations

from statistics import median

from verify.assignment.model import SignalReading
from verify.expectations.model import Expectation
from verify.peaklist.model import Signal

FEWEST = 5
SMALLEST_PPM = 0.35
AGREEING_SHARE = 0.8
APART_PPM = 2.5  # a reference fault moves far regions alike; a ring system that is judged badly moves only its own


def common_offset(
    readings: tuple[SignalReading, ...], signals: tuple[Signal, ...], expectations: tuple[Expectation, ...]
) -> float:
    """Median deviation in ppm (listed minus expected) if nearly all assigned C-H signals share it, else 0.

    At least ``FEWEST`` signals must be assigned, four in five must deviate to the same side by half of it or more.
    """
    by_index = {e.environment.index: e for e in expectations}
    deviations, centres = [], []
    for reading in readings:
        shares = [s for s in reading.shares if not by_index[s.environment].environment.exchangeable]
        if len(shares) == 1:
            centre = by_index[shares[0].environment].window.centre
            deviations.append(signals[reading.signal].centre - centre)
            centres.append(centre)
    if len(deviations) < FEWEST or max(centres) - min(centres) < APART_PPM:
        return 0.0
    offset = median(deviations)
    agreeing = sum(1 for d in deviations if d * offset > 0 and abs(d) >= abs(offset) / 2.0)
    if abs(offset) < SMALLEST_PPM or agreeing < AGREEING_SHARE * len(deviations):
        return 0.0
    return round(offset, 2)
