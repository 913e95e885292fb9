"""Least-cost placement of pieces in signals as an integer program, solved by HiGHS through SciPy.

The last resort: counts that are not stated, fractional counts of mixtures, and searches that grew too large.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import Bounds, LinearConstraint, milp
from scipy.sparse import coo_array

from verify.assignment.boxes import CROWDING, SLACK, Boxes, Placement, as_placement
from verify.assignment.pieces import Piece, kin_weights

Matrix = NDArray[np.float64]

PRUNE = 16.0
TIME_LIMIT_S = 2.0


@dataclass(frozen=True, slots=True)
class _Program:
    """Columns of the integer program: x (piece, signal) pairs, then left-out, excess, deficit, crowding."""

    pairs: list[tuple[int, int]]
    pieces: int
    signals: int

    @property
    def width(self) -> int:
        return len(self.pairs) + self.pieces + 3 * self.signals

    def column(self, kind: str, number: int) -> int:
        start = {"left": 0, "excess": self.pieces, "deficit": self.pieces + self.signals,
                 "crowd": self.pieces + 2 * self.signals}[kind]
        return len(self.pairs) + start + number


def _columns(costs: Matrix) -> list[tuple[int, int]]:
    cheapest = costs.min(axis=1, keepdims=True)
    keep = costs <= cheapest + PRUNE
    return [(int(p), int(s)) for p, s in zip(*np.nonzero(keep), strict=True)]


def _objective(program: _Program, costs: Matrix, pieces: tuple[Piece, ...], boxes: Boxes) -> Matrix:
    objective = np.zeros(program.width)
    for number, (p, s) in enumerate(program.pairs):
        objective[number] = costs[p, s]
    for p, piece in enumerate(pieces):
        objective[program.column("left", p)] = piece.left_out
    for s in range(program.signals):
        free = bool(np.isnan(boxes.capacity[s]))
        objective[program.column("excess", s)] = 0.0 if free else boxes.slack[s]
        objective[program.column("deficit", s)] = 0.0 if free else SLACK
        objective[program.column("crowd", s)] = CROWDING
    return objective


def _constraints(program: _Program, pieces: tuple[Piece, ...], boxes: Boxes) -> LinearConstraint:
    capacity = boxes.capacity
    row: list[int] = []
    column: list[int] = []
    value: list[float] = []
    weights = kin_weights(pieces)
    first_signal, first_crowd = program.pieces, program.pieces + program.signals

    def put(r: int, c: int, v: float) -> None:
        row.append(r)
        column.append(c)
        value.append(v)

    for number, (p, s) in enumerate(program.pairs):
        put(p, number, 1.0)
        put(first_signal + s, number, float(pieces[p].nuclei))
        if boxes.resolved[s]:
            put(first_crowd + s, number, weights[p])
    for p in range(program.pieces):
        put(p, program.column("left", p), 1.0)
    for s in range(program.signals):
        put(first_signal + s, program.column("excess", s), 1.0)
        put(first_signal + s, program.column("deficit", s), -1.0)
        put(first_crowd + s, program.column("crowd", s), -1.0)
    lower = np.concatenate([np.ones(program.pieces), np.nan_to_num(capacity), np.full(program.signals, -np.inf)])
    upper = np.concatenate([np.ones(program.pieces), np.nan_to_num(capacity), np.ones(program.signals)])
    free = np.isnan(capacity)
    lower[first_signal:first_crowd][free] = -np.inf
    upper[first_signal:first_crowd][free] = np.inf
    matrix = coo_array((value, (row, column)), shape=(len(lower), program.width)).tocsr()
    return LinearConstraint(matrix, lower, upper)


def integer(costs: Matrix, pieces: tuple[Piece, ...], boxes: Boxes, *, divisible: bool = False) -> Placement:
    """Exact placement of indivisible pieces (or the best division, for fractional counts of mixtures)."""
    capacity = boxes.capacity
    program = _Program(_columns(costs), len(pieces), len(capacity))
    constraints = _constraints(program, pieces, boxes)
    whole_columns = np.zeros(program.width, dtype=np.uint8)
    if not divisible:
        whole_columns[: len(program.pairs) + program.pieces] = 1
    upper = np.full(program.width, np.inf)
    upper[: len(program.pairs) + program.pieces] = 1.0
    solution = milp(
        _objective(program, costs, pieces, boxes), constraints=constraints, integrality=whole_columns,
        bounds=Bounds(np.zeros(program.width), upper), options={"time_limit": TIME_LIMIT_S, "mip_rel_gap": 0.0},
    )
    placed = np.zeros(costs.shape)
    if solution.x is None:
        return as_placement(placed, capacity, float("inf"), exact=False)
    # The solver calls a value whole when it is within 1e-6 of a whole number.
    values = np.where(whole_columns == 1, np.rint(solution.x), solution.x)
    for number, (p, s) in enumerate(program.pairs):
        placed[p, s] = values[number] * pieces[p].nuclei
    return as_placement(placed, capacity, float(solution.fun), exact=solution.status == 0)
