"""Prices, in nats, of reading a signal as an environment: shift, splitting and label.

The matrices have shape (expectations, signals). A price is a negative log likelihood, so that prices add.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from verify.assignment.labels import label_cost
from verify.assignment.pieces import group_weight
from verify.environments.model import Environment
from verify.expectations.model import CouplingBlock, Expectation, Window
from verify.expectations.splitting import PatternPrice, Prepared, prepare, price_pattern
from verify.peaklist.model import Signal

Matrix = NDArray[np.float64]

TAIL_FROM = 2.2
TAIL_SLOPE = 1.4
OUTSIDE = 3.0
SHIFT_CAP = 14.0
EXCHANGEABLE_SHIFT_CAP = 7.0
PARTNER_INSIDE = 0.3
MERGED_EXCHANGEABLE = 0.3
NO_PATTERN = 0.3
UNJUDGED = 0.5
# A pair this far apart (nats) never enters an explanation, unless the signal is far from everything.
FAR, FAR_PATTERN, LOST_SIGNAL = 9.0, 1.5, 4.0


@dataclass(frozen=True, slots=True)
class Prices:
    """``shift``, ``splitting`` and ``label``: shape (expectations, signals), nats for the whole environment."""

    shift: Matrix
    splitting: Matrix
    label: Matrix
    patterns: tuple[tuple[PatternPrice | None, ...], ...]

    @property
    def total(self) -> Matrix:
        """Sum of the three."""
        return self.shift + self.splitting + self.label


def distance(window: Window, low: float, high: float) -> float:
    """Distance in ppm from the window's centre to the reported range; 0 inside it."""
    return max(low - window.centre, window.centre - high, 0.0)


def outside(window: Window, low: float, high: float) -> float:
    """Distance in ppm of the reported range from the window's hard ends; 0 if they touch."""
    return max(low - window.high, window.low - high, 0.0)


def shift_price(window: Window, low: float, high: float, exchangeable: bool) -> float:
    """Quadratic to ``TAIL_FROM`` scales, then linear: real errors of a shift model have heavy tails."""
    if not window.judged:
        return UNJUDGED
    z = distance(window, low, high) / window.scale
    price = 0.5 * z * z if z <= TAIL_FROM else 0.5 * TAIL_FROM**2 + TAIL_SLOPE * (z - TAIL_FROM)
    if outside(window, low, high) > 0.0:
        price += OUTSIDE
    return min(price, EXCHANGEABLE_SHIFT_CAP if exchangeable else SHIFT_CAP)


def _shift_matrix(expectations: tuple[Expectation, ...], signals: tuple[Signal, ...]) -> Matrix:
    """``shift_price`` of every pair at once, shape (expectations, signals)."""
    low = np.array([s.low for s in signals])[None, :]
    high = np.array([s.high for s in signals])[None, :]
    windows = [e.window for e in expectations]
    centre = np.array([w.centre for w in windows])[:, None]
    scale = np.array([w.scale for w in windows])[:, None]
    end_low = np.array([w.low for w in windows])[:, None]
    end_high = np.array([w.high for w in windows])[:, None]
    z = np.maximum(np.maximum(low - centre, centre - high), 0.0) / scale
    prices = np.where(z <= TAIL_FROM, 0.5 * z * z, 0.5 * TAIL_FROM**2 + TAIL_SLOPE * (z - TAIL_FROM))
    prices = prices + OUTSIDE * (np.maximum(low - end_high, end_low - high) > 0.0)
    cap = np.array([EXCHANGEABLE_SHIFT_CAP if e.environment.exchangeable else SHIFT_CAP for e in expectations])
    prices = np.minimum(prices, cap[:, None])
    judged = np.array([w.judged for w in windows])[:, None]
    return np.asarray(np.where(judged, prices, UNJUDGED), dtype=np.float64)


def _fits_inside(block: CouplingBlock, count: float, signal: Signal, windows: dict[int, Window]) -> bool:
    """True where the partners could lie in the same signal, so that their coupling does not show."""
    window = windows.get(block.environment)
    if window is None or signal.nuclei is None or signal.nuclei < count + 1:
        return False
    return distance(window, signal.low, signal.high) <= 3.0 * window.scale


def _pattern(blocks: Prepared, signal: Signal, strict: bool, merged: bool) -> PatternPrice:
    multiplicity = signal.multiplicity
    if multiplicity is None:
        raise ValueError("a signal without letters has no pattern to price")
    return price_pattern(
        blocks,
        multiplicity.lines,
        tuple(c.value for c in signal.couplings),
        kind=multiplicity.kind,
        broad=multiplicity.broad,
        apparent=multiplicity.apparent,
        is_range=signal.is_range,
        nuclei=signal.nuclei or 0.0,
        strict=strict,
        merged=merged,
    )


def splitting_price(
    expectation: Expectation, signal: Signal, windows: dict[int, Window], counts: dict[int, float], whole: Prepared
) -> PatternPrice | None:
    """Cheapest reading of the letters and J, also with one partner inside the same signal; None without letters."""
    if signal.multiplicity is None:
        return None
    count = expectation.environment.count
    merged = signal.nuclei is not None and signal.nuclei > count + 0.5
    blocks = expectation.couplings
    best = _pattern(whole, signal, expectation.strict_splitting, merged)
    if not merged or best.cost <= PARTNER_INSIDE or not blocks:
        return best
    for number, block in enumerate(blocks):
        if not _fits_inside(block, counts.get(block.environment, 1.0), signal, windows):
            continue
        rest = blocks[:number] + blocks[number + 1 :]
        other = _pattern(prepare(rest), signal, expectation.strict_splitting, merged)
        if other.cost + PARTNER_INSIDE < best.cost:
            best = other.dearer(PARTNER_INSIDE)
    return best


def price_all(
    expectations: tuple[Expectation, ...], signals: tuple[Signal, ...], hydrogens: dict[int, int]
) -> Prices:
    """Price every environment in every signal. ``hydrogens``: number of H on each environment's carrier."""
    shift = _shift_matrix(expectations, signals)
    splitting = np.zeros_like(shift)
    label = np.zeros_like(shift)
    windows = {e.environment.index: e.window for e in expectations}
    counts = {e.environment.index: e.environment.count for e in expectations}
    patterns: list[tuple[PatternPrice | None, ...]] = []
    wanted = (shift <= FAR) | (shift.min(axis=0, initial=SHIFT_CAP) > LOST_SIGNAL)[None, :]
    for row, expectation in enumerate(expectations):
        environment = expectation.environment
        whole = prepare(expectation.couplings)
        found: list[PatternPrice | None] = []
        for column, signal in enumerate(signals):
            pattern = splitting_price(expectation, signal, windows, counts, whole) if wanted[row, column] else None
            found.append(pattern)
            splitting[row, column] = _letters_price(environment, signal, pattern, bool(wanted[row, column]))
            label[row, column] = label_cost(
                signal.annotation, expectation.site, bool(environment.exchangeable),
                hydrogens.get(environment.index, 0),
            )
        patterns.append(tuple(found))
        shift[row] *= group_weight(environment.count)
    return Prices(shift, splitting, label, tuple(patterns))


def _letters_price(
    environment: Environment, signal: Signal, pattern: PatternPrice | None, near: bool
) -> float:
    """Nats of the letters and J of a signal as one environment."""
    if not near and signal.multiplicity is not None:
        return FAR_PATTERN
    price = NO_PATTERN if pattern is None else pattern.cost
    if environment.exchangeable and signal.nuclei is not None and signal.nuclei > environment.count + 0.5:
        # Letters describe the larger part of a merged signal; but merged OH and NH alone are no sharp multiplet.
        return min(price, MERGED_EXCHANGEABLE if not _sharply_split(signal) or signal.nuclei > 2.5 else price)
    return price


def _sharply_split(signal: Signal) -> bool:
    letters = signal.multiplicity
    return letters is not None and letters.kind == "first-order" and bool(signal.couplings) and not letters.broad
