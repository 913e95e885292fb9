"""Intervals against published figures."""

from __future__ import annotations

import pytest
from statistics_of_counts import share_with_interval, table, wilson


@pytest.mark.parametrize(
    ("hits", "total", "low", "high"),
    # R. G. Newcombe, Stat. Med. 1998, 17, 857, Table I, score method; from memory.
    [(81, 263, 0.2553, 0.3662), (15, 148, 0.0624, 0.1605), (0, 20, 0.0, 0.1611), (1, 29, 0.0061, 0.1718)],
)
def test_interval_equals_the_published_one(hits: int, total: int, low: float, high: float) -> None:
    assert wilson(hits, total) == pytest.approx((low, high), abs=5e-5)


def test_nothing_counted_says_nothing() -> None:
    assert wilson(0, 0) == (0.0, 1.0)
    assert share_with_interval(0, 0) == "-"


def test_columns_are_as_wide_as_their_widest_cell() -> None:
    lines = table(["kind", "n"], [["long name", "5"], ["x", "1234"]]).splitlines()
    assert lines[2:] == ["long name     5", "x          1234"]
