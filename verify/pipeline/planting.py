"""Plants one clean error of a named kind in a right record, always the same one for the same seed.

Text errors are made on the characters the parser points at, so the rest of the list stays as it was typed.
"""

from __future__ import annotations

import random
from collections.abc import Callable
from dataclasses import dataclass, replace

from verify.findings.location import Span
from verify.peaklist.model import PeakList, Signal
from verify.peaklist.stage import read_peak_list
from verify.structure.isomers import homologues, isomers


@dataclass(frozen=True, slots=True)
class Specimen:
    """A record as far as errors are planted in it: SMILES and reported text by nucleus. ``group`` names what it
    belongs to (an article, a series); another list is taken from another group."""

    compound: str
    smiles: str
    texts: dict[str, str]
    group: str = ""


Generator = Callable[[Specimen, random.Random, list[Specimen]], Specimen | None]


def _read(specimen: Specimen, nucleus: str) -> PeakList:
    return read_peak_list(specimen.texts.get(nucleus, ""), nucleus)


def _with_text(specimen: Specimen, nucleus: str, text: str) -> Specimen:
    return replace(specimen, texts={**specimen.texts, nucleus: text})


def _edited(specimen: Specimen, nucleus: str, span: Span, new: str) -> Specimen:
    text = specimen.texts[nucleus]
    return _with_text(specimen, nucleus, text[: span.start] + new + text[span.end :])


def _protons(specimen: Specimen) -> list[Signal]:
    """Signals with a whole number of H: those that an error can be planted on."""
    return [s for s in _read(specimen, "1H").signals if s.nuclei and s.nuclei == int(s.nuclei)]


def _pick(signals: list[Signal], dice: random.Random) -> Signal | None:
    return dice.choice(signals) if signals else None


def drop_signal(specimen: Specimen, dice: random.Random, _: list[Specimen]) -> Specimen | None:
    """One signal on carbon (below 9 ppm, not broad) is not listed."""
    sharp = [s for s in _protons(specimen) if s.high < 9 and not (s.multiplicity and s.multiplicity.broad)]
    signal = _pick(sharp, dice)
    if signal is None or len(sharp) < 2:
        return None
    text = specimen.texts["1H"]
    end = signal.span.end
    while end < len(text) and text[end] in ",; ":
        end += 1
    return _edited(specimen, "1H", Span(signal.span.start, end), "")


def add_signal(specimen: Specimen, dice: random.Random, _: list[Specimen]) -> Specimen | None:
    """One signal of one to three H is listed that the structure does not have."""
    signal = _pick(_protons(specimen), dice)
    if signal is None:
        return None
    shift, count = dice.uniform(0.8, 8.2), dice.choice((1, 2, 3))
    letters = dice.choice(("s", "d, J = 7.2 Hz", "t, J = 7.1 Hz"))
    extra = f"{shift:.2f} ({letters}, {count}H), "
    return _edited(specimen, "1H", Span(signal.span.start, signal.span.start), extra)


def integral_off(specimen: Specimen, dice: random.Random, _: list[Specimen]) -> Specimen | None:
    """One integral is one H too large or too small."""
    signal = _pick([s for s in _protons(specimen) if s.nuclei_span], dice)
    if signal is None or signal.nuclei is None or signal.nuclei_span is None:
        return None
    count = int(signal.nuclei) + (1 if signal.nuclei < 2 else dice.choice((-1, 1)))
    old = specimen.texts["1H"][signal.nuclei_span.start : signal.nuclei_span.end]
    digits = "".join(c for c in old if c.isdigit())
    if not digits:
        return None
    return _edited(specimen, "1H", signal.nuclei_span, old.replace(digits, str(count), 1))


def wrong_splitting(specimen: Specimen, dice: random.Random, _: list[Specimen]) -> Specimen | None:
    """One single letter becomes another: s to t, d to t or q, t to d or q, q to t."""
    swap = {"s": "t", "d": "tq", "t": "dq", "q": "td"}
    lettered = [s for s in _protons(specimen) if s.multiplicity and s.multiplicity.span]
    signal = _pick([s for s in lettered if s.multiplicity and s.multiplicity.letters in swap], dice)
    if signal is None or signal.multiplicity is None or signal.multiplicity.span is None:
        return None
    letter = signal.multiplicity.letters
    new = dice.choice(swap[letter]) + (", J = 7.0 Hz" if letter == "s" else "")
    span = signal.multiplicity.span
    old = specimen.texts["1H"][span.start : span.end]
    return _edited(specimen, "1H", span, new) if old.strip().lower() == letter else None


def mistyped_coupling(specimen: Specimen, dice: random.Random, _: list[Specimen]) -> Specimen | None:
    """One J loses its decimal point (times ten) or gains thirty hertz."""
    couplings = [c for s in _protons(specimen) for c in s.couplings if c.span and 2 < c.value < 20]
    if not couplings:
        return None
    coupling = dice.choice(couplings)
    value = coupling.value * 10 if dice.random() < 0.5 else coupling.value + 30
    assert coupling.span is not None
    return _edited(specimen, "1H", coupling.span, f"{value:.1f}")


def mistyped_shift(specimen: Specimen, dice: random.Random, _: list[Specimen]) -> Specimen | None:
    """One shift is 1.5 to 3.5 ppm off, inside 0.2 to 10 ppm."""
    signal = _pick([s for s in _protons(specimen) if s.shift_span], dice)
    if signal is None or signal.shift_span is None:
        return None
    step = dice.uniform(1.5, 3.5) * dice.choice((-1, 1))
    if not 0.2 < signal.low + step < 10 or not 0.2 < signal.high + step < 10:
        step = -step
    if not 0.0 < signal.low + step < 12:
        return None
    low, high = signal.low + step, signal.high + step
    new = f"{high:.2f}–{low:.2f}" if signal.is_range else f"{low:.2f}"
    return _edited(specimen, "1H", signal.shift_span, new)


def other_list(specimen: Specimen, dice: random.Random, rows: list[Specimen]) -> Specimen | None:
    """The 1H list of a compound of another group."""
    others = [r for r in rows if r.group != specimen.group and r.smiles != specimen.smiles and "1H" in r.texts]
    return _with_text(specimen, "1H", dice.choice(others).texts["1H"]) if others else None


def homologue(specimen: Specimen, dice: random.Random, _: list[Specimen]) -> Specimen | None:
    """A CH3 of the drawing becomes C2H5."""
    others = homologues(specimen.smiles)
    return replace(specimen, smiles=dice.choice(others)) if others else None


def positional_isomer(specimen: Specimen, dice: random.Random, _: list[Specimen]) -> Specimen | None:
    """A substituent moves to another place of its aromatic ring system, one of the nearest."""
    others = isomers(specimen.smiles, ("ring-position",), limit=4)
    return replace(specimen, smiles=dice.choice(others).smiles) if others else None


def carbons_added(specimen: Specimen, dice: random.Random, _: list[Specimen]) -> Specimen | None:
    """Four lines that the structure does not have stand at the end of the 13C list."""
    if "13C" not in specimen.texts:
        return None
    signals = _read(specimen, "13C").signals
    if len(signals) < 3:
        return None
    ranges = ((15.0, 60.0), (110.0, 160.0))
    values = [dice.uniform(*dice.choice(ranges)) for _ in range(4)]
    extra = ", ".join(f"{value:.1f}" for value in values) + ", "
    start = signals[0].span.start
    return _edited(specimen, "13C", Span(start, start), extra)


KINDS: dict[str, Generator] = {
    "signal dropped": drop_signal,
    "signal added": add_signal,
    "integral off by one": integral_off,
    "splitting wrong": wrong_splitting,
    "coupling mistyped": mistyped_coupling,
    "shift mistyped": mistyped_shift,
    "other compound's list": other_list,
    "homologue drawn": homologue,
    "positional isomer drawn": positional_isomer,
    "four carbons added": carbons_added,
}


def plant(kind: str, specimen: Specimen, others: list[Specimen], seed: int) -> Specimen | None:
    """The specimen with one error of this kind, or None where it has no place for one."""
    if "1H" not in specimen.texts and KINDS[kind] in (drop_signal, add_signal, integral_off, other_list):
        return None
    made = KINDS[kind](specimen, random.Random(f"{seed}:{kind}:{specimen.compound}"), others)
    return made if made is not None and made != specimen else None
