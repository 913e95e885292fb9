"""A reported peak list as read: signals with values, letters, couplings, counts and spans."""

from __future__ import annotations

from dataclasses import dataclass

from verify.findings.location import Span
from verify.findings.problem import Problem


@dataclass(frozen=True, slots=True)
class Multiplicity:
    """``kind``: "first-order" (``lines`` = line count of each nested letter, outermost first: dd = (2, 2),
    s = (1,), quint = (5,)), "multiplet" (m, no lines) or "second-order" (AB, AA'BB', ...; no lines).

    ``letters`` is canonical ("dd", "quint", "m", "ABq"); ``text`` is what was typed.
    """

    kind: str
    lines: tuple[int, ...]
    letters: str
    text: str
    broad: bool = False
    apparent: bool = False
    span: Span | None = None


@dataclass(frozen=True, slots=True)
class Coupling:
    """A coupling constant in Hz as typed; ``partner`` such as "H-F" where the text says so, else ""."""

    value: float
    decimals: int
    partner: str = ""
    span: Span | None = None


@dataclass(frozen=True, slots=True)
class Signal:
    """One signal. ``low <= high`` in ppm (equal unless a range was typed); ``nuclei`` may be fractional.

    ``nuclei`` is the number of H for 1H lists and of carbons for 13C lists (None = not stated).
    ``attached_h`` is the number of H on the carbon where a 13C list says so (C/CH/CH2/CH3 or DEPT letters).
    """

    low: float
    high: float
    decimals: int
    span: Span
    multiplicity: Multiplicity | None = None
    couplings: tuple[Coupling, ...] = ()
    nuclei: float | None = None
    attached_h: int | None = None
    annotation: str = ""
    shift_span: Span | None = None
    nuclei_span: Span | None = None
    hidden: bool = False  # the text says it is overlapped by, or lies under, a solvent or another signal

    @property
    def centre(self) -> float:
        """Middle of the range in ppm; only for sorting and printing."""
        return (self.low + self.high) / 2.0

    @property
    def is_range(self) -> bool:
        """True where a range was typed."""
        return self.low != self.high


@dataclass(frozen=True, slots=True)
class PeakList:
    """``remarks`` holds words of the text that change how it is judged: "rotamers", "mixture", "major",
    "minor", "selected", "overlapped", "exchange" (canonical, sorted)."""

    nucleus: str
    text: str
    signals: tuple[Signal, ...]
    problems: tuple[Problem, ...] = ()
    field_mhz: float | None = None
    solvent: str | None = None
    temperature_k: float | None = None
    remarks: tuple[str, ...] = ()
