"""Facts of the record as a whole, of its accurate masses and of its elemental analysis."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from verify.record.model import ElementalEntry, MassEntry
from verify.rulebook.facts import FACTS
from verify.rulebook.model import Policy, RecordCase
from verify.structure.basicity import has_basic_nitrogen
from verify.structure.composition import ELECTRON_MASS, MASSES
from verify.structure.ions import read_formula, read_ion

CARBONYL_FROM = 155.0
WATER = {"H": 2, "O": 1}
SOLVATES: Mapping[str, Mapping[str, int]] = {
    "water": WATER, "CH2Cl2": {"C": 1, "H": 2, "Cl": 2}, "CHCl3": {"C": 1, "H": 1, "Cl": 3},
    "EtOAc": {"C": 4, "H": 8, "O": 2}, "MeOH": {"C": 1, "H": 4, "O": 1}, "EtOH": {"C": 2, "H": 6, "O": 1},
    "HCl": {"H": 1, "Cl": 1}, "TFA": {"C": 2, "H": 1, "F": 3, "O": 2},
}  # fmt: skip
FRACTIONS = (0.25, 0.33, 0.5, 0.66, 0.75, 1.0, 1.25, 1.5, 2.0, 3.0)


def record_facts(case: RecordCase, policy: Policy) -> dict[str, Any]:
    """All facts of group "record"."""
    given = {s.spectrum.nucleus for s in case.spectra}
    required = policy.required if case.reading.record is not None else ()  # a record not read may well hold them
    facts: dict[str, Any] = {name: fact.neutral for name, fact in FACTS["record"].items()}
    facts |= {
        "has_structure": case.structure is not None, "has_1h": "1H" in given, "has_13c": "13C" in given,
        "lacking": ", ".join(n for n in required if n not in given),
        "carbonyl_without_line": _carbonyl_missing(case),
    }  # fmt: skip
    if case.structure is not None:
        facts["basic_nitrogen"] = has_basic_nitrogen(case.structure.mol)
        facts["is_salt"] = "salt" in case.structure.flags or len(case.structure.components) > 1
        facts["stereo"] = case.structure.stereo_state
    if case.rivals:
        best = case.rivals[0]
        facts |= {"rival_gain": best.gain, "rival_words": best.words, "rival_smiles": best.smiles}
    return facts


def _carbonyl_missing(case: RecordCase) -> bool:
    """A C=O is drawn and the 13C list, complete but for one line at most, has nothing where it must stand."""
    for spectrum in case.spectra:
        if spectrum.spectrum.nucleus != "13C" or spectrum.assignment is None or not spectrum.peaks.signals:
            continue
        mine = [e for e in spectrum.expectations if e.environment.nucleus == "13C"]
        carbonyls = [e for e in mine if e.words in ("C=O", "CHO") and e.window.centre > CARBONYL_FROM + 3.0]
        listed = len(spectrum.peaks.signals) >= len(mine) - len(carbonyls) - 1
        high = max((s.high for s in spectrum.peaks.signals), default=0.0)
        return bool(carbonyls) and listed and high < CARBONYL_FROM
    return False


def mass_facts(case: RecordCase) -> Iterator[tuple[MassEntry, dict[str, Any]]]:
    """Facts of group "mass" for every accurate mass of the record."""
    record, structure = case.reading.record, case.structure
    if record is None or structure is None:
        return
    for entry in record.mass:
        facts: dict[str, Any] = {name: fact.neutral for name, fact in FACTS["mass"].items()}
        ion = read_ion(entry.ion, structure.formula, structure.charge)
        facts |= {"ion": entry.ion, "understood": ion is not None}
        facts |= {"stated": float(entry.calculated or 0.0), "found": float(entry.found or 0.0)}
        if ion is not None and ion.mz is not None:
            facts |= _mass_differences(entry, ion.mz, abs(ion.charge)) | {"expected": ion.mz, "ion_words": ion.words}
            facts |= _typed_formula(entry, ion.formula, structure.formula)
        yield entry, facts


def _mass_differences(entry: MassEntry, expected: float, charge: int) -> dict[str, Any]:
    stated_off = abs(entry.calculated - expected) if entry.calculated else 0.0
    found_off = abs(entry.found - expected) if entry.found else 0.0
    return {
        "stated_off": stated_off, "found_off": found_off, "found_off_ppm": 1e6 * found_off / expected,
        "electron_missing": abs(stated_off - ELECTRON_MASS / charge) < 1.5e-4,
    }  # fmt: skip


def _typed_formula(entry: MassEntry, ion: Mapping[str, int], molecule: Mapping[str, int]) -> dict[str, Any]:
    counts = read_formula(entry.formula) if entry.formula else None
    if counts is None:
        return {}
    differs = counts != dict(ion) and counts != dict(molecule)
    return {"formula": entry.formula, "formula_differs": differs}


def elemental_facts(case: RecordCase) -> Iterator[tuple[ElementalEntry, dict[str, Any]]]:
    """Facts of group "elemental" for every element of every analysis."""
    record, structure = case.reading.record, case.structure
    if record is None or structure is None:
        return
    whole: dict[str, float] = dict(structure.formula)
    for component in structure.components:
        if not component.atoms:  # declared, not drawn
            for atom in component.mol.GetAtoms():
                _add(whole, {atom.GetSymbol(): 1, "H": atom.GetTotalNumHs()}, component.per_molecule)
    for entry in record.elemental:
        solvate = _solvate(entry, whole)
        for element in sorted(set(entry.calculated) | set(entry.found)):
            expected = percent(whole, element)
            if expected is None:
                continue
            stated, found = float(entry.calculated.get(element, 0.0)), float(entry.found.get(element, 0.0))
            yield entry, {
                "element": element, "stated": stated, "expected": expected, "found": found, "solvate": solvate,
                "stated_off": abs(stated - expected) if stated else 0.0,
                "found_off": abs(found - (stated or expected)) if found else 0.0,
            }  # fmt: skip


def _add(counts: dict[str, float], more: Mapping[str, int], times: float) -> None:
    for element, number in more.items():
        if number:
            counts[element] = counts.get(element, 0.0) + number * times


def percent(counts: Mapping[str, float], element: str) -> float | None:
    """Percentage by mass of an element; None where a mass is unknown."""
    if element not in counts or any(e not in MASSES for e in counts):
        return 0.0 if element in MASSES and all(e in MASSES for e in counts) else None
    total = sum(MASSES[e][1] * n for e, n in counts.items())
    return 100.0 * MASSES[element][1] * counts[element] / total


def _solvate(entry: ElementalEntry, whole: Mapping[str, float]) -> str:
    """A solvent or acid fraction with which every typed calculated value fits to 0.1 %."""
    for name, formula in SOLVATES.items():
        for fraction in FRACTIONS:
            counts = dict(whole)
            _add(counts, formula, fraction)
            values = [(v, percent(counts, e)) for e, v in entry.calculated.items()]
            if values and all(p is not None and abs(v - p) <= 0.1 for v, p in values):
                return f"{fraction:g} {name}"
    return ""
