"""Facts of one signal, and of one group that no signal explains."""

from __future__ import annotations

from typing import Any

from verify.assignment.model import Missing, SignalReading, SpectrumAssignment
from verify.expectations.model import Expectation
from verify.expectations.solvent import solvent_lines
from verify.peaklist.model import Signal
from verify.rulebook.facts import FACTS
from verify.rulebook.facts_spectrum import field_of
from verify.rulebook.model import RecordCase, SpectrumCase

ROUNDED_J_HZ = 0.06
SAME_J_HZ = 0.2
LISTED_WITHIN = 2.0  # scales


def signal_facts(spectrum: SpectrumCase, assignment: SpectrumAssignment, reading: SignalReading) -> dict[str, Any]:
    """All facts of group "signal"."""
    signal = spectrum.peaks.signals[reading.signal]
    by_index = {e.environment.index: e for e in spectrum.expectations}
    repair = next((r.words for r in assignment.repairs if r.signal == reading.signal), "")
    return {
        **_typed(spectrum, signal), **_couplings(spectrum, signal, reading), **_explained(reading, by_index),
        **_lines(spectrum, reading), "repair": repair,
    }  # fmt: skip


def _typed(spectrum: SpectrumCase, signal: Signal) -> dict[str, Any]:
    letters = signal.multiplicity
    text = spectrum.peaks.text[signal.span.start : signal.span.end]
    return {
        "words": " ".join(text.split()), "shift": signal.centre, "low": signal.low, "high": signal.high,
        "is_range": signal.is_range, "width": signal.high - signal.low,
        "letters": letters.letters if letters else "",
        "first_order": letters is not None and letters.kind == "first-order",
        "broad": letters is not None and letters.broad,
        "apparent": letters is not None and letters.apparent,
        "nuclei": float(signal.nuclei or 0.0), "counted": signal.nuclei is not None,
        "hidden": signal.hidden, "decimals": float(signal.decimals),
        "attached": float(-1 if signal.attached_h is None else signal.attached_h),
    }  # fmt: skip


def _couplings(spectrum: SpectrumCase, signal: Signal, reading: SignalReading) -> dict[str, Any]:
    values = [abs(c.value) for c in signal.couplings]
    unpaired = abs(reading.unpaired_j[0]) if reading.unpaired_j else 0.0
    return {
        "j_declared": float(reading.letters_declare), "j_given": float(len(values)), "j_distinct": _distinct(values),
        "j_largest": max(values, default=0.0),
        "j_impossible": max((abs(j) for j in reading.impossible_j), default=0.0),
        "j_limit": float(reading.j_limit), "j_overlap": reading.overlap_reading,
        "j_rounded": _rounded(values, field_of(spectrum)),
        "j_unpaired": unpaired, "j_near": _nearest(unpaired, signal, spectrum.peaks.signals),
        "j_decimals": float(max((c.decimals for c in signal.couplings), default=0)),
    }  # fmt: skip


def _distinct(values: list[float]) -> float:
    """Number of couplings that differ by more than the digital resolution."""
    ordered = sorted(values)
    return float(sum(1 for n, j in enumerate(ordered) if n == 0 or j - ordered[n - 1] > SAME_J_HZ))


def _rounded(values: list[float], field_mhz: float | None) -> bool:
    """J read off shifts that were rounded to 0.01 ppm."""
    if not values or not field_mhz:
        return False
    step = 0.01 * field_mhz
    return all(abs(j - round(j / step) * step) <= ROUNDED_J_HZ for j in values)


def _nearest(value: float, signal: Signal, signals: tuple[Signal, ...]) -> float:
    others = [abs(c.value) for other in signals if other is not signal for c in other.couplings]
    return min(others, key=lambda j: abs(j - value), default=0.0) if value else 0.0


def _explained(reading: SignalReading, by_index: dict[int, Expectation]) -> dict[str, Any]:
    mine = [by_index[share.environment] for share in reading.shares if share.environment in by_index]
    return {
        "excess": float(reading.excess), "deficit": float(reading.deficit), "explained": bool(reading.shares),
        "explained_by": " and ".join(dict.fromkeys(e.words for e in mine)) or "every group",
        "exchangeable": bool(mine) and all(bool(e.environment.exchangeable) for e in mine),
        "outside_ppm": float(reading.outside_ppm), "shift_gain": float(reading.shift_gain),
        "shift_cost": float(sum(share.shift_cost for share in reading.shares)),
        "letters_gain": float(reading.splitting_gain), "letters_cost": float(reading.splitting_cost),
        "letters_floor": float(reading.splitting_floor), "strict": reading.strict,
        "expected_letters": reading.expected_letters, "expected_window": reading.expected_window or "elsewhere",
        "attached_wrong": reading.attached_h_wrong,
    }  # fmt: skip


def _lines(spectrum: SpectrumCase, reading: SignalReading) -> dict[str, Any]:
    typed = spectrum.spectrum.solvent or spectrum.peaks.solvent or spectrum.spectrum.default_solvent
    water = {line.name for line in solvent_lines(typed, spectrum.peaks.nucleus) if line.kind == "water"}
    name = reading.solvent_line
    return {
        "solvent_line": "" if name in water else name,
        "water_line": name if name in water else "",
        "impurity": reading.impurity,
    }


def missing_facts(case: RecordCase, spectrum: SpectrumCase, missing: Missing) -> dict[str, Any]:
    """All facts of group "missing"."""
    facts = {name: fact.neutral for name, fact in FACTS["missing"].items()}
    return facts | {
        "words": missing.words, "nuclei": float(missing.nuclei), "window": missing.window, "cover": missing.cover,
        "optional": missing.optional, "listed_in_13c": _carbon_listed(case, spectrum, missing),
    }  # fmt: skip


def _carbon_listed(case: RecordCase, spectrum: SpectrumCase, missing: Missing) -> bool:
    """True where a 13C list of the record holds a line near the carbon that bears the missing group."""
    by_index = {e.environment.index: e for e in spectrum.expectations}
    carriers = set(by_index[missing.environment].environment.carriers) if missing.environment in by_index else set()
    for other in case.spectra:
        if other.spectrum.nucleus != "13C":
            continue
        for e in other.expectations:
            if e.environment.nucleus != "13C" or not carriers & set(e.environment.carriers):
                continue
            reach = LISTED_WITHIN * e.window.scale
            return any(abs(s.centre - e.window.centre) <= reach for s in other.peaks.signals)
    return False
