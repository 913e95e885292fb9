"""Shift estimates from additive increments, with a width that follows how well the surroundings are known."""

from __future__ import annotations

from collections.abc import Container, Sequence
from functools import lru_cache

from verify.expectations.model import Increment, Window
from verify.expectations.surroundings import Surroundings, terms
from verify.expectations.tables import ShiftTable, Width

STEPS = {"1": "bonded atoms", "2": "two bonds around", "3": "three bonds around"}
UNKNOWN = {"1H": Width(0.8, 3.0, 0), "13C": Width(9.0, 35.0, 0)}
FURTHEST = {"1H": (-1.5, 14.0), "13C": (-30.0, 235.0)}


def depth_of(found: Surroundings, atom: int, known: Container[str]) -> int:
    """Number of bonds, 0 to 3, to which the surroundings of an atom have been met in the data."""
    if "3" + found.third[atom] in known:
        return 3
    if "2" + found.second[atom] in known:
        return 2
    return 1 if "1" + found.first[atom] in known else 0


def depth_key(found: Surroundings, atom: int, known: Container[str]) -> tuple[str, ...]:
    """Keys of the width table, the most specific first: type and depth, kind and depth, depth."""
    depth = depth_of(found, atom, known)
    fine = found.fine[atom]
    return f"{fine} {depth}", f"{found.coarse[atom]} {depth}", f"* {depth}"


@lru_cache(maxsize=65536)
def _bonds_away(term: str) -> str:
    """Words for the trail: which part of the surroundings a term speaks of."""
    if term[0] in STEPS:
        return STEPS[term[0]]
    head = term.split(":", 1)[0] if ":" in term else ""
    if not head:
        return "kind of atom"
    digits = [c for c in head if c.isdigit()]
    if not digits:
        return "cis/trans on C=C"
    return f"{digits[-1]} bond{'s' if digits[-1] != '1' else ''} away"


def estimate(
    found: Surroundings, atom: int, table: ShiftTable, codes: Sequence[str] | None = None
) -> Window:
    """Window of a nucleus at or on ``atom``; ppm. ``codes``: its ``terms``, where they are known already."""
    known = table.increments
    parts: dict[str, int] = {}
    total = 0
    for term in terms(found, atom) if codes is None else codes:
        value = known.get(term)
        if value:
            total += value
            label = _bonds_away(term)
            parts[label] = parts.get(label, 0) + value
    centre = table.base + total / 100.0
    width = UNKNOWN[table.nucleus]
    for key in depth_key(found, atom, known):
        if key in table.widths:
            width = table.widths[key]
            break
    lowest, highest = FURTHEST[table.nucleus]
    centre = min(max(centre, lowest), highest)
    steps = [Increment(label, value / 100.0, table.source) for label, value in parts.items()]
    trail = (Increment("base", table.base, table.source), *steps)
    return Window(centre - width.reach, centre + width.reach, centre, width.scale, trail)
