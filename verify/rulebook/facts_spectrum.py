"""Facts of one spectrum, taken from its assignment."""

from __future__ import annotations

from typing import Any

from verify.assignment.model import SpectrumAssignment
from verify.assignment.totals import rounding_allowed
from verify.expectations.model import Expectation
from verify.expectations.solvent import solvent_lines, solvent_name
from verify.peaklist.model import Signal
from verify.rulebook.facts import FACTS
from verify.rulebook.model import RecordCase, SpectrumCase

ONE_DOUBLET_PPM = 0.03
ENVELOPE_NUCLEI, ENVELOPE_OFF = 10.0, 2.2
# Frequencies that belong to 13C on ordinary magnets, and are hardly ever those of 1H (common practice; MHz).
CARBON_FREQUENCIES = (75.0, 101.0, 126.0, 151.0, 176.0, 201.0)


def spectrum_facts(case: RecordCase, spectrum: SpectrumCase) -> dict[str, Any]:
    """All facts of group "spectrum"."""
    facts = {name: fact.neutral for name, fact in FACTS["spectrum"].items()}
    facts |= _conditions(spectrum)
    assignment = spectrum.assignment
    if assignment is None:
        return facts | {"explained": False, "status": "not-judged", "signals": float(len(spectrum.peaks.signals))}
    facts |= _common(spectrum, assignment)
    if assignment.nucleus == "1H":
        facts |= _hydrogens(case, spectrum, assignment)
    else:
        facts |= _lines(spectrum, assignment)
    return facts


def field_of(spectrum: SpectrumCase) -> float | None:
    """Frequency in MHz as typed in the record, else in the list, else as its registry assumes."""
    return spectrum.spectrum.field_mhz or spectrum.peaks.field_mhz or spectrum.spectrum.default_field_mhz


def _conditions(spectrum: SpectrumCase) -> dict[str, Any]:
    typed = spectrum.spectrum.solvent or spectrum.peaks.solvent or spectrum.spectrum.default_solvent or ""
    field = field_of(spectrum)
    nucleus = spectrum.spectrum.nucleus
    remarks = spectrum.peaks.remarks
    return {
        "nucleus": nucleus,
        "solvent": solvent_name(typed),
        "solvent_typed": typed,
        "solvent_known": bool(solvent_name(typed)),
        "field_stated": field is not None,
        "field_mhz": float(field or 0.0),
        "field_odd": _odd_field(nucleus, float(field or 0.0)),
        "selected": "selected" in remarks,
        "hides": bool({"overlapped", "exchange"} & set(remarks)) or any(s.hidden for s in spectrum.peaks.signals),
        "unread": float(sum(p.code == "signal-unread" for p in spectrum.peaks.problems)),
        "unit_hint": _hint(spectrum),
    }


def _odd_field(nucleus: str, field: float) -> bool:
    if nucleus == "13C":
        return field >= 260.0
    return nucleus == "1H" and any(abs(field - f) < 0.8 for f in CARBON_FREQUENCIES)


def _hint(spectrum: SpectrumCase) -> str:
    """What the head of the text says against the keys of the record."""
    told, typed = spectrum.peaks.solvent, spectrum.spectrum.solvent
    if told and typed and solvent_name(told) and solvent_name(told) != solvent_name(typed):
        return f"the text says {told}, the record says {typed}"
    field, key = spectrum.peaks.field_mhz, spectrum.spectrum.field_mhz
    if field and key and abs(field - key) > 2.0:
        return f"the text says {field:g} MHz, the record says {key:g} MHz"
    return ""


def _common(spectrum: SpectrumCase, assignment: SpectrumAssignment) -> dict[str, Any]:
    words = [r.words for r in assignment.repairs[:3]]
    return {
        "explained": assignment.status == "explained",
        "status": assignment.status,
        "soft": bool(assignment.lenient),
        "soft_words": assignment.lenient,
        "signals": float(len(spectrum.peaks.signals)),
        "signals_low": float(assignment.signals_low),
        "signals_high": float(assignment.signals_high),
        "environments": float(sum(e.environment.nucleus == assignment.nucleus for e in spectrum.expectations)),
        "offset": abs(assignment.offset),
        "offset_words": f"{assignment.offset:+.2f}",
        "repairs": "; ".join(words),
        "impurities": ", ".join(sorted({r.impurity for r in assignment.readings if r.impurity})),
    }


def _hydrogens(case: RecordCase, spectrum: SpectrumCase, assignment: SpectrumAssignment) -> dict[str, Any]:
    signals, totals = spectrum.peaks.signals, assignment.totals
    rounding = rounding_allowed(signals)
    over = totals.reported - totals.high if totals.reported - totals.high > rounding else 0.0
    under = totals.low - totals.reported if totals.complete and totals.low - totals.reported > rounding else 0.0
    required = [m for m in assignment.missing if not m.optional]
    named = [r for r in assignment.readings if r.solvent_line and not r.shares]
    acid = assignment.exchangeable_excess
    salt = case.structure is not None and 0.0 < over <= 2.4 and acid >= over - 0.4
    return {
        "reported": totals.reported, "low": totals.low, "high": totals.high, "factor": totals.factor,
        "complete": totals.complete, "over": over, "under": under,
        "envelope": _envelope(signals, max(over, under)),
        "over_in_solvent": 0.0 < over <= 2.4 and _range_over_solvent(spectrum, signals),
        "solvent_hydrogens": float(sum(signals[r.signal].nuclei or 0.0 for r in named)),
        "acid_excess": acid, "salt_fits": bool(salt),
        "excess": float(sum(r.excess for r in assignment.readings)),
        "missing": float(sum(m.nuclei for m in required)),
        "missing_words": "; ".join(f"{m.nuclei:g} H of {m.window}" for m in required),
        "missing_cover": next((m.cover for m in required if m.cover), ""),
        "cover_words": next((f"by {m.cover}" for m in required if m.cover), "by another signal"),
        "group_cut": bool(assignment.group_cut) and not _read_as_one(assignment, signals),
        "cut_words": _names(assignment.group_cut, spectrum.expectations),
    }  # fmt: skip


def _read_as_one(assignment: SpectrumAssignment, signals: tuple[Signal, ...]) -> bool:
    """True where every cut group lies in two signals as close as the lines of one doublet."""
    for environment in assignment.group_cut:
        holding = (r for r in assignment.readings if any(s.environment == environment for s in r.shares))
        mine = [signals[r.signal].centre for r in holding]
        if mine and max(mine) - min(mine) > ONE_DOUBLET_PPM:
            return False
    return True


def _names(environments: tuple[int, ...], expectations: tuple[Expectation, ...]) -> str:
    by_index = {e.environment.index: e for e in expectations}
    return ", ".join(by_index[n].words for n in environments if n in by_index)


def _envelope(signals: tuple[Signal, ...], off: float) -> bool:
    """A small deviation that one large multiplet may hold by the rounding of its integral."""
    large = [s for s in signals if (s.nuclei or 0.0) >= ENVELOPE_NUCLEI]
    plain = (s.multiplicity is not None and s.multiplicity.kind == "first-order" for s in large)
    return 0.0 < off <= ENVELOPE_OFF and not all(plain)


def _range_over_solvent(spectrum: SpectrumCase, signals: tuple[Signal, ...]) -> bool:
    typed = spectrum.spectrum.solvent or spectrum.peaks.solvent or spectrum.spectrum.default_solvent
    residual = [line for line in solvent_lines(typed, "1H") if line.kind == "residual"]
    return any(s.is_range and s.low <= line.shift <= s.high for s in signals for line in residual)


def _lines(spectrum: SpectrumCase, assignment: SpectrumAssignment) -> dict[str, Any]:
    signals = spectrum.peaks.signals
    foreign = {r.signal for r in assignment.readings if r.impurity or (r.solvent_line and not r.shares)}
    lines = float(sum(max(1.0, s.nuclei or 1.0) for n, s in enumerate(signals) if n not in foreign))
    single = float(len(signals) - len(foreign))
    environments = float(sum(e.environment.nucleus == assignment.nucleus for e in spectrum.expectations))
    mine = (e.environment for e in spectrum.expectations if e.environment.nucleus == assignment.nucleus)
    carbons = float(sum(environment.count for environment in mine))
    short = max(0.0, environments - max(lines, single))
    homeless = [signals[n] for n in assignment.lines_without_home]
    return {
        "lines": single,
        "lines_over": max(0.0, single - max(assignment.totals.high, 0.0)),
        "lines_short": short,
        "short_share": short / environments if environments else 0.0,
        "homeless": float(len(homeless)),
        "homeless_words": ", ".join(f"{s.centre:.1f}" for s in homeless),
        "high": carbons,
    }
