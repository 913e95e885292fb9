"""Plain data about one spectrum's assignment, as the report schema describes it."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from verify.assignment.model import Missing, Share, SignalReading, SpectrumAssignment
from verify.expectations.model import Expectation
from verify.peaklist.model import PeakList
from verify.rulebook.model import RecordCase
from verify.structure.composition import formula_text


def _rounded(value: float, digits: int = 2) -> float:
    return round(float(value), digits)


def _share(share: Share, expectations: Mapping[int, Expectation]) -> dict[str, Any]:
    expectation = expectations[share.environment]
    window = expectation.window
    return {
        "environment": share.environment,
        "atoms": list(expectation.environment.carriers),
        "words": expectation.words,
        "nuclei": _rounded(share.nuclei),
        "centre": _rounded(window.centre),
        "scale": _rounded(window.scale, 3),
        "shift_nats": _rounded(share.shift_cost),
        "splitting_nats": _rounded(share.splitting_cost),
    }


def _signal(reading: SignalReading, peaks: PeakList, expectations: Mapping[int, Expectation]) -> dict[str, Any]:
    signal = peaks.signals[reading.signal]
    return {
        "text": peaks.text[signal.span.start : signal.span.end],
        "low": signal.low,
        "high": signal.high,
        "letters": signal.multiplicity.letters if signal.multiplicity else "",
        "couplings_hz": [c.value for c in signal.couplings],
        "nuclei": signal.nuclei,
        "environments": [_share(share, expectations) for share in reading.shares],
        "excess": _rounded(reading.excess),
        "deficit": _rounded(reading.deficit),
        "solvent_line": reading.solvent_line,
        "impurity": reading.impurity,
    }


def _missing(missing: Missing, expectations: Mapping[int, Expectation]) -> dict[str, Any]:
    return {
        "environment": missing.environment,
        "atoms": list(expectations[missing.environment].environment.carriers),
        "words": missing.words,
        "nuclei": _rounded(missing.nuclei),
        "window": missing.window,
        "optional": missing.optional,
        "cover": missing.cover,
    }


def summarise(
    assignment: SpectrumAssignment, peaks: PeakList, expectations: tuple[Expectation, ...]
) -> dict[str, Any]:
    """One entry of a record's ``assignment`` in the report; shifts in ppm, J in Hz, costs in nats."""
    by_index = {e.environment.index: e for e in expectations}
    totals = assignment.totals
    return {
        "spectrum": assignment.spectrum,
        "nucleus": assignment.nucleus,
        "status": assignment.status,
        "cost_nats": _rounded(assignment.cost) if assignment.cost != float("inf") else None,
        "reported": _rounded(totals.reported),
        "allowed_low": _rounded(totals.low),
        "allowed_high": _rounded(totals.high),
        "factor": totals.factor,
        "softened_by": assignment.lenient,
        "signals": [_signal(reading, peaks, by_index) for reading in assignment.readings],
        "missing": [_missing(missing, by_index) for missing in assignment.missing],
        "repairs": [repair.words for repair in assignment.repairs],
    }


def summary_of(case: RecordCase) -> dict[str, Any]:
    """What the record is about, for reports and for rules over the whole registry."""
    structure = case.structure
    spectra = [
        {"nucleus": s.spectrum.nucleus, "signals": len(s.peaks.signals),
         "status": s.assignment.status if s.assignment else "not-judged"}
        for s in case.spectra
    ]
    if structure is None:
        return {"spectra": spectra}
    return {"smiles": structure.smiles, "formula": formula_text(structure.formula), "spectra": spectra}
