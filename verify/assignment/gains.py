"""What would be won over the whole list if one signal's shift, or its letters, were free.

A wrong value spreads its cost over signals that swap places with it, so the gain of freeing it and assigning
again is a better test than the distance to the nearest window, and it is the repair at the same time.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from verify.assignment.boxes import Boxes
from verify.assignment.cost import Prices
from verify.assignment.proton import Explanation
from verify.assignment.solver import linear

Matrix = NDArray[np.float64]

WORTH_TRYING = 1.0


def _stated(explanation: Explanation) -> Boxes:
    """Boxes with every capacity a whole number: what was reported, or what was placed where nothing was."""
    filled = np.zeros(len(explanation.boxes.capacity))
    for shares in explanation.placement.shares:
        for signal, nuclei in shares:
            filled[signal] += nuclei
    capacity = np.where(np.isnan(explanation.boxes.capacity), filled, explanation.boxes.capacity)
    return Boxes(np.rint(capacity), explanation.boxes.slack, explanation.boxes.resolved)


def _cost_in_place(explanation: Explanation, part: Matrix) -> Matrix:
    """Price of ``part`` (expectations, signals) that each signal carries in the explanation; shape (signals,)."""
    carried = np.zeros(part.shape[1])
    for piece, shares in enumerate(explanation.placement.shares):
        for signal, nuclei in shares:
            whole = part[explanation.rows[piece], signal]
            carried[signal] += whole * nuclei / max(1, explanation.pieces[piece].nuclei)
    return carried


def gains(explanation: Explanation, prices: Prices) -> tuple[Matrix, Matrix]:
    """Nats won by freeing the shift, and by freeing the letters and J, of each signal; two arrays (signals,)."""
    signals = len(explanation.boxes.capacity)
    shift_gain, splitting_gain = np.zeros(signals), np.zeros(signals)
    if not explanation.pieces or signals == 0:
        return shift_gain, splitting_gain
    boxes = _stated(explanation)
    _, base = linear(explanation.costs, explanation.pieces, boxes)
    share = np.array([p.nuclei for p in explanation.pieces], dtype=float)
    totals = dict.fromkeys(explanation.rows, 0.0)
    for row, nuclei in zip(explanation.rows, share, strict=True):
        totals[row] += nuclei
    scale = share / np.array([totals[row] for row in explanation.rows])
    rows = list(explanation.rows)
    for target, part in ((shift_gain, prices.shift), (splitting_gain, prices.splitting)):
        scaled = part[rows] * scale[:, None]
        suspects = np.flatnonzero(_worst(explanation, part) > WORTH_TRYING)
        for signal in suspects:
            freed = explanation.costs.copy()
            freed[:, signal] -= scaled[:, signal]
            _, cost = linear(freed, explanation.pieces, boxes)
            target[signal] = max(0.0, base - cost)
    return shift_gain, splitting_gain


def _worst(explanation: Explanation, part: Matrix) -> Matrix:
    """Price carried by each signal; all signals are suspects where something is left over."""
    carried = _cost_in_place(explanation, part)
    left_over = np.array(explanation.placement.excess) > 0
    if bool(left_over.any()):
        return np.where(left_over, np.inf, carried)
    return carried
