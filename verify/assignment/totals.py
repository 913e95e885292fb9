"""Adds up what was reported and what the structure allows, and finds a common scale of all integrals."""

from __future__ import annotations

from verify.assignment.model import Totals
from verify.assignment.pieces import exchanges
from verify.expectations.model import Expectation
from verify.peaklist.model import Signal

# Scale factors that occur: half of a symmetric molecule integrated, a list integrated for two molecules,
# a third of a threefold symmetric one (common practice).
FACTORS = (2.0, 0.5, 3.0)
ROUNDING = 0.35


def hydrogen_bounds(expectations: tuple[Expectation, ...]) -> tuple[float, float]:
    """Least and greatest number of hydrogens the list may show: C-H that must appear, and all."""
    low = high = 0.0
    for expectation in expectations:
        environment = expectation.environment
        high += environment.count
        if not environment.exchangeable and not environment.may_vanish:
            low += environment.count
    return low, high


def rounding_allowed(signals: tuple[Signal, ...]) -> float:
    """Hydrogens by which a sum of fractional integrals may miss: each carries its own rounding."""
    fractional = sum(1 for s in signals if s.nuclei is not None and abs(s.nuclei - round(s.nuclei)) > 0.05)
    return ROUNDING + 0.1 * fractional


def common_factor(
    reported: float, low: float, high: float, expectations: tuple[Expectation, ...], signals: tuple[Signal, ...]
) -> float:
    """Factor that brings a total into its bounds where every group of the structure can be divided by it, else 1.

    A list for half of a molecule needs a structure whose every C-H group has an even number of nuclei; a list for two
    molecules has even integrals throughout.
    """
    if low - ROUNDING <= reported <= high + ROUNDING or reported <= 0.0:
        return 1.0
    counts = [round(e.environment.count) for e in expectations if not e.environment.exchangeable]
    for factor in FACTORS:
        if not low - ROUNDING <= reported * factor <= high + ROUNDING:
            continue
        whole = all(abs((s.nuclei or 0.0) * factor - round((s.nuclei or 0.0) * factor)) < 0.1 for s in signals)
        if whole and (factor < 1.0 or all(count % round(factor) == 0 for count in counts)):
            return factor
    return 1.0


def hydrogen_totals(expectations: tuple[Expectation, ...], signals: tuple[Signal, ...]) -> Totals:
    """Totals of a 1H list; ``complete`` is False where a signal states no count."""
    low, high = hydrogen_bounds(expectations)
    reported = sum(s.nuclei for s in signals if s.nuclei is not None)
    complete = all(s.nuclei is not None for s in signals)
    factor = common_factor(reported, low, high, expectations, signals) if complete else 1.0
    return Totals(reported * factor, low, high, factor, complete)


def fewest_signals(expectations: tuple[Expectation, ...]) -> int:
    """Least number of signals that can hold all C-H environments: windows stabbed by the fewest points."""
    windows = sorted(
        (e.window.high, e.window.low) for e in expectations
        if e.window.judged and not e.environment.exchangeable and not e.environment.may_vanish
    )
    points = 0
    last = float("-inf")
    for high, low in windows:
        if low > last:
            points += 1
            last = high
    return points


def most_signals(expectations: tuple[Expectation, ...], doubled: bool, solvent: str | None) -> int:
    """Greatest number of signals the structure can show: every environment apart, doubled where it may be.

    A group on several carriers (N(CH3)2, an undefined centre's neighbours) may show one signal per carrier.
    """
    most = 0
    for expectation in expectations:
        environment = expectation.environment
        if environment.exchangeable and exchanges(solvent):
            continue
        several = 2 if environment.may_double or doubled else 1
        most += several * (len(environment.carriers) if environment.may_double else 1)
    return most
