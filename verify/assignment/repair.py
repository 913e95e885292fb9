"""The smallest changes that would make a list fit, in words, best first. Never says which side is at fault."""

from __future__ import annotations

from verify.assignment.boxes import SLACK
from verify.assignment.model import Missing, Repair, SignalReading, Totals
from verify.peaklist.model import Signal

WORTH_SAYING = 2.0
MOST = 6


def shift_text(signal: Signal, decimals: int | None = None) -> str:
    """A signal's shift or range as typed, in ppm."""
    digits = signal.decimals if decimals is None else decimals
    if signal.is_range:
        return f"{signal.high:.{digits}f}-{signal.low:.{digits}f}"
    return f"{signal.low:.{digits}f}"


def count_text(nuclei: float) -> str:
    """A number of nuclei without needless digits."""
    return f"{nuclei:.0f}" if abs(nuclei - round(nuclei)) < 0.05 else f"{nuclei:.1f}"


def _letters(signal: Signal) -> str:
    return signal.multiplicity.letters if signal.multiplicity else "no letters"


def _of_signal(reading: SignalReading, signal: Signal) -> list[Repair]:
    found = []
    name = f"signal at {shift_text(signal)}"
    number = reading.signal
    if reading.excess > 0.05 and not reading.shares:
        hydrogens = count_text(signal.nuclei or reading.excess)
        words = f"{name} ({_letters(signal)}, {hydrogens}H) has no place in the structure"
        if reading.solvent_line:
            fits = f"{name} fits if it is {reading.solvent_line}"
            found.append(Repair("solvent-line", fits, SLACK * reading.excess, number))
        else:
            found.append(Repair("extra-signal", words, SLACK * reading.excess, number))
    elif reading.excess > 0.05 or reading.deficit > 0.05:
        held = sum(share.nuclei for share in reading.shares)
        words = f"{name} fits if it is {count_text(held)}H instead of {count_text(signal.nuclei or 0.0)}H"
        found.append(Repair("integral", words, SLACK * (reading.excess + reading.deficit), number))
    if reading.splitting_gain >= WORTH_SAYING and reading.expected_letters:
        kind = "coupling" if reading.impossible_j else "letters"
        words = f"{name} ({_letters(signal)}) fits if it reads {reading.expected_letters}"
        found.append(Repair(kind, words, reading.splitting_gain, number))
    if reading.shift_gain >= WORTH_SAYING and reading.expected_window:
        words = f"{name} fits if it lies in: {reading.expected_window}"
        found.append(Repair("shift", words, reading.shift_gain, number))
    return found


def repairs(
    readings: tuple[SignalReading, ...], signals: tuple[Signal, ...], missing: tuple[Missing, ...], totals: Totals
) -> tuple[Repair, ...]:
    """Repairs worth saying, dearest fault first."""
    found: list[Repair] = []
    for reading in readings:
        found.extend(_of_signal(reading, signals[reading.signal]))
    for lost in missing:
        if not lost.optional:
            words = f"{count_text(lost.nuclei)} H of {lost.words} ({lost.window}) unexplained"
            found.append(Repair("missing-group", words, SLACK * lost.nuclei, environment=lost.environment))
    if totals.factor != 1.0:
        found.append(Repair("scale", f"all integrals fit if multiplied by {totals.factor:g}", SLACK))
    found.sort(key=lambda r: (-r.gain, r.signal, r.environment, r.kind))
    return tuple(found[:MOST])
