"""Explains lists of lines without counts (13C, 19F, 31P): every line needs an environment, not the reverse."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from verify.assignment.boxes import match
from verify.assignment.cost import shift_price
from verify.expectations.model import Expectation
from verify.peaklist.model import PeakList, Signal

Matrix = NDArray[np.float64]

NO_HOME = 10.0
SOLVENT_HOME = 3.0
ATTACHED_H_WRONG = 4.0
COINCIDENT = 4.5
DECLARED_COPY = 0.5
DOUBTFUL_COPY = 4.0
SPLIT_COPY = 1.0


@dataclass(frozen=True, slots=True)
class LineExplanation:
    """``home[line]``: rows of the expectations that explain a line. ``extra``: copies allowed beyond one line per
    environment. ``costs`` has shape (expectations, lines)."""

    costs: Matrix
    home: tuple[tuple[int, ...], ...]
    lost: tuple[int, ...]
    homeless: tuple[int, ...]
    extra: int
    cost: float


def price_lines(expectations: tuple[Expectation, ...], signals: tuple[Signal, ...]) -> Matrix:
    """Price in nats of every line as every environment; shape (expectations, lines)."""
    costs = np.zeros((len(expectations), len(signals)))
    for row, expectation in enumerate(expectations):
        for column, signal in enumerate(signals):
            price = shift_price(expectation.window, signal.low, signal.high, exchangeable=False)
            attached = expectation.environment.attached_h
            if signal.attached_h is not None and attached >= 0 and signal.attached_h != attached:
                price += ATTACHED_H_WRONG
            costs[row, column] = price
    return costs


def copies(expectations: tuple[Expectation, ...], doubled: bool, split_declared: bool) -> list[tuple[int, float]]:
    """(row, price) of every further line an environment may give.

    ``doubled``: the text declares two sets. ``split_declared``: the list prints J values, so that splitting by F or P
    is not listed line by line.
    """
    found: list[tuple[int, float]] = []
    for row, expectation in enumerate(expectations):
        environment = expectation.environment
        if doubled:
            found.append((row, DECLARED_COPY))
        elif environment.may_double:
            found.append((row, DOUBTFUL_COPY))
        if not split_declared:
            lines = 1
            for block in expectation.couplings:
                if block.visibility != "hidden":
                    lines *= min(block.count, 3) + 1
            found.extend([(row, SPLIT_COPY)] * (min(lines, 4) - 1))
    return found


def explain_lines(
    peaks: PeakList, expectations: tuple[Expectation, ...], doubled: bool, solvent_names: tuple[str, ...]
) -> LineExplanation:
    """Give every line an environment at least cost; environments left over join a line they could coincide with."""
    costs = price_lines(expectations, peaks.signals)
    split_declared = any(signal.couplings for signal in peaks.signals)
    extra = copies(expectations, doubled, split_declared)
    rows = list(range(len(expectations))) + [row for row, _ in extra]
    prices = np.array([0.0] * len(expectations) + [price for _, price in extra])
    lines = len(peaks.signals)
    home_price = np.array([SOLVENT_HOME if name else NO_HOME for name in solvent_names])
    table = np.full((lines, len(rows) + lines), 0.0)
    table[:, : len(rows)] = (costs[rows] + prices[:, None]).T
    table[:, len(rows) :] = home_price[:, None]
    chosen_line, chosen = match(table)
    home: list[list[int]] = [[] for _ in range(lines)]
    homeless = []
    for line, column in zip(chosen_line, chosen, strict=True):
        if column < len(rows):
            home[int(line)].append(rows[int(column)])
        else:
            homeless.append(int(line))
    lost = _join(costs, home, len(expectations), set(homeless))
    total = float(table[chosen_line, chosen].sum())
    homes = tuple(tuple(sorted(h)) for h in home)
    return LineExplanation(costs, homes, lost, tuple(sorted(homeless)), len(extra), total)


def _join(costs: Matrix, home: list[list[int]], count: int, homeless: set[int]) -> tuple[int, ...]:
    """Environments without a line of their own join the cheapest line they may coincide with; returns the rest."""
    placed = {row for rows in home for row in rows}
    lost = []
    open_lines = [line for line in range(len(home)) if line not in homeless]
    for row in range(count):
        if row in placed:
            continue
        best = min(open_lines, key=lambda line: float(costs[row, line]), default=-1)
        if best >= 0 and costs[row, best] <= COINCIDENT:
            home[best].append(row)
        else:
            lost.append(row)
    return tuple(lost)
