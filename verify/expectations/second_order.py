"""Decides by numbers whether first-order letters hold: shift difference in Hz against J, over the whole
windows."""

from __future__ import annotations

from math import erf, hypot, sqrt

from verify.environments.model import Environment, EnvironmentSet
from verify.expectations.model import CouplingBlock, Window

# Common practice: under about 3 J lines no longer count as n+1, under about 10 J intensities lean.
LINES_FAIL, INTENSITIES_LEAN = 3.0, 10.0
LIKELY, POSSIBLE = 0.25, 0.10
USUAL_FIELD_MHZ = 400.0
SMALL_HZ = 3.0


def chance_within(difference: float, spread: float, limit: float) -> float:
    """Chance that a normal variable with this mean and standard deviation lies within +-limit."""
    if spread <= 0.0:
        return 1.0 if abs(difference) < limit else 0.0
    root = spread * sqrt(2.0)
    return 0.5 * (erf((limit - difference) / root) - erf((-limit - difference) / root))


def _pair(window: Window, other: Window, j: float, field_mhz: float) -> float:
    """Chance that the pair lies within 3 J."""
    if not (window.judged and other.judged):
        return 0.0
    difference = (window.centre - other.centre) * field_mhz
    return chance_within(difference, hypot(window.scale, other.scale) * field_mhz, LINES_FAIL * j)


def _inequivalent(environment: Environment) -> bool:
    return not environment.magnetically_equivalent and any(n.same for n in environment.neighbours)


def second_order_of(
    environment: Environment, environments: EnvironmentSet, windows: tuple[Window, ...],
    blocks: tuple[CouplingBlock, ...], field_mhz: float | None,
) -> str:
    """Why first-order letters may fail for this environment, "" if they should hold. Without a field, 400
    MHz is taken. ``windows`` is aligned with ``EnvironmentSet.all``."""
    if environment.nucleus != "1H" or environment.exchangeable:
        return ""
    reasons = []
    if _inequivalent(environment):
        reasons.append("AA'XX': equal shifts, unequal couplings")
    field = field_mhz or USUAL_FIELD_MHZ
    worst, words = POSSIBLE, ""
    for block in blocks:
        if block.environment < 0 or block.nucleus != "1H" or block.typical < SMALL_HZ:
            continue
        if block.visibility == "hidden" or environments.all[block.environment].exchangeable:
            continue
        own, other = windows[environment.index], windows[block.environment]
        chance = _pair(own, other, block.typical, field)
        if chance > worst:
            ratio = abs(own.centre - other.centre) * field / block.typical
            how = "likely" if chance > LIKELY else "possible"
            worst = chance
            words = f"strong coupling {how}: shift difference about {ratio:.0f} J at {field:g} MHz"
    return "; ".join([*reasons, words] if words else reasons)


def holds(difference_hz: float, j_hz: float) -> str:
    """"first-order", "leaning" or "strong" for a shift difference and a coupling, both in Hz."""
    ratio = abs(difference_hz) / abs(j_hz) if j_hz else float("inf")
    if ratio >= INTENSITIES_LEAN:
        return "first-order"
    return "leaning" if ratio >= LINES_FAIL else "strong"
