"""Coupling constants come in pairs: looks for the partner of every J among the assigned signals."""

from __future__ import annotations

from verify.assignment.model import Share
from verify.expectations.model import Expectation
from verify.peaklist.model import Signal

# Rounding to 0.1 Hz on both sides, digital resolution and peak picking (common practice: 0.3 to 0.5 Hz).
SAME_J = 0.6


def _open(signal: Signal) -> bool:
    """True where the signal could show a coupling that its text does not print."""
    letters = signal.multiplicity
    if letters is None or letters.kind != "first-order" or letters.broad:
        return True
    return len(signal.couplings) < sum(1 for lines in letters.lines if lines > 1)


def unpaired(
    number: int, shares: dict[int, tuple[Share, ...]], signals: tuple[Signal, ...],
    expectations: dict[int, Expectation],
) -> tuple[float, ...]:
    """J values (Hz) of a signal that no resolved partner signal repeats.

    A value is spoken of only if every signal that could hold its partner is resolved, and none in the list shows it.
    """
    lonely = []
    for coupling in signals[number].couplings:
        candidates = _partner_signals(number, coupling.value, shares, expectations)
        if not candidates or any(_open(signals[c]) for c in candidates):
            continue
        # All signals, not the candidates alone: near groups may have swapped places in the explanation.
        values = [j.value for other, signal in enumerate(signals) if other != number for j in signal.couplings]
        if all(abs(value - coupling.value) > SAME_J for value in values):
            lonely.append(coupling.value)
    return tuple(lonely)


def _partner_signals(
    number: int, value: float, shares: dict[int, tuple[Share, ...]], expectations: dict[int, Expectation]
) -> tuple[int, ...]:
    """Signals that hold a nucleus whose coupling window to this signal's nuclei includes the value; () if unsure."""
    where = {share.environment: signal for signal, found in shares.items() for share in found}
    found: set[int] = set()
    for share in shares.get(number, ()):
        for block in expectations[share.environment].couplings:
            if not block.low - SAME_J <= value <= block.high + SAME_J:
                continue
            partner = where.get(block.environment)
            if block.nucleus != "1H" or partner is None or partner == number:
                return ()
            found.add(partner)
    return tuple(sorted(found))
