"""Loads the table of coupling windows by path class from ``rules/tables/couplings.yaml``."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache

from verify.errors import ConfigurationError
from verify.expectations.tables import read_table


@dataclass(frozen=True, slots=True)
class CouplingClass:
    """One row: absolute values in Hz. ``low`` and ``high`` are the window that reported values are
    judged by, ``tabulated`` the usual range, ``source`` where that range comes from ("memory" if
    recalled)."""

    label: str
    bonds: int
    low: float
    high: float
    typical: float
    tabulated: tuple[float, float]
    source: str


def _row(entry: Mapping[str, object]) -> CouplingClass:
    low, high, typical = (float(str(entry[key])) for key in ("low", "high", "typical"))
    accept = entry.get("accept")
    judged = (float(accept[0]), float(accept[1])) if isinstance(accept, list) else (low, high)
    if not judged[0] <= judged[1]:
        raise ValueError(f"window of {entry['id']} is empty")
    label, bonds, source = str(entry["id"]), int(str(entry["bonds"])), str(entry["source"])
    return CouplingClass(label, bonds, judged[0], judged[1], typical, (low, high), source)


@lru_cache(maxsize=1)
def coupling_table() -> Mapping[str, CouplingClass]:
    """All rows by label; raises ConfigurationError if the shipped table cannot be used."""
    try:
        rows = [_row(entry) for entry in read_table("couplings")["couplings"]]
    except (KeyError, TypeError, ValueError) as error:
        raise ConfigurationError(f"rules/tables/couplings.yaml: {error}") from error
    table = {row.label: row for row in rows}
    if len(table) != len(rows):
        raise ConfigurationError("rules/tables/couplings.yaml holds the same id twice")
    return table
