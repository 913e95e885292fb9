"""Lines of deuterated solvents, of the water in them, and of common impurities."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

from verify.errors import ConfigurationError
from verify.expectations.tables import read_table

# Common practice: laboratories reference the same line within these ppm; water moves with content and acid.
RESIDUAL_TOLERANCE = {"1H": 0.03, "13C": 0.3}
WATER_TOLERANCE = 0.12


@dataclass(frozen=True, slots=True)
class SolventLine:
    """``shift`` and ``tolerance`` in ppm; ``kind``: "residual" or "water"; ``name`` for messages."""

    shift: float
    tolerance: float
    name: str
    kind: str


def _plain(name: str) -> str:
    return "".join(c for c in name.lower() if c.isalnum())


@lru_cache(maxsize=1)
def _solvents() -> dict[str, dict[str, object]]:
    found: dict[str, dict[str, object]] = {}
    for entry in read_table("residual_solvents")["solvents"]:
        for name in entry["names"]:
            found[_plain(name)] = entry
    return found


def solvent_name(solvent: str | None) -> str:
    """Usual formula of a solvent however it is written ("chloroform-d" to "CDCl3"); "" if it is not known."""
    if not solvent:
        return ""
    entry = _solvents().get(_plain(solvent))
    return "" if entry is None else str(entry["short"])


@lru_cache(maxsize=64)
def solvent_lines(solvent: str | None, nucleus: str) -> tuple[SolventLine, ...]:
    """Residual and water lines of a solvent, by shift; empty for an unknown solvent or nucleus."""
    entry = _solvents().get(_plain(solvent or ""))
    if entry is None:
        return ()
    short = str(entry["short"])
    lines = []
    try:
        for line in entry.get(nucleus, ()):  # type: ignore[attr-defined]
            shifts = [line["shift"], *line.get("elsewhere", ())]
            middle = (min(shifts) + max(shifts)) / 2.0
            tolerance = RESIDUAL_TOLERANCE[nucleus] + (max(shifts) - min(shifts)) / 2.0
            lines.append(SolventLine(middle, tolerance, f"{line['group']} of {short}", "residual"))
        water = entry.get("water")
        if nucleus == "1H" and isinstance(water, dict):
            name = f"{water['form']} in {short}"
            lines.append(SolventLine(water["shift"], WATER_TOLERANCE, name, "water"))
    except (KeyError, TypeError, ValueError) as error:
        raise ConfigurationError(f"rules/tables/residual_solvents.yaml: {short}: {error}") from error
    return tuple(sorted(lines, key=lambda line: (line.shift, line.name)))


@lru_cache(maxsize=1)
def _impurities() -> tuple[dict[str, int], tuple[dict[str, object], ...]]:
    table = read_table("trace_impurities")
    return {_plain(c): n for n, c in enumerate(table["columns"])}, tuple(table["impurities"])


@lru_cache(maxsize=64)
def impurity_table(nucleus: str, solvent: str) -> tuple[tuple[str, tuple[float, ...]], ...]:
    """Name and shifts in ppm (descending; the middle of a printed range) of every impurity whose lines in
    this solvent are all known. Doubtful cells and lines of exchanging hydrogen are left out."""
    columns, impurities = _impurities()
    column = columns.get(_plain(solvent_name(solvent)))
    if column is None:
        return ()
    short = solvent_name(solvent)
    found = []
    for entry in impurities:
        shifts: list[float] = []
        complete = True
        for label, cells, notes in entry.get(nucleus, ()):  # type: ignore[attr-defined]
            if label in ("OH", "NH", "H2O"):
                continue
            cell = cells[column]
            if cell is None or short in notes.get("doubtful", ()):
                complete = False
                break
            shifts.append(sum(cell) / len(cell) if isinstance(cell, list) else float(cell))
        if complete and shifts:
            found.append((str(entry["name"]), tuple(sorted(shifts, reverse=True))))
    return tuple(found)
