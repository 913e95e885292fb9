"""Labels and totals: common practice of experimental sections, checked on invented signals."""

from __future__ import annotations

import pytest

from verify.assignment.labels import claims, label_cost
from verify.assignment.model import Share, SignalReading
from verify.assignment.offset import common_offset
from verify.assignment.pieces import carrier_groups, left_out_price, whole_groups
from verify.assignment.totals import common_factor, fewest_signals, hydrogen_totals
from verify.environments.model import Environment
from verify.expectations.model import Expectation, Window
from verify.findings.location import Span
from verify.peaklist.model import Signal


def expectation(index, count, centre=3.0, scale=0.3, exchangeable="", carriers=(0,), may_vanish=""):
    environment = Environment(
        index, "1H", tuple(range(int(count))), carriers, count, "homotopic", index, (), exchangeable, "",
        may_vanish, -1, 0, True, (), "invented",
    )
    return Expectation(environment, Window(centre - 1.5, centre + 1.5, centre, scale), (), words=f"group {index}")


def signal(shift, nuclei=None):
    return Signal(shift, shift, 2, Span(0, 4), nuclei=nuclei)


@pytest.mark.parametrize(
    ("text", "said"),
    [("NH", {"exchangeable"}), ("OH", {"exchangeable"}), ("COOH", {"exchangeable"}), ("Ar-H", {"aromatic"}),
     ("OCH3", {"methyl"}), ("CH2", {"methylene"}), ("CH2CH3", set()), ("CHOH", set()), ("H-5", set()), ("", set())],
)
def test_a_label_claims_one_kind_or_nothing(text, said):
    assert claims(text) == said


def test_a_label_on_the_wrong_kind_costs_and_on_the_right_kind_does_not():
    assert label_cost("OH", "alkyl", False, 1) > 0
    assert label_cost("OH", "exchangeable", True, 1) == 0
    assert label_cost("OCH3", "alkyl", False, 3) == 0
    assert label_cost("OCH3", "alkyl", False, 2) > 0
    assert label_cost("Ar-H", "aryl", False, 1) == 0


def test_bounds_count_exchangeable_hydrogens_only_at_the_top():
    totals = hydrogen_totals((expectation(0, 3), expectation(1, 1, exchangeable="alcohol")), (signal(3.0, 3),))
    assert (totals.low, totals.high, totals.reported, totals.complete) == (3, 4, 3, True)


def test_a_count_not_stated_makes_the_total_incomplete():
    assert not hydrogen_totals((expectation(0, 3),), (signal(3.0),)).complete


@pytest.mark.parametrize(
    ("reported", "factor"), [(4.0, 2.0), (8.0, 1.0), (16.0, 0.5), (7.0, 1.0), (5.0, 1.0)]
)
def test_a_common_factor_is_found_only_where_it_lands_in_bounds(reported, factor):
    groups = (expectation(0, 6), expectation(1, 2))
    signals = (signal(2.1, reported - 2.0), signal(3.5, 2.0))
    assert common_factor(reported, 8.0, 8.0, groups, signals) == factor


def test_two_molecules_need_integrals_that_can_be_halved():
    groups = (expectation(0, 6), expectation(1, 2))
    assert common_factor(16.0, 8.0, 8.0, groups, (signal(2.1, 13.0), signal(3.5, 3.0))) == 1.0


def test_half_a_molecule_needs_groups_that_can_be_halved():
    signals = (signal(2.1, 1.0), signal(3.5, 1.0))
    assert common_factor(2.0, 4.0, 4.0, (expectation(0, 3), expectation(1, 1)), signals) == 1.0


def test_the_fewest_signals_are_the_windows_no_single_shift_can_join():
    groups = (expectation(0, 3, centre=1.0), expectation(1, 2, centre=1.5), expectation(2, 1, centre=7.2))
    assert fewest_signals(groups) == 2


def test_leaving_out_an_alcohol_is_cheap_where_the_solvent_exchanges_it():
    alcohol = expectation(0, 1, exchangeable="alcohol").environment
    prices = [left_out_price(alcohol, s) for s in ("CD3OD", "CDCl3", "DMSO-d6")]
    assert prices == sorted(prices)
    assert left_out_price(expectation(0, 1).environment, "CD3OD") > prices[-1]


def test_a_group_on_two_carriers_can_be_cut_between_them_only():
    groups = (expectation(0, 6, carriers=(0, 1)), expectation(1, 3))
    assert [p.nuclei for p in whole_groups(groups, "CDCl3")] == [6, 3]
    assert [p.nuclei for p in carrier_groups(groups, "CDCl3")] == [3, 3, 3]


def test_one_offset_is_said_when_the_whole_list_is_moved_and_not_when_one_signal_is():
    groups = tuple(expectation(n, 1, centre=1.0 + n) for n in range(6))
    readings = tuple(SignalReading(n, (Share(n, 1.0, 0.0, 0.0),)) for n in range(6))
    moved = tuple(signal(1.0 + n - 0.9, 1) for n in range(6))
    assert common_offset(readings, moved, groups) == pytest.approx(-0.9)
    single = tuple(signal(1.0 + n - (0.9 if n == 2 else 0.0), 1) for n in range(6))
    assert common_offset(readings, single, groups) == 0.0
