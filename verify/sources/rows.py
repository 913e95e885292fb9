"""One row of a table as the mapping of a record; values are handed on as they are and judged by the record room."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

NUCLEI = {"h1": "1H", "c13": "13C", "f19": "19F", "p31": "31P"}
FORMATS = ("smiles", "inchi", "molblock")
WORDS = ("batch", "name")
MASS = {"ion": "hrms_ion", "calculated": "hrms_calculated", "found": "hrms_found"}


def record_of_row(row: Mapping[Any, Any], fallback: str) -> dict[str, Any]:
    """The record of one row; ``fallback`` names the compound where the row does not.

    Cells that are empty or not a number count as not given. The first structure column that is filled wins.
    """
    record: dict[str, Any] = {"compound": row["compound"] if _given(row.get("compound")) else fallback}
    for key in FORMATS:
        if _given(row.get(key)):
            record["structure"] = {key: row[key]}
            break
    record |= {key: row[key] for key in WORDS if _given(row.get(key))}
    record["spectra"] = [
        _spectrum(row, prefix, nucleus) for prefix, nucleus in NUCLEI.items() if _given(row.get(prefix))
    ]
    if _given(row.get("hrms_ion")):
        record["mass"] = [{key: row[column] for key, column in MASS.items() if _given(row.get(column))}]
    return record


def _spectrum(row: Mapping[Any, Any], prefix: str, nucleus: str) -> dict[str, Any]:
    spectrum = {"nucleus": nucleus, "report": row[prefix]}
    for key, column in (("field_mhz", f"{prefix}_mhz"), ("solvent", f"{prefix}_solvent")):
        if _given(row.get(column)):
            spectrum[key] = row[column]
    return spectrum


def _given(value: object) -> bool:
    if value is None or (isinstance(value, str) and not value.strip()):
        return False
    return type(value).__name__ not in ("NAType", "NaTType") and not (isinstance(value, float) and value != value)
