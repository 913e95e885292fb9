"""Signals as boxes for nuclei, placements of pieces in them, and the linear matching both solvers stand on.

A signal is a box of ``capacity`` nuclei (NaN: not stated, holds any number). An unfilled place costs the signal's
``slack`` (``SLACK`` nats, less where a solvent line may stand), an overfilled one ``SLACK``.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from verify.assignment.matcher import matching

Matrix = NDArray[np.float64]

SLACK = 7.0
CROWDING = 1.6


@dataclass(frozen=True, slots=True)
class Boxes:
    """The signals as boxes. ``capacity``: nuclei, NaN where not stated; ``slack``: nats per unfilled place;
    ``resolved``: True where unlike groups would not normally share the signal. Shapes (signals,)."""

    capacity: Matrix
    slack: Matrix
    resolved: NDArray[np.bool_]


@dataclass(frozen=True, slots=True)
class Placement:
    """``shares[p]``: list of (signal, nuclei) of piece ``p``, empty if placed nowhere. ``excess`` and ``deficit`` per
    signal in nuclei. ``exact`` is False where the time limit stopped the search."""

    shares: tuple[tuple[tuple[int, float], ...], ...]
    excess: tuple[float, ...]
    deficit: tuple[float, ...]
    cost: float
    exact: bool = True


def match(table: Matrix) -> tuple[NDArray[np.int64], NDArray[np.int64]]:
    """Rows and columns of the cheapest one-to-one matching of a cost table (rows not more than columns)."""
    rows, columns = matching()(table)
    return np.asarray(rows, dtype=np.int64), np.asarray(columns, dtype=np.int64)


def as_placement(placed: Matrix, capacity: Matrix, cost: float, exact: bool = True) -> Placement:
    """Turn nuclei per (piece, signal) into shares with what is left over."""
    shares = tuple(
        tuple((int(s), float(row[s])) for s in np.flatnonzero(row > 1e-6)) for row in placed
    )
    difference = np.where(np.isnan(capacity), 0.0, capacity - placed.sum(axis=0))
    excess = tuple(float(max(0.0, d)) if d > 0.05 else 0.0 for d in difference)
    deficit = tuple(float(-d) if d < -0.05 else 0.0 for d in difference)
    return Placement(shares, excess, deficit, cost, exact)
