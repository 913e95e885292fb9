"""A shift window for every environment: fitted increments narrowed by handbook classes, wider where less is known."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from math import sqrt

from rdkit import Chem

from verify.environments.model import Environment, EnvironmentSet
from verify.expectations.model import Increment, Window
from verify.expectations.shift_classes import ShiftClass, classes_of_atoms
from verify.expectations.shift_estimate import estimate
from verify.expectations.surroundings import Surroundings, survey, terms
from verify.expectations.tables import shift_table
from verify.structure.model import Structure

NOTHING_KNOWN = {
    "1H": Window(-30.0, 30.0, 5.0, 8.0, (), False),
    "13C": Window(-60.0, 260.0, 100.0, 60.0, (), False),
    "19F": Window(-300.0, 120.0, -110.0, 80.0, (), False),
    "31P": Window(-300.0, 300.0, 20.0, 80.0, (), False),
}
# Half of a class window counts as this many standard deviations (common practice: windows hold about nine in ten).
CLASS_WIDTHS = 1.65
CLASS_MARGIN = {"1H": 0.6, "13C": 9.0}
NARROWEST = {"1H": 0.12, "13C": 1.6}
REACH_WIDTHS = {"1H": 4.0, "13C": 4.5}
LEAST_REACH = {"1H": 0.9, "13C": 12.0}
# Aromatic and other strongly anisotropic solvents move signals against CDCl3 (common practice; ppm added to the scale).
SOLVENT_WIDTH = {"C6D6": 0.30, "toluene-d8": 0.30, "pyridine-d5": 0.30, "D2O": 0.12, "TFA-d": 0.25, "DMSO-d6": 0.05}
SPECIAL_ELEMENTS = frozenset(
    ["Sn", "Hg", "Pb", "Tl", "Li", "Mg", "Zn", "Al", "Fe", "Pd", "Pt", "Ru", "Rh", "Ir", "Ni", "Co"]
)
EXCHANGEABLE_DEFAULT = (0.5, 13.0)
AMMONIUM_UP_TO = 12.0  # ppm; common practice


def shift_windows(structure: Structure, environments: EnvironmentSet, solvent: str | None) -> tuple[Window, ...]:
    """Windows in ppm aligned with ``EnvironmentSet.all``; ``solvent`` is the usual formula or None."""
    nuclei = {e.nucleus for e in environments.all}
    mol = structure.mol
    found = survey(mol) if nuclei & {"1H", "13C"} else None
    bare = Chem.RemoveHs(mol)  # heavy atoms keep their indices: hydrogen stands behind them
    classes = classes_of_atoms(bare, "shift_classes") if found else {}
    exchanging = any(e.exchangeable for e in environments.all)
    acids = classes_of_atoms(bare, "exchangeables") if exchanging else {}
    hetero = {n: classes_of_atoms(bare, f"shift_hetero:{n}") for n in ("19F", "31P") if n in nuclei}
    metal = bool(set(structure.formula) & SPECIAL_ELEMENTS)
    codes: dict[int, list[str]] = {}
    known: dict[tuple[int, str], Window] = {}
    windows = []
    for environment in environments.all:
        carrier = environment.carriers[0]
        if environment.nucleus in hetero:
            windows.append(_hetero(environment, hetero[environment.nucleus].get(carrier, ())))
        elif environment.exchangeable:
            salted = "salt" in structure.flags and environment.exchangeable in ("amine", "ammonium")
            windows.append(_exchanging(acids.get(carrier, ()), solvent, salted))
        elif mol.GetAtomWithIdx(carrier).GetAtomicNum() != 6 or found is None:
            windows.append(_hydride(mol.GetAtomWithIdx(carrier).GetSymbol()))
        else:
            key = (carrier, environment.nucleus)
            if key not in known:
                if carrier not in codes:
                    codes[carrier] = terms(found, carrier)
                window = carbon_window(found, carrier, environment.nucleus, classes.get(carrier, ()), codes[carrier])
                known[key] = _widened(window, environment, solvent, metal)
            windows.append(known[key])
    return tuple(windows)


def carbon_window(
    found: Surroundings, carrier: int, nucleus: str, classes: Sequence[ShiftClass], codes: Sequence[str]
) -> Window:
    """Window of a carbon ("13C") or of the hydrogen on it ("1H"), in ppm. ``codes``: ``terms`` of the carbon."""
    fitted = estimate(found, carrier, shift_table(nucleus), codes)
    known = [c for c in classes if nucleus in c.windows]
    if not known:
        return _believed(fitted, nucleus, fitted.centre, fitted.centre)
    lows, highs = [c.windows[nucleus][0] for c in known], [c.windows[nucleus][1] for c in known]
    margin = CLASS_MARGIN[nucleus]
    chosen = max(known, key=lambda c: c.size)
    low, high = chosen.windows[nucleus]
    return _believed(_joined(fitted, low, high, chosen, nucleus), nucleus, min(lows) - margin, max(highs) + margin)


def _joined(fitted: Window, low: float, high: float, chosen: ShiftClass, nucleus: str) -> Window:
    """Fitted centre and class window weighed by their widths; a class that disagrees widens instead."""
    middle, width = (low + high) / 2.0, (high - low) / 2.0 / CLASS_WIDTHS
    width = max(width, NARROWEST[nucleus])
    if len(fitted.trail) == 1:  # nothing but the base: the surroundings were never met
        step = Increment(f"handbook class: {chosen.label}", middle - fitted.centre, f"rules/tables ({chosen.source})")
        return Window(low, high, middle, width, (*fitted.trail, step))
    apart = abs(middle - fitted.centre)
    if apart > 2.0 * (width + fitted.scale):
        return replace(fitted, scale=max(fitted.scale, apart / 4.0))
    weight = 1.0 / fitted.scale**2
    other = 1.0 / width**2
    centre = (fitted.centre * weight + middle * other) / (weight + other)
    # The two are not independent: the joint width is kept above that of independent ones.
    scale = max(sqrt(1.6 / (weight + other)), NARROWEST[nucleus])
    source = f"rules/tables/shift_classes ({chosen.source})"
    step = Increment(f"handbook class: {chosen.label}", centre - fitted.centre, source)
    return Window(fitted.low, fitted.high, centre, min(scale, fitted.scale), (*fitted.trail, step))


def _believed(window: Window, nucleus: str, low: float, high: float) -> Window:
    """Hard ends: far from the centre and outside every class the atom belongs to, but never beyond what was met."""
    reach = max(REACH_WIDTHS[nucleus] * window.scale, LEAST_REACH[nucleus])
    ends = min(low, window.centre - reach), max(high, window.centre + reach)
    return Window(*ends, window.centre, window.scale, window.trail)


def _widened(window: Window, environment: Environment, solvent: str | None, metal: bool) -> Window:
    """Solvent and element effects the tables do not hold."""
    extra = SOLVENT_WIDTH.get(solvent or "", 0.0) if environment.nucleus == "1H" else 0.0
    factor = 3.0 if metal else 1.0
    if extra == 0.0 and factor == 1.0:
        return window
    scale = sqrt(window.scale**2 + extra**2) * factor
    more = 2.0 * (scale - window.scale)
    return replace(window, scale=scale, low=window.low - more - extra, high=window.high + more + extra)


def _exchanging(classes: Sequence[ShiftClass], solvent: str | None, salted: bool = False) -> Window:
    """OH, NH, SH: the window of the last class that fits, hydrogen bonds widen it. ``salted``: the N of an amine drawn
    beside its acid, whose hydrogens lie anywhere up to those of an ammonium ion."""
    low, high = EXCHANGEABLE_DEFAULT
    label, source = "exchangeable hydrogen", "common practice"
    key = "DMSO-d6" if solvent in ("DMSO-d6", "DMF-d7", "acetone-d6") else "CDCl3"
    if classes:
        chosen = classes[-1]
        window = chosen.windows.get(key) or next(iter(chosen.windows.values()), None)
        if window is not None:
            low, high, label, source = window[0], window[1], chosen.label, chosen.source
    high = max(high, AMMONIUM_UP_TO) if salted else high
    middle, scale = (low + high) / 2.0, max((high - low) / 2.0 / 1.3, 0.7)
    trail = (Increment(f"handbook class: {label}", middle, f"rules/tables/exchangeables ({source})"),)
    return Window(low - 3.5, high + 3.5, middle, scale, trail)


def _hydride(element: str) -> Window:
    """Hydrogen on an element other than carbon that does not exchange (common practice, wide)."""
    usual = {"Si": (3.2, 6.5), "P": (2.0, 8.5), "Ge": (3.0, 6.0), "Sn": (4.5, 7.0), "B": (-4.0, 6.0), "Se": (-1.0, 4.0)}
    if element not in usual:
        return NOTHING_KNOWN["1H"]
    low, high = usual[element]
    trail = (Increment(f"{element}-H", (low + high) / 2.0, "from memory"),)
    return Window(low - 2.0, high + 2.0, (low + high) / 2.0, (high - low) / 2.6, trail)


def _hetero(environment: Environment, classes: Sequence[ShiftClass]) -> Window:
    """19F and 31P: the last class that fits."""
    if not classes:
        return NOTHING_KNOWN[environment.nucleus]
    chosen = classes[-1]
    low, high = chosen.windows["window"]
    middle, reach = (low + high) / 2.0, (high - low) / 2.0
    trail = (Increment(f"handbook class: {chosen.label}", middle, f"rules/tables/shift_hetero ({chosen.source})"),)
    return Window(low - 0.3 * reach - 5.0, high + 0.3 * reach + 5.0, middle, reach / 1.5, trail)
