"""The typed record: what was registered, as read, before any chemistry."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Protocol

from verify.findings.location import Locus, Place
from verify.findings.problem import Problem


@dataclass(frozen=True, slots=True)
class StructureText:
    """``format`` is "smiles", "molblock" or "inchi"; ``text`` the text itself (a molfile is already read)."""

    format: str
    text: str
    pointer: str


@dataclass(frozen=True, slots=True)
class ComponentText:
    """A counter-ion or solvate: SMILES and how many of it per molecule of the compound."""

    smiles: str
    per_molecule: float
    pointer: str


@dataclass(frozen=True, slots=True)
class SpectrumText:
    """One spectrum as reported: ``report`` (free text) or ``signals`` (structured), never both.

    ``signals`` are the raw mappings of the record: keys shift | low/high, multiplicity, couplings, nuclei,
    note. The ``default_`` fields are the registry's: they hold where neither the record's keys nor the text
    say otherwise.
    """

    nucleus: str
    pointer: str
    report: str | None = None
    signals: tuple[Mapping[str, object], ...] = ()
    field_mhz: float | None = None
    solvent: str | None = None
    temperature_k: float | None = None
    default_solvent: str | None = None
    default_field_mhz: float | None = None
    default_temperature_k: float | None = None


@dataclass(frozen=True, slots=True)
class MassEntry:
    """An accurate mass: ion as typed, m/z calculated by the author and found."""

    ion: str
    calculated: float | None
    found: float | None
    formula: str | None
    pointer: str


@dataclass(frozen=True, slots=True)
class ElementalEntry:
    """Elemental analysis in percent by mass."""

    calculated: Mapping[str, float]
    found: Mapping[str, float]
    pointer: str


class PlaceFinder(Protocol):
    """Turns a locus inside a record into a place in its file."""

    def place(self, locus: Locus) -> Place | None:
        """The exact place, or None where the record did not come from a file."""


@dataclass(frozen=True, slots=True)
class Record:
    """One compound as registered. Pointers are JSON Pointers into the record's own document."""

    compound: str
    structure: StructureText
    spectra: tuple[SpectrumText, ...]
    components: tuple[ComponentText, ...] = ()
    batch: str | None = None
    name: str | None = None
    mass: tuple[MassEntry, ...] = ()
    elemental: tuple[ElementalEntry, ...] = ()
    notes: str = ""
    file: str = ""
    extra: Mapping[str, object] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class RecordReading:
    """What became of one record's text. ``record`` is None only where nothing could be made of it; then a
    problem with ``blocks == "record"`` says why. ``compound`` is never empty: the id, else the folder's name.
    """

    compound: str
    file: str
    record: Record | None
    problems: tuple[Problem, ...]
    places: PlaceFinder
