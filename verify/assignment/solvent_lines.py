"""Recognises residual solvent, water and known impurity lines among reported signals."""

from __future__ import annotations

from verify.expectations.solvent import SolventLine, impurity_table, solvent_lines
from verify.peaklist.model import PeakList, Signal

# Print and reference differences between laboratories; water moves more than any other line.
TOLERANCE = {"1H": 0.02, "13C": 0.25, "19F": 0.0, "31P": 0.0}


def coincident(signal: Signal, lines: tuple[SolventLine, ...]) -> str:
    """Name of the line at which a signal stands (inside its range, or within the tolerance), "" if none."""
    best = ""
    nearest = float("inf")
    for line in lines:
        away = max(signal.low - line.shift, line.shift - signal.high, 0.0)
        if away <= line.tolerance and away < nearest:
            best, nearest = line.name, away
    return best


def line_names(peaks: PeakList, solvent: str | None) -> tuple[str, ...]:
    """For each signal the solvent or water line it coincides with, "" if none.

    A 1H signal that carries several hydrogens' worth of splitting is not a solvent line: d, dd, dt and the like
    keep "" (residual lines of CHD2 groups are quintets, all others singlets).
    """
    lines = solvent_lines(solvent, peaks.nucleus) if solvent else ()
    names = []
    for signal in peaks.signals:
        letters = signal.multiplicity
        split = letters is not None and letters.kind == "first-order" and letters.lines not in ((1,), (5,))
        names.append("" if split or not lines else coincident(signal, lines))
    return tuple(names)


def impurities(peaks: PeakList, solvent: str | None, leftover: tuple[int, ...]) -> dict[int, str]:
    """Leftover signals that belong to a known impurity all of whose lines in this solvent are in the list."""
    if not solvent or not leftover:
        return {}
    found: dict[int, str] = {}
    tolerance = 2.0 * TOLERANCE.get(peaks.nucleus, 0.0)
    for name, shifts in impurity_table(peaks.nucleus, solvent):
        hits = []
        for shift in shifts:
            near = [n for n, s in enumerate(peaks.signals) if s.low - tolerance <= shift <= s.high + tolerance]
            hits.append(near)
        if shifts and all(hits):
            for number in leftover:
                if number not in found and any(number in near for near in hits):
                    found[number] = name
    return found
