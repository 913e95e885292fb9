"""Fits additive shift increments to unassigned shift lists by ridge regression with order-preserving matching.

The lists may be open data or a group's own registry. Shifts in ppm. Only NumPy: the normal equations are solved by
conjugate gradients on the sparse table of terms.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Vector = NDArray[np.float64]
Indices = NDArray[np.int64]


@dataclass(frozen=True, slots=True)
class Group:
    """Atoms that share one list: ``rows`` of the design, how many shifts each row takes, and the ``shifts``
    (ppm, any order; as many as the counts add up to)."""

    rows: tuple[int, ...]
    counts: tuple[int, ...]
    shifts: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class Design:
    """``columns[starts[i]:starts[i + 1]]`` are the term numbers of row i; ``names`` the terms; ``prior`` the
    estimate in ppm that the increments correct, shape (rows,)."""

    starts: Indices
    columns: Indices
    names: tuple[str, ...]
    prior: Vector

    def times(self, weights: Vector) -> Vector:
        """Sum of the weights of each row's terms, shape (rows,)."""
        total = np.concatenate(([0.0], np.cumsum(weights[self.columns])))
        return np.asarray(total[self.starts[1:]] - total[self.starts[:-1]])

    def transposed_times(self, values: Vector) -> Vector:
        """Sum per term of the values of the rows that hold it, shape (terms,)."""
        spread = np.repeat(values, np.diff(self.starts))
        return np.bincount(self.columns, weights=spread, minlength=len(self.names)).astype(np.float64, copy=False)


def build_design(rows: Sequence[Sequence[str]], prior: Sequence[float], least: int) -> Design:
    """Number the terms that occur in at least ``least`` rows and drop the others."""
    seen: dict[str, int] = {}
    for row in rows:
        for name in set(row):
            seen[name] = seen.get(name, 0) + 1
    names = tuple(sorted(n for n, count in seen.items() if count >= least))
    number = {name: i for i, name in enumerate(names)}
    columns: list[int] = []
    starts = [0]
    for row in rows:
        columns.extend(number[name] for name in row if name in number)
        starts.append(len(columns))
    return Design(np.array(starts), np.array(columns, dtype=np.int64), names, np.array(prior))


def match(groups: Sequence[Group], estimate: Vector) -> tuple[Vector, Vector]:
    """Targets and weights per row: the n-th lowest estimate of a group takes its n-th lowest shift."""
    target = np.zeros(len(estimate))
    weight = np.zeros(len(estimate))
    for group in groups:
        rows = np.repeat(group.rows, group.counts)
        ranked = rows[np.argsort(estimate[rows], kind="stable")]
        np.add.at(target, ranked, np.sort(group.shifts))
        np.add.at(weight, ranked, 1.0)
    held = weight > 0
    target[held] /= weight[held]
    return target, weight


def ridge(design: Design, target: Vector, weight: Vector, penalty: Vector, start: Vector) -> Vector:
    """Increments that minimise the weighted squares plus ``penalty`` times their own squares."""
    goal = design.transposed_times(weight * (target - design.prior))

    def normal(x: Vector) -> Vector:
        return design.transposed_times(weight * design.times(x)) + penalty * x

    counts = np.maximum(design.transposed_times(weight), 1.0) + penalty
    x = start.copy()
    residual = goal - normal(x)
    scaled = residual / counts
    direction = scaled.copy()
    energy = float(residual @ scaled)
    limit = 1e-6 * max(float(goal @ (goal / counts)), 1e-9)
    for _ in range(400):
        if energy < limit:
            break
        step = normal(direction)
        length = energy / float(direction @ step)
        x += length * direction
        residual -= length * step
        scaled = residual / counts
        fresh = float(residual @ scaled)
        direction = scaled + (fresh / energy) * direction
        energy = fresh
    return x


def capped(weight: Vector, residual: Vector, limit: float) -> Vector:
    """Weights of a Huber loss: rows further off than ``limit`` ppm count less, so that mistakes do not steer."""
    return weight * np.minimum(1.0, limit / np.maximum(np.abs(residual), 1e-9))


def fit(
    design: Design, groups: Sequence[Group], first: Vector, penalty: Vector, limit: float, rounds: int
) -> tuple[Vector, Vector]:
    """Increments, and the estimate per row, after alternately matching and fitting; ``first``: estimate to match
    with in the first round."""
    x = np.zeros(len(design.names))
    estimate = first
    for turn in range(rounds):
        target, weight = match(groups, estimate)
        weight = np.sqrt(weight)
        if turn:
            weight = capped(weight, target - estimate, limit)
        x = ridge(design, target, weight, penalty, x)
        estimate = design.prior + design.times(x)
    return x, estimate
