"""Structured signals of a record: checked key by key, and written out as text so that reports can show them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from verify.findings.location import Locus, Span
from verify.findings.problem import Problem
from verify.peaklist.letters import read_letters
from verify.peaklist.model import Coupling, Multiplicity, Signal

FURTHEST_PPM = 500.0


def _figure(value: object) -> float | None:
    return float(value) if isinstance(value, (int, float)) and not isinstance(value, bool) else None


def _decimals(value: object) -> int:
    return len(repr(value).partition(".")[2]) if isinstance(value, float) else 0


def _multiplicity(value: object) -> Multiplicity | None:
    if not isinstance(value, str):
        return None
    read = read_letters(value, 0, len(value))
    return read[0] if read is not None and read[1] >= len(value.rstrip()) else None


def _couplings(value: object) -> tuple[Coupling, ...]:
    items = value if isinstance(value, (list, tuple)) else [value]
    found = [(_figure(item), item) for item in items]
    return tuple(Coupling(figure, _decimals(item)) for figure, item in found if figure is not None)


def shift_of(entry: Mapping[str, object]) -> tuple[float, float, int] | None:
    """(low, high, decimals) in ppm of an entry, None where it states no usable shift."""
    shift = _figure(entry.get("shift"))
    if shift is not None and abs(shift) <= FURTHEST_PPM:
        return shift, shift, _decimals(entry["shift"])
    low, high = _figure(entry.get("low")), _figure(entry.get("high"))
    if low is None or high is None or max(abs(low), abs(high)) > FURTHEST_PPM:
        return None
    return min(low, high), max(low, high), max(_decimals(entry["low"]), _decimals(entry["high"]))


def as_signal(entry: Mapping[str, object], span: Span) -> Signal | None:
    """The signal of a checked entry; ``span`` is its place in the written text."""
    shift = shift_of(entry)
    if shift is None:
        return None
    nuclei = _figure(entry.get("nuclei"))
    return Signal(
        low=shift[0], high=shift[1], decimals=shift[2], span=span,
        multiplicity=_multiplicity(entry.get("multiplicity")),
        couplings=_couplings(entry.get("couplings", ())),
        nuclei=nuclei if nuclei is not None and 0 < nuclei <= 500 else None,
        annotation=str(entry.get("note") or ""), shift_span=span,
    )  # fmt: skip


def _problems(entry: Mapping[str, object], place: str, number: int) -> list[Problem]:
    found = []
    if shift_of(entry) is None:
        message = "a signal needs 'shift', or 'low' and 'high', in ppm"
        found.append(Problem("shift-impossible", message, Locus(place, signal=number), "signal", "shift: 7.26"))
    letters = entry.get("multiplicity")
    if letters is not None and _multiplicity(letters) is None:
        locus = Locus(f"{place}/multiplicity", signal=number)
        message = f"'{letters}' is no known multiplicity"
        found.append(Problem("letters-unknown", message, locus, "", "s, d, t, dd, m, br s ..."))
    nuclei = entry.get("nuclei")
    if nuclei is not None and not 0 < (_figure(nuclei) or 0.0) <= 500:
        locus = Locus(f"{place}/nuclei", signal=number)
        message = f"'{nuclei}' is no possible number of nuclei"
        found.append(Problem("nuclei-impossible", message, locus, "signal", "more than 0 and at most 500"))
    return found


def _text(entry: Mapping[str, object], nucleus: str) -> str:
    shift = shift_of(entry)
    if shift is None:
        return "?"
    digits = max(shift[2], 2 if nucleus == "1H" else 1)
    words = f"{shift[1]:.{digits}f}-{shift[0]:.{digits}f}" if shift[0] != shift[1] else f"{shift[0]:.{digits}f}"
    details = [str(entry["multiplicity"])] if entry.get("multiplicity") else []
    js = _couplings(entry.get("couplings", ()))
    if js:
        details.append("J = " + ", ".join(f"{j.value:g}" for j in js) + " Hz")
    nuclei = _figure(entry.get("nuclei"))
    if nuclei is not None:
        details.append(f"{nuclei:g}{'H' if nucleus == '1H' else 'C' if nucleus == '13C' else nucleus[-1]}")
    if entry.get("note"):
        details.append(str(entry["note"]))
    return f"{words} ({', '.join(details)})" if details else words


def render(
    signals: Sequence[Mapping[str, object]], nucleus: str, pointer: str
) -> tuple[str, tuple[Span, ...], tuple[Problem, ...]]:
    """The list as text, the span of every entry in it, and what is wrong with entries."""
    parts: list[str] = []
    spans: list[Span] = []
    problems: list[Problem] = []
    position = 0
    for number, entry in enumerate(signals):
        words = _text(entry, nucleus)
        spans.append(Span(position, position + len(words)))
        position += len(words) + 2
        parts.append(words)
        problems += _problems(entry, f"{pointer}/{number}", number)
    return ", ".join(parts), tuple(spans), tuple(problems)
