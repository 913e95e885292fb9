"""Explains a 1H list: whole groups first, the common scale of integrals, then cut groups where only that fits."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from verify.assignment.boxes import SLACK, Boxes, Placement
from verify.assignment.branching import least_cost
from verify.assignment.cost import Prices
from verify.assignment.pieces import Piece, carrier_groups, whole_groups
from verify.assignment.solver import place
from verify.expectations.model import Expectation
from verify.peaklist.model import PeakList, Signal

Matrix = NDArray[np.float64]

CUT_GROUP = 2.5
SOLVENT_SLACK = 1.5
MIXTURE_WORDS = frozenset({"rotamers", "mixture", "isomers", "major", "minor", "tautomers", "diastereomers"})


@dataclass(frozen=True, slots=True)
class Explanation:
    """``rows[p]``: row of piece ``p`` in the price matrices. ``cut``: environments whose groups had to be cut."""

    pieces: tuple[Piece, ...]
    rows: tuple[int, ...]
    costs: Matrix
    boxes: Boxes
    placement: Placement
    cut: tuple[int, ...] = ()
    divided: bool = False


def fractional(signals: tuple[Signal, ...]) -> bool:
    """True where two or more counts are no whole numbers, as in lists of mixtures."""
    odd = [s for s in signals if s.nuclei is not None and abs(s.nuclei - round(s.nuclei)) > 0.12]
    return len(odd) >= 2


def mixture_words(peaks: PeakList) -> tuple[str, ...]:
    """Words of the text, or fractional counts, that say two sets of signals are listed."""
    words = tuple(word for word in peaks.remarks if word in MIXTURE_WORDS)
    return words + (("fractional counts",) if fractional(peaks.signals) else ())


def boxes_of(signals: tuple[Signal, ...], factor: float, solvent_names: tuple[str, ...]) -> Boxes:
    """Capacity, slack and resolution of every signal."""
    capacity = np.array([np.nan if s.nuclei is None else s.nuclei * factor for s in signals])
    slack = np.array([SOLVENT_SLACK if name else SLACK for name in solvent_names])
    resolved = np.array([_resolved(s) for s in signals], dtype=np.bool_)
    return Boxes(capacity, slack, resolved)


def _resolved(signal: Signal) -> bool:
    letters = signal.multiplicity
    return letters is not None and letters.kind == "first-order" and not letters.broad and not signal.is_range


def _costs(pieces: tuple[Piece, ...], rows: tuple[int, ...], whole: Matrix, counts: dict[int, int]) -> Matrix:
    share = np.array([p.nuclei / max(1, counts[p.environment]) for p in pieces])
    return np.asarray(whole[list(rows)] * share[:, None])


def _solve(
    pieces: tuple[Piece, ...], prices: Prices, expectations: tuple[Expectation, ...], boxes: Boxes, divided: bool
) -> Explanation:
    row_of = {e.environment.index: n for n, e in enumerate(expectations)}
    counts = {e.environment.index: max(1, round(e.environment.count)) for e in expectations}
    rows = tuple(row_of[p.environment] for p in pieces)
    costs = _costs(pieces, rows, prices.total, counts)
    placement = place(costs, pieces, boxes, divisible=divided)
    return Explanation(pieces, rows, costs, boxes, placement, divided=divided)


def trouble(explanation: Explanation) -> bool:
    """True where something reported or something required is left over."""
    placement = explanation.placement
    lost = any(not s and not p.optional for s, p in zip(placement.shares, explanation.pieces, strict=True))
    return lost or any(placement.excess) or any(placement.deficit)


def cut_environments(explanation: Explanation) -> tuple[int, ...]:
    """Environments whose pieces lie in more than one signal."""
    where: dict[int, set[int]] = {}
    for piece, shares in zip(explanation.pieces, explanation.placement.shares, strict=True):
        where.setdefault(piece.environment, set()).update(signal for signal, _ in shares)
    return tuple(sorted(environment for environment, signals in where.items() if len(signals) > 1))


def cost_bound(
    peaks: PeakList, expectations: tuple[Expectation, ...], prices: Prices, solvent: str | None,
    factor: float, solvent_names: tuple[str, ...],
) -> float:
    """Nats that no explanation by whole or cut groups can undercut; much quicker than the explanation."""
    pieces = carrier_groups(expectations, solvent)
    row_of = {e.environment.index: n for n, e in enumerate(expectations)}
    counts = {e.environment.index: max(1, round(e.environment.count)) for e in expectations}
    costs = _costs(pieces, tuple(row_of[p.environment] for p in pieces), prices.total, counts)
    return least_cost(costs, pieces, boxes_of(peaks.signals, factor, solvent_names))


def explain(
    peaks: PeakList, expectations: tuple[Expectation, ...], prices: Prices, solvent: str | None,
    factor: float, solvent_names: tuple[str, ...],
) -> Explanation:
    """Least-cost explanation of a 1H list; prices have shape (expectations, signals)."""
    boxes = boxes_of(peaks.signals, factor, solvent_names)
    divided = bool(mixture_words(peaks)) and fractional(peaks.signals)
    first = _solve(whole_groups(expectations, solvent), prices, expectations, boxes, divided)
    if divided or not trouble(first):
        return first
    second = _solve(carrier_groups(expectations, solvent), prices, expectations, boxes, divided=False)
    cut = cut_environments(second)
    if second.placement.cost + CUT_GROUP * len(cut) < first.placement.cost - 0.5 and cut:
        return Explanation(second.pieces, second.rows, second.costs, second.boxes, second.placement, cut)
    return first
