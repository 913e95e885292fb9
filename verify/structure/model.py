"""A structure as the later stages see it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from rdkit import Chem


@dataclass(frozen=True, slots=True)
class Component:
    """One connected part of the drawing or one declared counter-ion/solvate.

    ``role``: "compound" (its signals are expected), "counter-ion" or "solvate".
    ``per_molecule`` scales its nuclei; ``mol`` has no explicit H; ``atoms`` are its indices in
    ``Structure.mol`` (empty for a declared component that was not drawn).
    """

    role: str
    mol: Chem.Mol
    per_molecule: float
    atoms: tuple[int, ...]


@dataclass(frozen=True, slots=True)
class Structure:
    """``mol``: all drawn atoms, heavy atoms in the order of the input text first, H explicit behind them
    (deuterium kept as labelled atoms). ``heavy``: number of heavy atoms. ``formula``: element to count of the
    drawn structure without declared components. ``charge``: net charge of the drawing.

    ``stereo_state``: "complete", "one-undefined", "several-undefined" or "none" (no stereo element).
    ``flags``: words that limit what may be judged, such as "paramagnetic-metal", "boron", "radical",
    "isotope-label", "salt", "mixture", "zwitterion", "too-large".
    """

    mol: Chem.Mol
    heavy: int
    components: tuple[Component, ...]
    formula: Mapping[str, int]
    charge: int
    smiles: str
    stereo_state: str
    flags: frozenset[str] = frozenset()
