"""The matcher loaded alone is the one of the public interface of SciPy."""

from __future__ import annotations

import numpy as np
from scipy.optimize import linear_sum_assignment

from verify.assignment.matcher import matching


def test_it_gives_what_the_library_gives() -> None:
    rng = np.random.default_rng(1)
    for _ in range(40):
        table = rng.gamma(1.0, 3.0, (int(rng.integers(1, 12)), int(rng.integers(12, 20))))
        rows, columns = matching()(table)
        wanted_rows, wanted_columns = linear_sum_assignment(table)
        assert rows.tolist() == wanted_rows.tolist()
        assert columns.tolist() == wanted_columns.tolist()
