"""What each environment should show at a given solvent and field."""

from __future__ import annotations

from dataclasses import dataclass

from verify.environments.model import Environment


@dataclass(frozen=True, slots=True)
class Increment:
    """One term of a shift estimate in ppm: what it is and where the number comes from."""

    label: str
    value: float
    source: str


@dataclass(frozen=True, slots=True)
class Window:
    """Shift window in ppm. ``centre`` and ``scale`` (robust standard deviation) price a shift;
    ``low`` and ``high`` are hard ends outside which the value is not believed.
    ``trail``: base and increments that made the centre. ``judged`` is False where no model speaks."""

    low: float
    high: float
    centre: float
    scale: float
    trail: tuple[Increment, ...] = ()
    judged: bool = True


@dataclass(frozen=True, slots=True)
class CouplingBlock:
    """``count`` equivalent partners that split a signal with J in ``[low, high]`` Hz (absolute values).

    ``visibility``: "required" (a reader would expect to see it), "optional" (often unresolved: long range,
    exchange, small), "hidden" (normally not seen; allowed). ``environment`` indexes the partner in
    ``EnvironmentSet.all`` (-1: a nucleus outside it). ``label`` names the path class in the coupling table.
    """

    environment: int
    nucleus: str
    count: int
    low: float
    high: float
    typical: float
    visibility: str
    bonds: int
    label: str
    source: str = ""


@dataclass(frozen=True, slots=True)
class Splitting:
    """One acceptable pattern: ``lines`` per letter (outermost first), J windows in Hz, penalty in nats."""

    letters: str
    lines: tuple[int, ...]
    j_windows: tuple[tuple[float, float], ...]
    penalty: float
    reason: str


@dataclass(frozen=True, slots=True)
class Expectation:
    """``strict_splitting``: open-chain sp3 with simple partners, the only case where a wrong letter is strong
    evidence. ``second_order``: why first-order letters may not hold ("" = they should)."""

    environment: Environment
    window: Window
    couplings: tuple[CouplingBlock, ...]
    splittings: tuple[Splitting, ...] = ()
    strict_splitting: bool = False
    second_order: str = ""
    shape: str = "sharp"  # "sharp", "broad" or "either"
    site: str = ""  # "alkyl", "aryl", "alkene", "alkyne", "aldehyde", "exchangeable", "carbon", ...
    words: str = ""  # short name for messages: "OCH3", "aryl CH", "NH (amide)"
