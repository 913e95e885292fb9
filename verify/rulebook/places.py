"""Where a finding stands: from a rule's locus word to the characters of the record."""

from __future__ import annotations

from verify.findings.location import Locus, Span
from verify.peaklist.model import Signal
from verify.peaklist.structured import shift_of
from verify.rulebook.model import RecordCase, SpectrumCase


def structure_locus(case: RecordCase) -> Locus:
    """The structure's own text."""
    record = case.reading.record
    return Locus(record.structure.pointer if record else "/structure")


def list_locus(spectrum: SpectrumCase) -> Locus:
    """The whole list as typed."""
    text = spectrum.spectrum
    if text.report is None:
        return Locus(f"{text.pointer}/signals", spectrum=spectrum.number)
    return Locus(f"{text.pointer}/report", Span(0, len(text.report.rstrip())), spectrum.number)


def spectrum_locus(spectrum: SpectrumCase) -> Locus:
    """The entry of the spectrum."""
    return Locus(spectrum.spectrum.pointer, spectrum=spectrum.number)


def signal_locus(spectrum: SpectrumCase, number: int, part: str, impossible: tuple[float, ...] = ()) -> Locus:
    """A signal, or one part of it: "signal", "shift", "letters", "nuclei", "coupling"."""
    signal = spectrum.peaks.signals[number]
    if spectrum.spectrum.report is None:
        return _structured(spectrum, number, part)
    span = _span(signal, part, impossible)
    return Locus(f"{spectrum.spectrum.pointer}/report", span, spectrum.number, number)


def _span(signal: Signal, part: str, marked: tuple[float, ...]) -> Span:
    if part == "shift" and signal.shift_span is not None:
        return signal.shift_span
    if part == "letters" and signal.multiplicity is not None and signal.multiplicity.span is not None:
        return signal.multiplicity.span
    if part == "nuclei" and signal.nuclei_span is not None:
        return signal.nuclei_span
    if part == "coupling":
        near = [c for c in signal.couplings if any(abs(abs(c.value) - m) < 1e-9 for m in marked)]
        spans = [c.span for c in near if c.span is not None]
        if spans:
            return spans[0]
    return signal.span


def _structured(spectrum: SpectrumCase, number: int, part: str) -> Locus:
    """The entry a structured signal was read from; entries without a shift gave no signal."""
    usable = [n for n, entry in enumerate(spectrum.spectrum.signals) if shift_of(entry) is not None]
    entry = usable[number] if number < len(usable) else number
    key = {"letters": "/multiplicity", "nuclei": "/nuclei", "coupling": "/couplings"}.get(part, "")
    present = spectrum.spectrum.signals[entry] if entry < len(spectrum.spectrum.signals) else {}
    suffix = key if key.strip("/") in present else ""
    return Locus(f"{spectrum.spectrum.pointer}/signals/{entry}{suffix}", None, spectrum.number, number)


def problem_locus(spectrum: SpectrumCase, locus: Locus) -> Locus:
    """A problem of a list: its span counts in the report, its pointer, if it has one, in the record."""
    if locus.pointer or spectrum.spectrum.report is None:
        pointer = locus.pointer or f"{spectrum.spectrum.pointer}/signals"
        return Locus(pointer, None, spectrum.number, locus.signal)
    return Locus(f"{spectrum.spectrum.pointer}/report", locus.span, spectrum.number, locus.signal)
