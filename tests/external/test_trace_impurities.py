"""Every compound of the published trace-impurity tables must pass as its own record.

Source of every number: Gottlieb et al., J. Org. Chem. 1997, 62, 7512; Fulmer et al., Organometallics 2010,
29, 2176; Babij et al., Org. Process Res. Dev. 2016, 20, 661 (tests/reference/trace_impurities.yaml).
"""

from __future__ import annotations

import re
from pathlib import Path
from typing import Any

import pytest
import yaml

import verify

TABLE = Path(__file__).parents[1] / "reference" / "trace_impurities.yaml"
SOLVENTS = ("CDCl3", "DMSO-d6", "CD3OD")
PLAIN = re.compile(r"((?:br )?[a-z]+)(?:, J = ([\d., ]+))?")
# Letters that a table footnote gives in words.
IN_WORDS = {
    ("benzyl alcohol", "CH2", "CDCl3"): "s",
    ("isobutanol", "CH2OH", "CDCl3"): "d, J = 6.5",
}
LETTERS = {"d of pentets": "dp"}
# The table does not hold a list that a person could judge.
NOT_A_LIST = {
    "hydrocarbon grease": "a polymer; the SMILES is a stand-in",
    "silicone grease": "a polymer; the repeat unit has open ends",
    "methylcyclohexane": "the number of hydrogens of the two ring signals is not printed",
}
# Compound and solvent -> why the tool may hold a true list.
EXPLAINED: dict[tuple[str, str], str] = {}


def _impurities() -> list[dict[str, Any]]:
    loaded: list[dict[str, Any]] = yaml.safe_load(TABLE.read_text(encoding="utf-8"))["impurities"]
    return loaded


def _shift(value: float | list[float], decimals: int) -> str:
    if isinstance(value, list):
        return f"{value[1]:.{decimals}f}–{value[0]:.{decimals}f}"
    return f"{value:.{decimals}f}"


def _letters(compound: str, row: dict[str, Any], solvent: str) -> str:
    words = IN_WORDS.get((compound, row["label"], solvent)) or row.get("mult_by_solvent", {}).get(solvent, "")
    plain = PLAIN.fullmatch(words)
    if plain:
        return f"{plain[1]}, J = {plain[2]} Hz" if plain[2] else plain[1]
    letters = LETTERS.get(row["mult"], row["mult"])
    couplings = ", ".join(f"{value:.1f}" for value in row["J_hz"] or ())
    return f"{letters}, J = {couplings} Hz" if couplings else letters


def _record(compound: dict[str, Any], solvent: str) -> dict[str, Any]:
    """The compound as a record whose lists are the table's own cells."""
    protons = [row for row in compound["h1"] if row["shift_ppm"].get(solvent) is not None]
    carbons = [row for row in compound["c13"] if row["shift_ppm"].get(solvent) is not None]
    h1 = ", ".join(
        f"{_shift(row['shift_ppm'][solvent], 2)} ({_letters(compound['name'], row, solvent)}, {row['n_h']}H)"
        for row in protons
    )
    c13 = ", ".join(_shift(row["shift_ppm"][solvent], 2) for row in carbons)
    spectra = [{"nucleus": "1H", "field_mhz": 300, "solvent": solvent, "report": h1}]
    if carbons:
        spectra.append({"nucleus": "13C", "field_mhz": 75, "solvent": solvent, "report": c13})
    return {"compound": compound["name"], "structure": {"smiles": compound["smiles"]}, "spectra": spectra}


def _doubtful(compound: dict[str, Any], solvent: str) -> bool:
    return any(solvent in (row.get("doubtful") or {}) for row in compound["h1"] + compound["c13"])


def _listed(compound: dict[str, Any], solvent: str) -> bool:
    return any(row["shift_ppm"].get(solvent) is not None for row in compound["h1"])


CASES = [
    (compound, solvent)
    for compound in _impurities()
    for solvent in SOLVENTS
    if compound["name"] not in NOT_A_LIST and _listed(compound, solvent) and not _doubtful(compound, solvent)
]


@pytest.mark.parametrize(("compound", "solvent"), CASES, ids=[f"{c['name']}-{s}" for c, s in CASES])
def test_published_impurity_is_not_contradicted(compound: dict[str, Any], solvent: str) -> None:
    result = verify.examine(_record(compound, solvent), policy="registration")
    if (compound["name"], solvent) in EXPLAINED:
        assert result.verdict in ("contradicted", "unassessed"), "explained exception is no longer needed"
        return
    errors = [f"{finding.rule}: {finding.message}" for finding in result.findings if finding.level == "error"]
    assert result.verdict in ("consistent", "queried"), errors or result.unassessed_because


def test_every_compound_of_the_table_is_accounted_for() -> None:
    names = {compound["name"] for compound in _impurities()}
    seen = {compound["name"] for compound, _ in CASES}
    assert len(names) == 76
    assert names - seen == set(NOT_A_LIST)
    assert {name for name, _ in EXPLAINED} <= seen
