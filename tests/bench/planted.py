"""Plants one clean error of a named kind in a right record, always the same one for the same seed.

Text errors are made on the characters the parser points at, so the rest of the list stays as it was typed.
"""

from __future__ import annotations

import random
from collections.abc import Callable
from dataclasses import dataclass, replace

from published import Published
from rdkit import Chem
from rdkit.rdBase import BlockLogs

from verify.findings.location import Span
from verify.peaklist.model import PeakList, Signal
from verify.peaklist.stage import read_peak_list

Generator = Callable[[Published, random.Random, list[Published]], Published | None]


@dataclass(frozen=True, slots=True)
class Planted:
    """A record with one error of the named kind."""

    kind: str
    record: Published


def _read(published: Published, nucleus: str) -> PeakList:
    return read_peak_list(published.texts[nucleus], nucleus)


def _with_text(published: Published, nucleus: str, text: str) -> Published:
    return replace(published, texts={**published.texts, nucleus: text})


def _edited(published: Published, nucleus: str, span: Span, new: str) -> Published:
    text = published.texts[nucleus]
    return _with_text(published, nucleus, text[: span.start] + new + text[span.end :])


def _protons(published: Published) -> list[Signal]:
    """Signals with a whole number of H: those that an error can be planted on."""
    return [s for s in _read(published, "1H").signals if s.nuclei and s.nuclei == int(s.nuclei)]


def _pick(signals: list[Signal], dice: random.Random) -> Signal | None:
    return dice.choice(signals) if signals else None


def drop_signal(published: Published, dice: random.Random, _: list[Published]) -> Published | None:
    """One signal on carbon (below 9 ppm, not broad) is not listed."""
    sharp = [s for s in _protons(published) if s.high < 9 and not (s.multiplicity and s.multiplicity.broad)]
    signal = _pick(sharp, dice)
    if signal is None or len(sharp) < 2:
        return None
    text = published.texts["1H"]
    end = signal.span.end
    while end < len(text) and text[end] in ",; ":
        end += 1
    return _edited(published, "1H", Span(signal.span.start, end), "")


def add_signal(published: Published, dice: random.Random, _: list[Published]) -> Published | None:
    """One signal of one to three H is listed that the structure does not have."""
    signal = _pick(_protons(published), dice)
    if signal is None:
        return None
    shift, count = dice.uniform(0.8, 8.2), dice.choice((1, 2, 3))
    letters = dice.choice(("s", "d, J = 7.2 Hz", "t, J = 7.1 Hz"))
    extra = f"{shift:.2f} ({letters}, {count}H), "
    return _edited(published, "1H", Span(signal.span.start, signal.span.start), extra)


def integral_off(published: Published, dice: random.Random, _: list[Published]) -> Published | None:
    """One integral is one H too large or too small."""
    signal = _pick([s for s in _protons(published) if s.nuclei_span], dice)
    if signal is None or signal.nuclei is None or signal.nuclei_span is None:
        return None
    count = int(signal.nuclei) + (1 if signal.nuclei < 2 else dice.choice((-1, 1)))
    old = published.texts["1H"][signal.nuclei_span.start : signal.nuclei_span.end]
    digits = "".join(c for c in old if c.isdigit())
    if not digits:
        return None
    return _edited(published, "1H", signal.nuclei_span, old.replace(digits, str(count), 1))


def wrong_splitting(published: Published, dice: random.Random, _: list[Published]) -> Published | None:
    """One single letter becomes another: s to t, d to t or q, t to d or q, q to t."""
    swap = {"s": "t", "d": "tq", "t": "dq", "q": "td"}
    lettered = [s for s in _protons(published) if s.multiplicity and s.multiplicity.span]
    signal = _pick([s for s in lettered if s.multiplicity and s.multiplicity.letters in swap], dice)
    if signal is None or signal.multiplicity is None or signal.multiplicity.span is None:
        return None
    letter = signal.multiplicity.letters
    new = dice.choice(swap[letter]) + (", J = 7.0 Hz" if letter == "s" else "")
    span = signal.multiplicity.span
    old = published.texts["1H"][span.start : span.end]
    return _edited(published, "1H", span, new) if old.strip().lower() == letter else None


def mistyped_coupling(published: Published, dice: random.Random, _: list[Published]) -> Published | None:
    """One J loses its decimal point (times ten) or gains thirty hertz."""
    couplings = [c for s in _protons(published) for c in s.couplings if c.span and 2 < c.value < 20]
    if not couplings:
        return None
    coupling = dice.choice(couplings)
    value = coupling.value * 10 if dice.random() < 0.5 else coupling.value + 30
    assert coupling.span is not None
    return _edited(published, "1H", coupling.span, f"{value:.1f}")


def mistyped_shift(published: Published, dice: random.Random, _: list[Published]) -> Published | None:
    """One shift is 1.5 to 3.5 ppm off, inside 0.2 to 10 ppm."""
    signal = _pick([s for s in _protons(published) if s.shift_span], dice)
    if signal is None or signal.shift_span is None:
        return None
    step = dice.uniform(1.5, 3.5) * dice.choice((-1, 1))
    if not 0.2 < signal.low + step < 10 or not 0.2 < signal.high + step < 10:
        step = -step
    if not 0.0 < signal.low + step < 12:
        return None
    low, high = signal.low + step, signal.high + step
    new = f"{high:.2f}–{low:.2f}" if signal.is_range else f"{low:.2f}"
    return _edited(published, "1H", signal.shift_span, new)


def other_list(published: Published, dice: random.Random, rows: list[Published]) -> Published | None:
    """The 1H list of a compound of another article."""
    mine = published.id.rsplit("-", 1)[0]
    others = [r for r in rows if r.id.rsplit("-", 1)[0] != mine and r.smiles != published.smiles]
    return _with_text(published, "1H", dice.choice(others).texts["1H"]) if others else None


def _drawn(published: Published, mol: Chem.Mol | None) -> Published | None:
    if mol is None:
        return None
    with BlockLogs():
        try:
            Chem.SanitizeMol(mol)
        except ValueError:
            return None
        smiles = Chem.MolToSmiles(mol)
        same = Chem.MolToSmiles(Chem.MolFromSmiles(published.smiles)) == smiles
    return None if same else replace(published, smiles=smiles)


def homologue(published: Published, dice: random.Random, _: list[Published]) -> Published | None:
    """A CH3 of the drawing becomes C2H5."""
    mol = Chem.MolFromSmiles(published.smiles)
    methyls = [a.GetIdx() for a in mol.GetAtoms() if a.GetSymbol() == "C" and a.GetDegree() == 1]
    methyls = [i for i in methyls if mol.GetAtomWithIdx(i).GetTotalNumHs() == 3]
    if not methyls:
        return None
    edit = Chem.RWMol(mol)
    edit.AddBond(dice.choice(methyls), edit.AddAtom(Chem.Atom(6)), Chem.BondType.SINGLE)
    return _drawn(published, edit.GetMol())


def positional_isomer(published: Published, dice: random.Random, _: list[Published]) -> Published | None:
    """A substituent moves to a neighbouring CH of its benzene ring."""
    mol = Chem.MolFromSmiles(published.smiles)
    pattern = Chem.MolFromSmarts("[!#1]-!@[c;r6]:[cH1;r6]")
    moves = list(mol.GetSubstructMatches(pattern))
    dice.shuffle(moves)
    for group, old, new in moves:
        edit = Chem.RWMol(mol)
        order = edit.GetBondBetweenAtoms(group, old).GetBondType()
        edit.RemoveBond(group, old)
        edit.AddBond(group, new, order)
        for atom in (old, new):
            edit.GetAtomWithIdx(atom).SetNoImplicit(False)
            edit.GetAtomWithIdx(atom).SetNumExplicitHs(0)
        made = _drawn(published, edit.GetMol())
        if made is not None:
            return made
    return None


def carbons_added(published: Published, dice: random.Random, _: list[Published]) -> Published | None:
    """Four lines that the structure does not have stand at the end of the 13C list."""
    if "13C" not in published.texts:
        return None
    signals = _read(published, "13C").signals
    if len(signals) < 3:
        return None
    ranges = ((15.0, 60.0), (110.0, 160.0))
    values = [dice.uniform(*dice.choice(ranges)) for _ in range(4)]
    extra = ", ".join(f"{value:.1f}" for value in values) + ", "
    start = signals[0].span.start
    return _edited(published, "13C", Span(start, start), extra)


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


def plant(kind: str, published: Published, rows: list[Published], seed: int) -> Planted | None:
    """The record with one error of this kind, or None where it has no place for one."""
    made = KINDS[kind](published, random.Random(f"{seed}:{kind}:{published.id}"), rows)
    return Planted(kind, made) if made is not None and made != published else None
