"""The curve of an expected spectrum: every spin system simulated at the field and drawn as Lorentzian lines."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from verify.expectations.spectrum import simulate_system, spin_systems
from verify.expectations.spins import lineshape
from verify.pipeline.foresight import Foresight

Array = NDArray[np.float64]
PROTON_WIDTH_HZ, OTHER_WIDTH_PPM = 1.2, 0.25
POINTS_PER_WIDTH, MOST_POINTS = 3.0, 60_000


def predicted_curve(foresight: Foresight, nucleus: str) -> tuple[Array, Array, tuple[str, ...]]:
    """(ppm, height, how each spin system was treated); ppm descending, heights in any unit."""
    judged = [e for e in foresight.expectations if e.window.judged]
    if not judged or foresight.structure is None:
        return np.zeros(0), np.zeros(0), ()
    high = max(e.window.centre for e in judged) + 0.6
    low = min(e.window.centre for e in judged) - 0.6
    if nucleus != "1H":
        width = OTHER_WIDTH_PPM
        ppm = np.linspace(high + 4.0, low - 4.0, 6000)
        height = np.zeros(len(ppm))
        for e in judged:
            height += e.environment.count / (1.0 + ((ppm - e.window.centre) / width * 2.0) ** 2)
        return ppm, height, ("decoupled from hydrogen",)
    field = foresight.field_mhz
    points = min(MOST_POINTS, int((high - low) * field / PROTON_WIDTH_HZ * POINTS_PER_WIDTH))
    ppm = np.linspace(high, low, points)
    height = np.zeros(points)
    how = []
    for system in spin_systems(foresight.structure, foresight.environments, foresight.expectations, nucleus):
        simulated = simulate_system(system, field)
        height += lineshape(simulated.lines, ppm * field, PROTON_WIDTH_HZ)
        how.append(simulated.how)
    return ppm, height, tuple(dict.fromkeys(how))
