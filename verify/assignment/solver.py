"""Least-cost placement of pieces in signals: linear assignment first, an exact integer program where that cuts a group.

A signal is a box of ``capacity`` nuclei (NaN: not stated, holds any number). An unfilled place costs the signal's
``slack`` (``SLACK`` nats, less where a solvent line may stand), an overfilled one ``SLACK``; a piece placed nowhere
costs its ``left_out``.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from verify.assignment.boxes import CROWDING, SLACK, Boxes, Placement, as_placement, match
from verify.assignment.branching import branch_and_bound
from verify.assignment.pieces import Piece, kin_weights

Matrix = NDArray[np.float64]
UNITS = 10  # parts of a nucleus that divisible groups are placed in



def expand(pieces: tuple[Piece, ...]) -> NDArray[np.int64]:
    """Piece number of every nucleus."""
    return np.repeat(np.arange(len(pieces)), [piece.nuclei for piece in pieces])


def slots(capacity: Matrix) -> NDArray[np.int64]:
    """Signal number of every place for a nucleus; capacities are rounded."""
    return np.repeat(np.arange(len(capacity)), np.rint(capacity).astype(np.int64))


def linear(costs: Matrix, pieces: tuple[Piece, ...], boxes: Boxes) -> tuple[Matrix, float]:
    """Place single nuclei. Returns nuclei per (piece, signal), shape (P, S), and the cost in nats.

    ``costs`` has shape (P, S): price of a whole piece in a signal. Groups may come out cut.
    """
    rows, columns = expand(pieces), slots(boxes.capacity)
    nuclei = np.array([float(p.nuclei) for p in pieces])
    per_nucleus = costs / nuclei[:, None]
    left_out = np.array([p.left_out for p in pieces]) / nuclei
    table = np.full((len(rows), len(columns) + len(rows)), 0.0)
    table[:, : len(columns)] = per_nucleus[np.ix_(rows, columns)] - boxes.slack[columns]
    table[:, len(columns) :] = left_out[rows][:, None]
    chosen_row, chosen_column = match(table)
    placed = np.zeros(costs.shape)
    inside = chosen_column < len(columns)
    np.add.at(placed, (rows[chosen_row[inside]], columns[chosen_column[inside]]), 1.0)
    cost = float(table[chosen_row, chosen_column].sum() + boxes.slack[columns].sum())
    return placed, cost


def whole(placed: Matrix, pieces: tuple[Piece, ...]) -> bool:
    """True where no piece is cut: each lies in one signal with all its nuclei, or nowhere."""
    nuclei = np.array([p.nuclei for p in pieces])
    best = placed.max(axis=1) if placed.shape[1] else np.zeros(len(pieces))
    return bool(np.all((best == nuclei) | (placed.sum(axis=1) == 0)))


def crowding(placed: Matrix, pieces: tuple[Piece, ...], resolved: NDArray[np.bool_]) -> float:
    """Price of unlike groups that share a resolved signal."""
    weights = np.array(kin_weights(pieces))
    load = ((placed > 0) * weights[:, None]).sum(axis=0)
    return float(CROWDING * np.clip(load[resolved] - 1.0, 0.0, None).sum())


def divided(costs: Matrix, pieces: tuple[Piece, ...], boxes: Boxes) -> Placement | None:
    """Placement of groups that may be divided, in tenths of a nucleus; None where counts are finer or not stated.

    Fractional counts of mixtures are given to one decimal, as a rule.
    """
    tenths = boxes.capacity * UNITS
    if bool(np.isnan(tenths).any()) or bool(np.any(np.abs(tenths - np.rint(tenths)) > 0.05)):
        return None
    fine = tuple(replace(piece, nuclei=piece.nuclei * UNITS) for piece in pieces)
    placed, cost = linear(costs, fine, Boxes(np.rint(tenths), boxes.slack / UNITS, boxes.resolved))
    return as_placement(placed / UNITS, boxes.capacity, cost)


def place(costs: Matrix, pieces: tuple[Piece, ...], boxes: Boxes, *, divisible: bool = False) -> Placement:
    """Least-cost placement: the linear answer where it is whole and leaves nothing over, else the exact program."""
    capacity = boxes.capacity
    if costs.shape[1] == 0 or not pieces:
        return as_placement(np.zeros(costs.shape), capacity, sum(p.left_out for p in pieces))
    stated = not bool(np.isnan(capacity).any())
    if stated and not divisible and bool(np.all(np.abs(capacity - np.rint(capacity)) < 0.05)):
        placed, cost = linear(costs, pieces, boxes)
        crowd = crowding(placed, pieces, boxes.resolved)
        filled = bool(np.all(placed.sum(axis=0) == np.rint(capacity)))
        required = all(p.optional or placed[n].any() for n, p in enumerate(pieces))
        if whole(placed, pieces) and filled and required and cost + crowd < len(pieces) + SLACK:
            return as_placement(placed, capacity, cost + crowd)
    found = divided(costs, pieces, boxes) if divisible else branch_and_bound(costs, pieces, boxes)
    if found is not None:
        return found
    # Loaded when it is needed: one record in thirty is not settled before, and the library takes 0.7 s to import.
    from verify.assignment.integer_program import integer

    return integer(costs, pieces, boxes, divisible=divisible)
