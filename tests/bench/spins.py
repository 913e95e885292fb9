"""Prints the time of the exact spin simulation by number of nuclei: ``python tests/bench/spins.py``.

Targets on one core: nine nuclei under 30 ms, eleven under 300 ms.
"""

from __future__ import annotations

import sys
from pathlib import Path
from statistics import median
from time import perf_counter

import numpy as np

sys.path.insert(0, str(Path(__file__).resolve().parents[2]))

from verify.expectations.spins import simulate

REPEATS = 5


def measure(nuclei: int, weak_above: float | None) -> tuple[float, int]:
    """Median milliseconds and number of lines of a random, strongly coupled system."""
    rng = np.random.default_rng(nuclei)
    couplings = np.triu(rng.uniform(1.0, 12.0, (nuclei, nuclei)), 1)
    couplings = couplings + couplings.T
    shifts = rng.uniform(1.0, 2.0, nuclei).tolist()
    times, lines = [], 0
    for _ in range(REPEATS):
        start = perf_counter()
        lines = len(simulate(shifts, couplings, [1] * nuclei, 400.0, weak_above).intensity)
        times.append(1e3 * (perf_counter() - start))
    return median(times), lines


def main() -> None:
    """Table of nuclei, lines and milliseconds, exact and with weak pairs split off at 10 J."""
    print("nuclei   lines   exact ms   weak split ms")
    for nuclei in (3, 5, 7, 8, 9, 10, 11):
        exact, lines = measure(nuclei, None)
        split, _ = measure(nuclei, 10.0)
        print(f"{nuclei:6d} {lines:7d} {exact:10.1f} {split:15.1f}")


if __name__ == "__main__":
    main()
