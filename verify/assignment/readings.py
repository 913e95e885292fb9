"""Turns a solved 1H placement into readings: per signal what explains it, what is left and what is odd."""

from __future__ import annotations

import numpy as np

from verify.assignment.cost import Prices, outside
from verify.assignment.gains import gains
from verify.assignment.model import Missing, Share, SignalReading
from verify.assignment.pairing import unpaired
from verify.assignment.proton import Explanation
from verify.expectations.model import Expectation
from verify.expectations.splitting import accepted_splittings
from verify.peaklist.model import PeakList, Signal

CANDIDATE_SHIFT_PRICE = 6.0
J_MARGIN_HZ = 2.0
FEW_LETTERS = 3
WORDS_FROM = 1.0  # nats; letters that fit better need no words about what was expected


def shares_by_signal(
    explanation: Explanation, prices: Prices, expectations: tuple[Expectation, ...]
) -> dict[int, tuple[Share, ...]]:
    """Shares of every signal, pieces of one environment joined."""
    joined: dict[int, dict[int, float]] = {}
    for number, found in enumerate(explanation.placement.shares):
        environment = explanation.pieces[number].environment
        for signal, nuclei in found:
            held = joined.setdefault(signal, {})
            held[environment] = held.get(environment, 0.0) + nuclei
    row_of = {e.environment.index: n for n, e in enumerate(expectations)}
    return {
        signal: tuple(
            Share(environment, nuclei, float(prices.shift[row_of[environment], signal]),
                  float(prices.splitting[row_of[environment], signal]))
            for environment, nuclei in sorted(held.items())
        )
        for signal, held in joined.items()
    }


def candidates(signal: int, prices: Prices) -> tuple[int, ...]:
    """Rows of the environments a signal could be by its shift; the nearest one where none is near."""
    column = prices.shift[:, signal]
    near = np.flatnonzero(column <= CANDIDATE_SHIFT_PRICE)
    return tuple(int(n) for n in (near if len(near) else [int(column.argmin())]))


def expected_letters(shares: tuple[Share, ...], expectations: dict[int, Expectation]) -> str:
    """The likeliest letters of the environments a signal was read as, in words."""
    names: list[str] = []
    for share in shares:
        expectation = expectations[share.environment]
        accepted = sorted(accepted_splittings(expectation.couplings), key=lambda s: (s.penalty, s.letters))
        names.extend(s.letters for s in accepted if s.letters not in names and s.letters != "m")
    return " or ".join(names[:FEW_LETTERS])


def j_limit(rows: tuple[int, ...], expectations: tuple[Expectation, ...]) -> float:
    """Largest coupling (Hz) that any of these environments can show; 0 where none couples."""
    return max((block.high for row in rows for block in expectations[row].couplings), default=0.0)


def _impossible(signal: Signal, limit: float) -> tuple[float, ...]:
    """J beyond every coupling; values with a named hetero partner are left to that partner's own window."""
    largest = max(limit, 3.0) + J_MARGIN_HZ
    return tuple(c.value for c in signal.couplings if abs(c.value) > largest)


def window_words(expectation: Expectation) -> str:
    """The believed window of an environment, in words."""
    window = expectation.window
    if not window.judged:
        return f"{expectation.words}: not estimated"
    reach = 2.2 * window.scale
    low, high = max(window.low, window.centre - reach), min(window.high, window.centre + reach)
    return f"{expectation.words} {low:.2f} to {high:.2f} ppm"


def _outside(signal: Signal, shares: tuple[Share, ...], by_index: dict[int, Expectation]) -> float:
    """Distance in ppm to the windows of what explains a signal; of every group where nothing does."""
    chosen = [by_index[s.environment] for s in shares] or list(by_index.values())
    return min((outside(e.window, signal.low, signal.high) for e in chosen if e.window.judged), default=0.0)


def _letters_declared(signal: Signal) -> int:
    letters = signal.multiplicity
    if letters is None or letters.kind != "first-order":
        return -1
    return sum(1 for lines in letters.lines if lines > 1)


def read_signals(
    peaks: PeakList, explanation: Explanation, prices: Prices, expectations: tuple[Expectation, ...],
    solvent_names: tuple[str, ...],
) -> tuple[SignalReading, ...]:
    """One reading for each signal of the list, in its order."""
    by_index = {e.environment.index: e for e in expectations}
    shares = shares_by_signal(explanation, prices, expectations)
    shift_gain, splitting_gain = gains(explanation, prices)
    readings = []
    for number, signal in enumerate(peaks.signals):
        rows = candidates(number, prices)
        mine = shares.get(number, ())
        own = tuple(n for n, e in enumerate(expectations) if e.environment.index in {s.environment for s in mine})
        limit = j_limit(tuple(sorted({*rows, *own})), expectations)
        floor = float(min((prices.splitting[row, number] for row in {*rows, *own}), default=0.0))
        patterns = [prices.patterns[row][number] for row in (own or rows)]
        odd = max(floor, sum(s.splitting_cost for s in mine), float(splitting_gain[number]))
        readings.append(SignalReading(
            signal=number,
            shares=mine,
            excess=explanation.placement.excess[number],
            deficit=explanation.placement.deficit[number],
            outside_ppm=_outside(signal, mine, by_index),
            shift_gain=float(shift_gain[number]),
            splitting_gain=float(splitting_gain[number]),
            splitting_cost=sum(s.splitting_cost for s in mine),
            splitting_floor=floor,
            strict=bool(own) and all(expectations[row].strict_splitting for row in {*rows, *own}),
            expected_letters=expected_letters(mine, by_index) if odd >= WORDS_FROM else "",
            expected_window="; ".join(window_words(by_index[s.environment]) for s in mine),
            letters_declare=_letters_declared(signal),
            impossible_j=_impossible(signal, limit),
            j_limit=limit,
            overlap_reading=bool(patterns) and all(p is not None and p.overlap_reading for p in patterns),
            unpaired_j=unpaired(number, shares, peaks.signals, by_index),
            solvent_line=solvent_names[number],
        ))
    return tuple(readings)


def find_missing(
    explanation: Explanation, expectations: tuple[Expectation, ...], cover: tuple[tuple[float, float, str], ...]
) -> tuple[Missing, ...]:
    """Environments, or parts of them, that no signal explains. ``cover``: (low, high, name) ranges in ppm that may
    hide a signal, such as residual solvent lines."""
    by_index = {e.environment.index: e for e in expectations}
    lost: dict[int, float] = {}
    for piece, shares in zip(explanation.pieces, explanation.placement.shares, strict=True):
        left = piece.nuclei - sum(nuclei for _, nuclei in shares)
        if left > 0.05:
            lost[piece.environment] = lost.get(piece.environment, 0.0) + left
    found = []
    for environment, nuclei in sorted(lost.items()):
        expectation = by_index[environment]
        optional = bool(expectation.environment.exchangeable or expectation.environment.may_vanish)
        window = expectation.window
        low, high = window.centre - window.scale, window.centre + window.scale
        hidden = [name for start, end, name in cover if end >= low and start <= high]
        found.append(Missing(environment, nuclei, window_words(expectation), expectation.words,
                             hidden[0] if hidden else "", optional))
    return tuple(found)
