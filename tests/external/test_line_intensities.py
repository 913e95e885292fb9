"""Intensities of first-order multiplets follow Pascal's triangle. Common practice, no source."""

from __future__ import annotations

import numpy as np
import pytest

from verify.expectations.spins import merged, simulate

J = np.array([[0.0, 7.0], [7.0, 0.0]])
ROWS = {
    1: (1, 1),
    2: (1, 2, 1),
    3: (1, 3, 3, 1),
    4: (1, 4, 6, 4, 1),
    5: (1, 5, 10, 10, 5, 1),
    6: (1, 6, 15, 20, 15, 6, 1),
}


@pytest.mark.parametrize(("neighbours", "row"), ROWS.items())
def test_multiplet_of_equal_couplings(neighbours: int, row: tuple[int, ...]) -> None:
    """J = 7 Hz against 4 kHz apart: lines 7 Hz apart, intensities as the row, one nucleus in all."""
    lines = merged(simulate([10.0, 0.0], J, [1, neighbours], 400.0), 0.5)
    near = lines.frequency_hz > 2000.0
    places, heights = lines.frequency_hz[near], lines.intensity[near]
    assert np.diff(places) == pytest.approx(np.full(neighbours, 7.0), abs=0.05)
    assert heights * sum(row) == pytest.approx(row, rel=0.02)
