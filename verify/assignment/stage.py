"""The door of the room: one reported list and the expectations in, its cheapest explanation out."""

from __future__ import annotations

from verify.assignment.cost import distance, outside, price_all
from verify.assignment.lines import LineExplanation, explain_lines
from verify.assignment.model import Missing, Share, SignalReading, SpectrumAssignment, Totals
from verify.assignment.offset import common_offset
from verify.assignment.proton import cost_bound, explain, mixture_words
from verify.assignment.readings import find_missing, read_signals, window_words
from verify.assignment.repair import repairs
from verify.assignment.solvent_lines import impurities, line_names
from verify.assignment.totals import fewest_signals, hydrogen_totals, most_signals
from verify.expectations.model import Expectation
from verify.expectations.solvent import solvent_lines
from verify.peaklist.model import PeakList
from verify.structure.model import Structure

SOFTENING_FLAGS = ("paramagnetic-metal", "metal", "radical", "boron", "mixture")
MOST_NUCLEI = 400
MOST_SIGNALS = 300
WEAK_LINES = frozenset({"CDCl3", "CD2Cl2", "C6D6"})


def softening(structure: Structure, peaks: PeakList) -> str:
    """Words of the text and flags of the structure that soften every statement about the list."""
    words = list(mixture_words(peaks))
    words += [flag for flag in SOFTENING_FLAGS if flag in structure.flags]
    if structure.stereo_state == "several-undefined" and len(words) > 0:
        words.append("undefined stereocentres")
    return ", ".join(words)


def _empty(peaks: PeakList, spectrum: int, status: str) -> SpectrumAssignment:
    return SpectrumAssignment(peaks.nucleus, spectrum, status, (), (), Totals(0.0, 0.0, 0.0, complete=False), 0.0)


def assign(
    structure: Structure, expectations: tuple[Expectation, ...], peaks: PeakList, spectrum: int, solvent: str | None
) -> SpectrumAssignment:
    """Explain one list. ``expectations`` are those of all nuclei; ``solvent`` is the canonical name or None."""
    if not peaks.signals:
        return _empty(peaks, spectrum, "no-list")
    mine = tuple(e for e in expectations if e.environment.nucleus == peaks.nucleus)
    if sum(e.environment.count for e in mine) > MOST_NUCLEI or len(peaks.signals) > MOST_SIGNALS:
        return _empty(peaks, spectrum, "too-large")
    if peaks.nucleus == "1H":
        return _assign_proton(structure, mine, peaks, spectrum, solvent)
    return _assign_lines(structure, mine, peaks, spectrum, solvent)


def list_cost(
    structure: Structure, expectations: tuple[Expectation, ...], peaks: PeakList, solvent: str | None,
    enough: float = float("inf"),
) -> float | None:
    """Cost in nats of the best explanation alone, for comparing structures; None where the list is not judged.

    Where a quick bound already shows that it costs ``enough`` or more, that bound is returned.
    """
    mine = tuple(e for e in expectations if e.environment.nucleus == peaks.nucleus)
    if not peaks.signals or not mine or sum(e.environment.count for e in mine) > MOST_NUCLEI:
        return None
    names = line_names(peaks, solvent)
    if peaks.nucleus != "1H":
        return explain_lines(peaks, mine, bool(softening(structure, peaks)), names).cost
    totals = hydrogen_totals(mine, peaks.signals)
    prices = price_all(mine, peaks.signals, _hydrogens(structure, mine))
    bound = cost_bound(peaks, mine, prices, solvent, totals.factor, names)
    return bound if bound >= enough else explain(peaks, mine, prices, solvent, totals.factor, names).placement.cost


def _hydrogens(structure: Structure, expectations: tuple[Expectation, ...]) -> dict[int, int]:
    """Hydrogens on the carrier of each environment, by environment index."""
    found = {}
    for expectation in expectations:
        carrier = expectation.environment.carriers[0]
        atom = structure.mol.GetAtomWithIdx(carrier)
        found[expectation.environment.index] = int(atom.GetTotalNumHs(includeNeighbors=True))
    return found


def _covers(solvent: str | None, nucleus: str) -> tuple[tuple[float, float, str], ...]:
    """Ranges in ppm that a solvent hides: water, and residual lines of solvents that show several of them.

    The single weak line of CDCl3, CD2Cl2 or C6D6 hides nothing but what stands exactly under it.
    """
    lines = solvent_lines(solvent, nucleus) if solvent else ()
    strong = [line for line in lines if line.kind == "water" or solvent not in WEAK_LINES]
    return tuple((line.shift - line.tolerance, line.shift + line.tolerance, line.name) for line in strong)


def _assign_proton(
    structure: Structure, expectations: tuple[Expectation, ...], peaks: PeakList, spectrum: int, solvent: str | None
) -> SpectrumAssignment:
    totals = hydrogen_totals(expectations, peaks.signals)
    names = line_names(peaks, solvent)
    prices = price_all(expectations, peaks.signals, _hydrogens(structure, expectations))
    explanation = explain(peaks, expectations, prices, solvent, totals.factor, names)
    readings = read_signals(peaks, explanation, prices, expectations, names)
    readings = _name_impurities(readings, peaks, solvent)
    missing = find_missing(explanation, expectations, _covers(solvent, "1H"))
    lenient = softening(structure, peaks)
    return SpectrumAssignment(
        nucleus=peaks.nucleus, spectrum=spectrum, status="explained" if explanation.placement.exact else "timeout",
        readings=readings, missing=missing, totals=totals, cost=explanation.placement.cost,
        repairs=repairs(readings, peaks.signals, missing, totals), lenient=lenient, group_cut=explanation.cut,
        offset=common_offset(readings, peaks.signals, expectations),
        exchangeable_excess=_exchangeable_excess(readings, peaks),
        signals_low=fewest_signals(expectations), signals_high=most_signals(expectations, bool(lenient), solvent),
    )


def _name_impurities(
    readings: tuple[SignalReading, ...], peaks: PeakList, solvent: str | None
) -> tuple[SignalReading, ...]:
    leftover = tuple(r.signal for r in readings if not r.shares and not r.solvent_line)
    names = impurities(peaks, solvent, leftover)
    return tuple(r.with_impurity(names[r.signal]) if r.signal in names else r for r in readings)


def _exchangeable_excess(readings: tuple[SignalReading, ...], peaks: PeakList) -> float:
    """Unexplained hydrogens in broad or labelled signals where NH+ and OH lie: a salt, hydrate or acid."""
    total = 0.0
    for reading in readings:
        signal = peaks.signals[reading.signal]
        letters = signal.multiplicity
        broad = letters is not None and letters.broad
        if reading.excess > 0.05 and signal.low > 7.0 and (broad or signal.low > 9.5):
            total += reading.excess
    return total


def _line_reading(
    number: int, found: LineExplanation, expectations: tuple[Expectation, ...], peaks: PeakList, solvent_line: str
) -> SignalReading:
    signal = peaks.signals[number]
    rows = found.home[number]
    mine = [(row, expectations[row].environment) for row in rows]
    shares = tuple(Share(e.index, e.count, float(found.costs[row, number]), 0.0) for row, e in mine)
    near = [e for e in expectations if distance(e.window, signal.low, signal.high) <= 3.0 * e.window.scale]
    attached = {e.environment.attached_h for e in near}
    wrong = signal.attached_h is not None and bool(near) and signal.attached_h not in attached
    return SignalReading(
        signal=number, shares=shares, excess=0.0 if rows else 1.0,
        outside_ppm=min((outside(e.window, signal.low, signal.high) for e in expectations), default=0.0),
        expected_window="; ".join(window_words(expectations[row]) for row in rows),
        solvent_line=solvent_line, attached_h_wrong=wrong,
    )


def _missing_line(expectation: Expectation) -> Missing:
    environment = expectation.environment
    vanishes = bool(environment.may_vanish)
    return Missing(environment.index, environment.count, window_words(expectation), expectation.words, "", vanishes)


def _assign_lines(
    structure: Structure, expectations: tuple[Expectation, ...], peaks: PeakList, spectrum: int, solvent: str | None
) -> SpectrumAssignment:
    names = line_names(peaks, solvent)
    lenient = softening(structure, peaks)
    found = explain_lines(peaks, expectations, bool(lenient), names)
    readings = tuple(
        _line_reading(n, found, expectations, peaks, names[n]) for n in range(len(peaks.signals))
    )
    readings = _name_impurities(readings, peaks, solvent)
    missing = tuple(_missing_line(expectations[row]) for row in found.lost)
    named = {r.signal for r in readings if r.impurity or (r.solvent_line and not r.shares)}
    return SpectrumAssignment(
        nucleus=peaks.nucleus, spectrum=spectrum, status="explained", readings=readings, missing=missing,
        totals=Totals(float(len(peaks.signals)), float(len(expectations)), float(len(expectations) + found.extra)),
        cost=found.cost, lenient=lenient,
        lines_without_home=tuple(n for n in found.homeless if n not in named),
        signals_low=0, signals_high=len(expectations) + found.extra,
    )
