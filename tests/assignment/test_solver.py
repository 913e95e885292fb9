"""The placement of pieces in signals against plain enumeration of every placement."""

from __future__ import annotations

import itertools

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from verify.assignment.boxes import CROWDING, SLACK, Boxes
from verify.assignment.branching import branch_and_bound
from verify.assignment.integer_program import integer
from verify.assignment.pieces import Piece, kin_weights
from verify.assignment.solver import linear, place, whole


def enumerate_best(costs, pieces, boxes):
    """Cheapest placement by trying every one; the reference the solver must equal."""
    best = float("inf")
    weights = kin_weights(pieces)
    signals = range(len(boxes.capacity))
    for choice in itertools.product([-1, *signals], repeat=len(pieces)):
        total = 0.0
        load = np.zeros(len(boxes.capacity))
        crowd = np.zeros(len(boxes.capacity))
        for number, signal in enumerate(choice):
            if signal < 0:
                total += pieces[number].left_out
            else:
                total += costs[number, signal]
                load[signal] += pieces[number].nuclei
                crowd[signal] += weights[number]
        for signal in signals:
            if not np.isnan(boxes.capacity[signal]):
                gap = boxes.capacity[signal] - load[signal]
                total += gap * boxes.slack[signal] if gap > 0 else -gap * SLACK
            if boxes.resolved[signal]:
                total += CROWDING * max(0.0, crowd[signal] - 1.0)
        best = min(best, total)
    return best


def piece(number, nuclei, left_out=9.0, kin=None):
    return Piece(number, nuclei, left_out, left_out < 5, 1.0, number if kin is None else kin)


@st.composite
def problems(draw):
    pieces = tuple(
        piece(n, draw(st.integers(1, 3)), draw(st.sampled_from([0.7, 9.0])), draw(st.integers(0, 3)))
        for n in range(draw(st.integers(1, 5)))
    )
    signals = draw(st.integers(1, 3))
    costs = np.array([[draw(st.floats(0, 12)) for _ in range(signals)] for _ in pieces])
    capacity = np.array([float(draw(st.integers(1, 6))) for _ in range(signals)])
    resolved = np.array([draw(st.booleans()) for _ in range(signals)])
    return costs, pieces, Boxes(capacity, np.full(signals, SLACK), resolved)


@settings(max_examples=60, deadline=None)
@given(problems())
def test_the_integer_program_finds_the_cheapest_placement(problem):
    costs, pieces, boxes = problem
    # HiGHS keeps constraints to 1e-6 and a nat of slack weighs 7
    assert integer(costs, pieces, boxes).cost == pytest.approx(enumerate_best(costs, pieces, boxes), abs=1e-4)


@settings(max_examples=60, deadline=None)
@given(problems())
def test_the_linear_answer_is_a_lower_bound_without_overfilling(problem):
    costs, pieces, boxes = problem
    placed, cost = linear(costs, pieces, boxes)
    exact = integer(costs, pieces, boxes)
    if whole(placed, pieces) and not any(exact.deficit):
        assert cost <= exact.cost + 1e-6


def test_a_fitting_list_needs_no_integer_program():
    pieces = (piece(0, 3), piece(1, 2), piece(2, 3))
    costs = np.array([[0.2, 9.0, 9.0], [9.0, 0.3, 9.0], [9.0, 9.0, 0.1]])
    boxes = Boxes(np.array([3.0, 2.0, 3.0]), np.full(3, SLACK), np.array([True, True, True]))
    placement = place(costs, pieces, boxes)
    assert placement.shares == (((0, 3.0),), ((1, 2.0),), ((2, 3.0),))
    assert placement.cost == pytest.approx(0.6)


def test_a_methyl_group_is_never_cut_over_two_signals():
    pieces = (piece(0, 3), piece(1, 3))
    costs = np.array([[0.1, 0.1], [0.1, 0.1]])
    boxes = Boxes(np.array([4.0, 2.0]), np.full(2, SLACK), np.array([False, False]))
    placement = place(costs, pieces, boxes)
    assert all(len(shares) <= 1 for shares in placement.shares)
    assert sum(placement.excess) + sum(placement.deficit) == pytest.approx(2.0)


def test_a_missing_group_is_named_and_an_optional_one_is_left_out_cheaply():
    pieces = (piece(0, 3), piece(1, 1, left_out=0.7))
    costs = np.array([[0.1], [6.0]])
    boxes = Boxes(np.array([3.0]), np.full(1, SLACK), np.array([True]))
    placement = place(costs, pieces, boxes)
    assert placement.shares == (((0, 3.0),), ())
    assert placement.cost == pytest.approx(0.8)


def test_an_unstated_count_takes_what_it_is_given():
    pieces = (piece(0, 3), piece(1, 2))
    costs = np.array([[0.1, 8.0], [8.0, 0.2]])
    boxes = Boxes(np.array([np.nan, 2.0]), np.full(2, SLACK), np.array([True, True]))
    placement = place(costs, pieces, boxes)
    assert placement.shares == (((0, 3.0),), ((1, 2.0),))
    assert placement.excess == (0.0, 0.0)


def test_a_solvent_line_is_left_over_rather_than_a_real_signal():
    pieces = (piece(0, 1),)
    costs = np.array([[0.4, 0.2]])
    boxes = Boxes(np.array([1.0, 1.0]), np.array([SLACK, 3.0]), np.array([True, True]))
    assert place(costs, pieces, boxes).shares == (((0, 1.0),),)


def test_fractional_counts_may_divide_a_group():
    pieces = (piece(0, 9),)
    costs = np.array([[0.3, 0.3]])
    boxes = Boxes(np.array([1.8, 7.2]), np.full(2, SLACK), np.array([True, True]))
    placement = place(costs, pieces, boxes, divisible=True)
    assert sum(nuclei for _, nuclei in placement.shares[0]) == pytest.approx(9.0)
    assert not any(placement.excess)


@settings(max_examples=150, deadline=None)
@given(problems())
def test_branch_and_bound_finds_the_cheapest_placement_or_says_it_cannot(problem):
    costs, pieces, boxes = problem
    found = branch_and_bound(costs, pieces, boxes)
    if found is not None:
        assert found.cost == pytest.approx(enumerate_best(costs, pieces, boxes), abs=1e-6)
    else:
        assert integer(costs, pieces, boxes).cost >= 0.0


def test_branch_and_bound_settles_most_problems_itself():
    rng = np.random.default_rng(7)
    settled = 0
    for _ in range(50):
        pieces = tuple(piece(n, int(size)) for n, size in enumerate(rng.choice([1, 1, 2, 3], 8)))
        capacity = rng.multinomial(sum(p.nuclei for p in pieces), [0.2] * 5).astype(float)
        boxes = Boxes(capacity, np.full(5, SLACK), np.full(5, True))
        settled += branch_and_bound(rng.gamma(1.0, 4.0, (8, 5)), pieces, boxes) is not None
    assert settled >= 40


def test_division_in_tenths_costs_no_more_than_the_integer_program_s_own():
    rng = np.random.default_rng(3)
    for _ in range(20):
        pieces = tuple(piece(n, int(size)) for n, size in enumerate(rng.choice([1, 2, 3], 4)))
        total = sum(p.nuclei for p in pieces)
        share = np.rint(rng.dirichlet([2.0] * 5) * total * 10) / 10
        share[-1] = round(total - float(share[:-1].sum()), 1)
        if share.min() <= 0:
            continue
        boxes = Boxes(share, np.full(5, SLACK), np.full(5, False))
        costs = rng.gamma(1.0, 2.0, (4, 5))
        found = place(costs, pieces, boxes, divisible=True)
        assert found.cost == pytest.approx(integer(costs, pieces, boxes, divisible=True).cost, abs=1e-4)
