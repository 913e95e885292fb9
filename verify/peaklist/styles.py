"""Writes a peak list in the order of a journal: ACS, RSC or Wiley; no value is changed, only order, digits and words.

source: forms of the author guidelines of the American Chemical Society, the Royal Society of Chemistry and Wiley as
current papers follow them (from memory; common practice).
"""

from __future__ import annotations

from collections.abc import Callable, Sequence

from verify.peaklist.model import Coupling, PeakList, Signal

SHIFT_DIGITS = {"1H": 2, "13C": 1, "19F": 1, "31P": 1}
J_DIGITS = 1
COUNTED = {"1H": "H", "13C": "C", "19F": "F", "31P": "P"}
HALF = 1e-9


def render(peaks: PeakList, style: str, ascending: bool = False) -> str:
    """The list as text. ``style``: "acs", "rsc" or "wiley"; highest shift first unless ``ascending``.

    Digits beyond those of the style are kept where dropping them would change the value. Raises KeyError for an
    unknown style.
    """
    head, one, joint, end = STYLES[style]
    ordered = sorted(peaks.signals, key=lambda s: s.centre, reverse=not ascending)
    return f"{head(peaks)} {joint.join(one(signal, peaks.nucleus) for signal in ordered)}{end}"


def number(value: float, digits: int, typed: int) -> str:
    """A value with the digits of a style, with more where it was typed with more and they are not zero."""
    text = f"{value:.{digits}f}"
    if abs(float(text) - value) > HALF:
        text = f"{value:.{max(typed, digits)}f}"
    return text


def _shift(signal: Signal, nucleus: str) -> str:
    digits = SHIFT_DIGITS[nucleus]
    high = number(signal.high, digits, signal.decimals)
    if not signal.is_range:
        return high.replace("-", "−")
    low = number(signal.low, digits, signal.decimals)
    return f"{high}–{low}".replace("-", "−")


def _letters(signal: Signal) -> str:
    letters = signal.multiplicity
    if letters is None:
        return ""
    before = "br " if letters.broad else "app " if letters.apparent else ""
    return f"{before}{letters.letters}"


def _couplings(couplings: Sequence[Coupling]) -> str:
    return ", ".join(number(abs(c.value), J_DIGITS, c.decimals) for c in couplings)


def _count(signal: Signal, nucleus: str, gap: str) -> str:
    if signal.nuclei is None:
        return ""
    return f"{signal.nuclei:g}{gap}{COUNTED[nucleus]}"


def _told(signal: Signal, nucleus: str) -> str:
    """The annotation, without the count that stands for itself."""
    count = _count(signal, nucleus, "")
    words = signal.annotation
    return "" if words.replace(" ", "") in (count, count.replace("C", "xC")) else words


def _bracket(parts: Sequence[str], joint: str = ", ") -> str:
    inside = joint.join(part for part in parts if part)
    return f" ({inside})" if inside else ""


def _acs(signal: Signal, nucleus: str) -> str:
    js = f"J = {_couplings(signal.couplings)} Hz" if signal.couplings else ""
    parts = (_letters(signal), js, _count(signal, nucleus, ""), _told(signal, nucleus))
    return _shift(signal, nucleus) + _bracket(parts)


def _rsc(signal: Signal, nucleus: str) -> str:
    js = f"J {' and '.join(_couplings(signal.couplings).rsplit(', ', 1))}" if signal.couplings else ""
    parts = (_count(signal, nucleus, " "), _letters(signal), js, _told(signal, nucleus))
    return _shift(signal, nucleus) + _bracket(parts)


def _wiley(signal: Signal, nucleus: str) -> str:
    js = f"J = {_couplings(signal.couplings)} Hz" if signal.couplings else ""
    told = _told(signal, nucleus)
    first = ", ".join(part for part in (_letters(signal), js, _count(signal, nucleus, "")) if part)
    return _shift(signal, nucleus) + _bracket((first, told), "; ")


def _conditions(peaks: PeakList, joint: str) -> str:
    parts = [f"{peaks.field_mhz:g} MHz" if peaks.field_mhz else "", peaks.solvent or ""]
    if peaks.temperature_k:
        parts.append(f"{peaks.temperature_k:g} K")
    inside = joint.join(part for part in parts if part)
    return f" ({inside})" if inside else ""


def _acs_head(peaks: PeakList) -> str:
    return f"{peaks.nucleus} NMR{_conditions(peaks, ', ')} δ"


def _rsc_head(peaks: PeakList) -> str:
    return f"δ{COUNTED[peaks.nucleus]}{_conditions(peaks, '; ')}"


def _wiley_head(peaks: PeakList) -> str:
    return f"{peaks.nucleus} NMR{_conditions(peaks, ', ')}: δ ="


STYLES: dict[str, tuple[Callable[[PeakList], str], Callable[[Signal, str], str], str, str]] = {
    "acs": (_acs_head, _acs, ", ", "."),
    "rsc": (_rsc_head, _rsc, ", ", "."),
    "wiley": (_wiley_head, _wiley, ", ", " ppm."),
}


def values(peaks: PeakList) -> list[tuple[object, ...]]:
    """What a list says, without order, words and digits: two lists with equal values say the same."""
    found = []
    for signal in peaks.signals:
        letters = signal.multiplicity
        found.append(
            (
                round(signal.low, 4),
                round(signal.high, 4),
                (letters.letters, letters.broad, letters.apparent) if letters else None,
                tuple(round(abs(c.value), 3) for c in signal.couplings),
                None if signal.nuclei is None else round(signal.nuclei, 3),
                signal.attached_h,
            )
        )
    return sorted(found, key=repr)


def differences(before: PeakList, after: PeakList) -> int:
    """Number of signals of which two lists say something else."""
    one, other = values(before), values(after)
    return sum(1 for value in one if value not in other) + abs(len(one) - len(other))
