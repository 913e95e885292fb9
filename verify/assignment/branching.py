"""Exact placement by branch and bound on linear assignments: small lists need no general integer program.

The bound of a node is the linear assignment of single nuclei, in which groups may be cut. A node whose answer cuts
a group, or crowds a resolved signal, is split in two: a piece lies in the signal that holds most of it, or not.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from verify.assignment.boxes import CROWDING, SLACK, Boxes, Placement, as_placement, match
from verify.assignment.pieces import Piece, kin_weights

Matrix = NDArray[np.float64]

FORBIDDEN = 1e6
OVERFILL = 4
MOST_NODES = 600
NOTHING = 1e-9


@dataclass(slots=True)
class _Best:
    cost: float = float("inf")
    placed: Matrix | None = None
    nodes: int = 0


class _Search:
    """Holds what does not change from node to node: rows (nuclei), columns (places) and their costs."""

    def __init__(self, costs: Matrix, pieces: tuple[Piece, ...], boxes: Boxes) -> None:
        self.pieces, self.boxes = pieces, boxes
        self.nuclei = np.array([p.nuclei for p in pieces], dtype=np.int64)
        self.signals = costs.shape[1]
        self.rows = np.repeat(np.arange(len(pieces)), self.nuclei)
        capacity = np.rint(boxes.capacity).astype(np.int64)
        inside = np.repeat(np.arange(self.signals), capacity)
        above = np.repeat(np.arange(self.signals), OVERFILL)
        nowhere = np.full(len(self.rows), self.signals)
        self.columns = np.concatenate([inside, above, nowhere])
        self.extra = np.concatenate([-boxes.slack[inside], np.full(len(above), SLACK), np.zeros(len(nowhere))])
        self.constant = float(boxes.slack[inside].sum())
        left_out = np.array([p.left_out for p in pieces])
        self.per_nucleus = np.column_stack([costs, left_out]) / self.nuclei[:, None]
        self.weights = np.array(kin_weights(pieces))
        self.overfilled = False

    def bound(self, barred: NDArray[np.bool_]) -> tuple[Matrix, float]:
        """Nuclei per (piece, signal or nowhere), shape (P, S + 1), and the cost of the linear answer."""
        price = np.where(barred, FORBIDDEN, self.per_nucleus)
        table = price[np.ix_(self.rows, self.columns)] + self.extra
        row, column = match(table)
        placed = np.zeros(self.per_nucleus.shape)
        np.add.at(placed, (self.rows[row], self.columns[column]), 1.0)
        return placed, float(table[row, column].sum()) + self.constant

    def crowd(self, held: NDArray[np.bool_]) -> Matrix:
        """Crowding of every signal in nats, shape (S,), for pieces held in signals, shape (P, S)."""
        load = (held * self.weights[:, None]).sum(axis=0)
        return np.where(self.boxes.resolved, CROWDING * np.clip(load - 1.0, 0.0, None), 0.0)

    def cut(self, placed: Matrix) -> int:
        """The largest piece that lies in several places, -1 if none does."""
        several = (placed > 0).sum(axis=1) > 1
        return int(np.argmax(np.where(several, self.nuclei, 0))) if bool(several.any()) else -1


def _branch_piece(search: _Search, placed: Matrix, fixed: NDArray[np.bool_]) -> tuple[int, int]:
    """Piece and place to branch on: a cut piece, else an unfixed one in a crowded signal; (-1, -1) if none."""
    piece = search.cut(placed)
    if piece >= 0:
        return piece, int(placed[piece].argmax())
    held = placed[:, :-1] > 0
    crowded = np.flatnonzero(search.crowd(held) > NOTHING)
    for signal in crowded:
        for number in np.flatnonzero(held[:, signal] & ~fixed):
            return int(number), int(signal)
    return -1, -1


def _visit(search: _Search, barred: NDArray[np.bool_], fixed: NDArray[np.bool_], best: _Best) -> None:
    best.nodes += 1
    if best.nodes > MOST_NODES:
        return
    placed, cost = search.bound(barred)
    held_fixed = (placed[:, :-1] > 0) & fixed[:, None]
    if cost + float(search.crowd(held_fixed).sum()) >= best.cost - NOTHING or cost >= FORBIDDEN / 2:
        return
    if search.cut(placed) < 0:
        value = cost + float(search.crowd(placed[:, :-1] > 0).sum())
        if value < best.cost - NOTHING:
            best.cost, best.placed = value, placed[:, :-1].copy()
            used = placed[:, :-1].sum(axis=0) - search.boxes.capacity
            search.overfilled = bool((used >= OVERFILL).any())
    piece, place = _branch_piece(search, placed, fixed)
    if piece < 0:
        return
    inside, outside = barred.copy(), barred.copy()
    inside[piece] = True
    inside[piece, place] = False
    outside[piece, place] = True
    now_fixed = fixed.copy()
    now_fixed[piece] = True
    _visit(search, inside, now_fixed, best)
    if not bool(outside[piece].all()):
        _visit(search, outside, fixed, best)


def least_cost(costs: Matrix, pieces: tuple[Piece, ...], boxes: Boxes) -> float:
    """A bound in nats below which no placement of whole pieces can cost; 0 where counts are not stated.

    ``costs`` has shape (P, S).
    """
    if not _stated(boxes.capacity) or not pieces:
        return 0.0
    search = _Search(costs, pieces, boxes)
    _, cost = search.bound(np.zeros((len(pieces), search.signals + 1), dtype=np.bool_))
    return cost


def _stated(capacity: Matrix) -> bool:
    return not (bool(np.isnan(capacity).any()) or bool(np.any(np.abs(capacity - np.rint(capacity)) > 0.05)))


def branch_and_bound(costs: Matrix, pieces: tuple[Piece, ...], boxes: Boxes) -> Placement | None:
    """Exact placement of indivisible pieces; None where counts are not stated or the search grew too large.

    ``costs`` has shape (P, S), nats for a whole piece.
    """
    capacity = boxes.capacity
    if not _stated(capacity):
        return None
    search = _Search(costs, pieces, boxes)
    best = _Best()
    barred = np.zeros((len(pieces), search.signals + 1), dtype=np.bool_)
    _visit(search, barred, np.zeros(len(pieces), dtype=np.bool_), best)
    if best.nodes > MOST_NODES or best.placed is None or search.overfilled:
        return None
    return as_placement(best.placed, capacity, best.cost)
