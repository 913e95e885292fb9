"""Mass-to-charge ratios of the ions that reports name, electrons counted."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass

from verify.structure.composition import ELECTRON_MASS, MASSES, formula_text

# Adducts in the usual notation; source: common practice, masses from the table of the composition module.
ADDUCTS: dict[str, dict[str, int]] = {
    "H": {"H": 1}, "Na": {"Na": 1}, "K": {"K": 1}, "Li": {"Li": 1}, "NH4": {"N": 1, "H": 4}, "Cs": {"Cs": 1},
    "Ag": {"Ag": 1}, "Cl": {"Cl": 1}, "Br": {"Br": 1}, "I": {"I": 1}, "F": {"F": 1}, "H2O": {"H": 2, "O": 1},
    "HCOO": {"C": 1, "H": 1, "O": 2}, "HCO2": {"C": 1, "H": 1, "O": 2}, "FA": {"C": 1, "H": 2, "O": 2},
    "CH3COO": {"C": 2, "H": 3, "O": 2}, "OAc": {"C": 2, "H": 3, "O": 2}, "ACN": {"C": 2, "H": 3, "N": 1},
    "CH3CN": {"C": 2, "H": 3, "N": 1}, "MeOH": {"C": 1, "H": 4, "O": 1}, "CH3OH": {"C": 1, "H": 4, "O": 1},
    "CH3": {"C": 1, "H": 3}, "OH": {"O": 1, "H": 1}, "CO2": {"C": 1, "O": 2}, "HCl": {"H": 1, "Cl": 1},
    "HBr": {"H": 1, "Br": 1}, "PF6": {"P": 1, "F": 6}, "BF4": {"B": 1, "F": 4}, "NH3": {"N": 1, "H": 3},
    "Boc": {"C": 5, "H": 8, "O": 2}, "tBu": {"C": 4, "H": 8}, "CO": {"C": 1, "O": 1}, "EtOH": {"C": 2, "H": 6, "O": 1},
}  # fmt: skip
_ION = re.compile(
    r"^\[?\s*(?P<n>\d?)M(?P<terms>(?:\s*[-+]\s*\d{0,2}(?:[A-Z][A-Za-z0-9]*|tBu))*)\s*\]?\s*(?P<charge>\d?\s*[-+•·*]{0,3})\s*$"
)
_TERM = re.compile(r"([-+])\s*(\d{0,2})([A-Z][A-Za-z0-9]*|tBu)")


@dataclass(frozen=True, slots=True)
class Ion:
    """Formula and charge of an ion; ``mz`` in u per charge, None where an element has no mass in the table."""

    formula: Mapping[str, int]
    charge: int
    mz: float | None

    @property
    def words(self) -> str:
        """Formula with its charge."""
        return formula_text(self.formula, self.charge)


def read_ion(text: str, formula: Mapping[str, int], charge: int) -> Ion | None:
    """The ion that ``text`` ("[M+H]+", "M+•", "[2M+Na]+", "[M-H]-") names for a molecule; None if not understood."""
    found = _ION.match(text.replace("−", "-").replace("–", "-").replace("⁺", "+").replace("⁻", "-"))
    if found is None:
        return None
    times = int(found["n"] or 1)
    counts = {element: n * times for element, n in formula.items()}
    for sign, number, name in _TERM.findall(found["terms"]):
        adduct = ADDUCTS.get(name)
        if adduct is None:
            return None
        factor = (1 if sign == "+" else -1) * int(number or 1)
        for element, n in adduct.items():
            counts[element] = counts.get(element, 0) + factor * n
    if any(n < 0 for n in counts.values()):
        return None
    ion_charge = _charge(found["charge"], charge * times, found["terms"])
    if ion_charge is None:
        return None
    return _ion({e: n for e, n in counts.items() if n}, ion_charge)


def _charge(text: str, own: int, terms: str) -> int | None:
    """Charge as written behind the bracket; that of the molecule itself where none is written."""
    marks = text.strip("•·* ")
    if not marks:
        return own if own and not terms else None
    number = int(marks[0]) if marks[0].isdigit() else 1
    if marks[-1] not in "+-":
        return None
    return number if marks[-1] == "+" else -number


def _ion(counts: dict[str, int], charge: int) -> Ion:
    order = [e for e in ("C", "H", "D") if e in counts] + sorted(set(counts) - {"C", "H", "D"})
    formula = {e: counts[e] for e in order}
    if any(e not in MASSES for e in formula):
        return Ion(formula, charge, None)
    mass = sum(MASSES[e][0] * n for e, n in formula.items()) - charge * ELECTRON_MASS
    return Ion(formula, charge, mass / abs(charge))


_FORMULA = re.compile(r"([A-Z][a-z]?)(\d*)")


def read_formula(text: str) -> dict[str, int] | None:
    """Counts of a molecular formula such as C13H17NO3 (a charge at its end is ignored); None if it is none."""
    clean = re.sub(r"[\s+•·-]+$|(?<=[A-Za-z0-9])[+-]\d?$", "", text.strip())
    counts: dict[str, int] = {}
    position = 0
    for found in _FORMULA.finditer(clean):
        if found.start() != position or found[1] not in MASSES:
            return None
        counts[found[1]] = counts.get(found[1], 0) + int(found[2] or 1)
        position = found.end()
    return counts if counts and position == len(clean) else None
