"""The door of the room: reported text, or structured signals, in; a peak list with places and problems out."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import replace

from verify.findings.location import Locus, Span
from verify.findings.problem import Problem
from verify.peaklist.details import Details, read_details
from verify.peaklist.header import Header, only_section, read_header
from verify.peaklist.joining import joined_ranges
from verify.peaklist.model import PeakList, Signal
from verify.peaklist.normalise import plain
from verify.peaklist.remarks import is_prose, is_told, read_remarks
from verify.peaklist.scanner import Cut, cuts
from verify.peaklist.structured import as_signal, render

NUCLEI = ("1H", "13C", "19F", "31P")
LONGEST_TEXT = 200_000
SP2_FROM = 95.0  # ppm; 13C
FURTHEST = {"1H": 60.0, "13C": 400.0, "19F": 500.0, "31P": 500.0}


def read_peak_list(text: str, nucleus: str | None = None) -> PeakList:
    """Read one reported list. ``nucleus`` ("1H", "13C", "19F", "31P") outweighs the head of the text; 1H if neither
    says it. Spans count characters of ``text``. Never raises: what cannot be read is a problem."""
    plain_text = only_section(plain(text[:LONGEST_TEXT]), nucleus)
    header = read_header(plain_text)
    kind = nucleus or header.nucleus or "1H"
    if not plain_text.strip():
        return _finished(text, kind, header, (), (_whole(text, "list-empty", "the list is empty"),))
    signals: list[Signal] = []
    problems: list[Problem] = []
    for cut in cuts(plain_text, header.end, carbon=kind != "1H"):
        _read_cut(text, plain_text, cut, kind, signals, problems)
    signals, left_out = _without_words(joined_ranges(signals, plain_text) if kind == "1H" else signals, kind)
    problems += _judge_text(text, plain_text, header, kind, signals)
    problems += _unread(left_out)
    if any(p.blocks == "spectrum" for p in problems):
        signals = []
    told = is_told(plain_text[header.end :], len(signals))
    return _finished(text, kind, header, tuple(signals), tuple(problems), ("selected",) if told else ())


def _finished(
    text: str, nucleus: str, header: Header, signals: tuple[Signal, ...], problems: tuple[Problem, ...],
    more: tuple[str, ...] = (),
) -> PeakList:
    return PeakList(
        nucleus=nucleus, text=text, signals=signals, problems=problems, field_mhz=header.field_mhz,
        solvent=header.solvent, temperature_k=header.temperature_k, remarks=tuple(sorted({*read_remarks(text), *more})),
    )  # fmt: skip


def _whole(text: str, code: str, message: str) -> Problem:
    span = Span(0, len(text.rstrip()))
    return Problem(code, message, Locus(span=span), "spectrum", "a list such as 7.26 (s, 1H), 2.31 (s, 3H)")


def _number(text: str) -> tuple[float, int]:
    clean = text.replace(",", ".").replace(" ", "")
    return float(clean), len(clean.partition(".")[2])


def _read_cut(
    text: str, plain_text: str, cut: Cut, nucleus: str, signals: list[Signal], problems: list[Problem]
) -> None:
    """Turn one cut into a signal, or into a problem where its shift cannot be."""
    first, decimals = _number(cut.low)
    second = _number(cut.high)[0] if cut.high is not None else first
    details = read_details(plain_text, cut.inside, cut.outside, nucleus)
    span = Span(cut.start, cut.end)
    if max(abs(first), abs(second)) > FURTHEST[nucleus]:
        message = f"{plain_text[cut.start : cut.shift_end]} ppm is no possible shift of {nucleus}"
        locus = Locus(span=Span(cut.start, cut.shift_end))
        problems.append(Problem("shift-impossible", message, locus, "signal", "a shift in ppm"))
        return
    number = len(signals)
    if cut.unclosed >= 0:
        locus = Locus(span=Span(cut.unclosed, cut.unclosed + 1), signal=number)
        problems.append(Problem("bracket-open", "this bracket is never closed", locus, "", "a closing bracket"))
    for problem in details.problems:
        problems.append(replace(problem, locus=replace(problem.locus, signal=number)))
    signals.append(_signal(text, cut, details, (first, second, decimals), span))


def _signal(text: str, cut: Cut, details: Details, shift: tuple[float, float, int], span: Span) -> Signal:
    multiplicity = details.multiplicity
    if multiplicity is not None and multiplicity.span is not None:
        typed = text[multiplicity.span.start : multiplicity.span.end]
        multiplicity = replace(multiplicity, text=typed)
    return Signal(
        low=min(shift[:2]), high=max(shift[:2]), decimals=shift[2], span=span, multiplicity=multiplicity,
        couplings=tuple(details.couplings), nuclei=details.nuclei, attached_h=details.attached_h,
        annotation=details.annotation, shift_span=Span(cut.start, cut.shift_end), nuclei_span=details.nuclei_span,
        hidden=details.hidden,
    )  # fmt: skip


def _without_words(signals: list[Signal], nucleus: str) -> tuple[list[Signal], list[Signal]]:
    """Signals, and what was left out: in a 1H list with details, a number without any may be part of a sentence,
    or of a signal that could not be read."""
    if nucleus != "1H":
        return _with_meant_letters(signals), []
    detailed = [s for s in signals if _has_details(s)]
    if not detailed or len(detailed) * 2 < len(signals):
        return signals, []
    return detailed, [s for s in signals if not _has_details(s)]


def _has_details(signal: Signal) -> bool:
    return signal.multiplicity is not None or signal.nuclei is not None or bool(signal.couplings)


def _with_meant_letters(signals: list[Signal]) -> list[Signal]:
    """Some authors write C for every carbon: then it says nothing about hydrogen. A list that tells C from CH does."""
    if any(s.attached_h == 1 and s.low > SP2_FROM for s in signals):
        return signals
    return [replace(s, attached_h=None) if s.attached_h == 0 else s for s in signals]


def _unread(left_out: list[Signal]) -> list[Problem]:
    """A number like a shift for which no details were found."""
    expected = "details such as (s, 3H)"
    words = "may be a signal, but no details of it were found"
    return [
        Problem("signal-unread", f"{s.centre:g} {words}", Locus(span=s.span), "", expected) for s in left_out
    ]


def _judge_text(
    text: str, plain_text: str, header: Header, nucleus: str, signals: list[Signal]
) -> list[Problem]:
    """Problems of the list as a whole."""
    if not signals:
        if re.search(r"\d", plain_text[header.end :]):
            return [_whole(text, "list-not-read", "no signal could be read in this text")]
        return [_whole(text, "list-no-number", "the text holds no shift")]
    if is_prose(plain_text[header.end :], len(signals)):
        return [_whole(text, "list-prose", "the text tells about signals in sentences and is no list")]
    if header.nucleus and header.nucleus != nucleus:
        message = f"the text is headed {header.nucleus}, the record says {nucleus}"
        return [Problem("nucleus-differs", message, Locus(span=Span(0, max(1, header.end))), "", nucleus)]
    return []


def read_signals(signals: Sequence[Mapping[str, object]], nucleus: str, pointer: str) -> PeakList:
    """Structured signals (keys shift | low/high, multiplicity, couplings, nuclei, note) as a peak list.

    The list's text is written out by the tool; problems carry JSON Pointers below ``pointer``.
    """
    text, spans, problems = render(signals, nucleus, pointer)
    read = [as_signal(entry, span) for entry, span in zip(signals, spans, strict=True)]
    kept = tuple(s for s in read if s is not None)
    # Numbers have lost their last zeros (5.10 is 5.1), but a list is typed to one precision.
    digits = max((s.decimals for s in kept), default=0)
    kept = tuple(replace(s, decimals=digits) for s in kept)
    if not kept:
        problems = (*problems, Problem("list-empty", "the list holds no signal", Locus(pointer), "spectrum", "signals"))
    return PeakList(nucleus, text, kept, problems)
