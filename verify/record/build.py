"""From plain data to the typed record, leaving out what the schema check found wrong."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass

from verify.record.model import (
    ComponentText,
    ElementalEntry,
    MassEntry,
    Record,
    SpectrumText,
    StructureText,
)
from verify.record.nodes import escape
from verify.record.settings import Defaults

Typed = Callable[[str], str | None]


@dataclass(frozen=True, slots=True)
class Parts:
    """Gives the usable values of a record's data. ``wrong`` holds the pointers of those that are not.

    ``typed`` gives a scalar as it was typed, so that a batch ``007`` keeps its zeros.
    """

    data: Mapping[str, object]
    wrong: frozenset[str]
    typed: Typed

    def value(self, mapping: Mapping[str, object], key: str, pointer: str) -> object:
        """The value of ``key``, or None where it is missing or wrong."""
        value = mapping.get(key)
        return None if value is None or self.is_wrong(f"{pointer}/{escape(key)}") else value

    def is_wrong(self, pointer: str) -> bool:
        """Whether the schema check refused this value."""
        return pointer in self.wrong

    def text(self, mapping: Mapping[str, object], key: str, pointer: str) -> str | None:
        """A text; a number that stands for a text comes back as typed."""
        value = self.value(mapping, key, pointer)
        if value is None or isinstance(value, str):
            return value
        return self.typed(f"{pointer}/{escape(key)}") or str(value)

    def number(self, mapping: Mapping[str, object], key: str, pointer: str) -> float | None:
        """A number as float."""
        value = self.value(mapping, key, pointer)
        return float(value) if isinstance(value, int | float) else None

    def group(self, mapping: Mapping[str, object], key: str, pointer: str) -> Mapping[str, object]:
        """A mapping, empty where it is missing or wrong."""
        value = self.value(mapping, key, pointer)
        return value if isinstance(value, Mapping) else {}

    def items(self, key: str) -> Iterator[tuple[str, Mapping[str, object]]]:
        """Pointer and mapping of each usable item of a top-level list, or of the one mapping in its place."""
        value = self.value(self.data, key, "")
        if isinstance(value, Mapping):
            yield f"/{key}", value
        elif isinstance(value, list):
            for number, item in enumerate(value):
                pointer = f"/{key}/{number}"
                if isinstance(item, Mapping) and not self.is_wrong(pointer):
                    yield pointer, item


def build_record(
    parts: Parts, compound: str, structure: StructureText, file: str, defaults: Defaults
) -> Record:
    """The record of what is right in ``parts``; the caller has settled id and structure."""
    data = parts.data
    return Record(
        compound=compound,
        structure=structure,
        spectra=tuple(_spectra(parts, defaults)),
        components=tuple(_components(parts)),
        batch=parts.text(data, "batch", ""),
        name=parts.text(data, "name", ""),
        mass=tuple(_masses(parts)),
        elemental=tuple(_elemental(parts)),
        notes=parts.text(data, "notes", "") or "",
        file=file,
        extra={key: value for key, value in data.items() if key.startswith("x-")},
    )


def _spectra(parts: Parts, defaults: Defaults) -> Iterator[SpectrumText]:
    """Spectra whose nucleus and list can be read. Where a list is given twice, the printed one counts."""
    for pointer, item in parts.items("spectra"):
        nucleus = parts.text(item, "nucleus", pointer)
        report = parts.text(item, "report", pointer)
        signals = _signals(parts, item, pointer)
        if nucleus is None or (report is None and signals is None):
            continue
        yield SpectrumText(
            nucleus=nucleus,
            pointer=pointer,
            report=report,
            signals=signals if report is None and signals is not None else (),
            field_mhz=parts.number(item, "field_mhz", pointer),
            solvent=parts.text(item, "solvent", pointer),
            temperature_k=parts.number(item, "temperature_k", pointer),
            default_solvent=defaults.solvent,
            default_field_mhz=defaults.field_mhz(nucleus),
            default_temperature_k=defaults.temperature_k,
        )


def _signals(
    parts: Parts, item: Mapping[str, object], pointer: str
) -> tuple[Mapping[str, object], ...] | None:
    """The signals, or None where they are missing or one is no mapping: a list with a hole misleads."""
    value = parts.value(item, "signals", pointer)
    if not isinstance(value, list):
        return None
    signals = tuple(each for each in value if isinstance(each, Mapping))
    return signals if len(signals) == len(value) else None


def _components(parts: Parts) -> Iterator[ComponentText]:
    for pointer, item in parts.items("components"):
        smiles = parts.text(item, "smiles", pointer)
        amount = 1.0 if item.get("per_molecule") is None else parts.number(item, "per_molecule", pointer)
        if smiles is not None and amount is not None:
            yield ComponentText(smiles.strip(), amount, f"{pointer}/smiles")


def _masses(parts: Parts) -> Iterator[MassEntry]:
    for pointer, item in parts.items("mass"):
        ion = parts.text(item, "ion", pointer)
        if ion is not None:
            calculated, found = (parts.number(item, key, pointer) for key in ("calculated", "found"))
            yield MassEntry(ion, calculated, found, parts.text(item, "formula", pointer), pointer)


def _elemental(parts: Parts) -> Iterator[ElementalEntry]:
    for pointer, item in parts.items("elemental"):
        calculated, found = (_percentages(parts, item, key, pointer) for key in ("calculated", "found"))
        yield ElementalEntry(calculated, found, pointer)


def _percentages(parts: Parts, item: Mapping[str, object], key: str, pointer: str) -> dict[str, float]:
    inside = f"{pointer}/{key}"
    group = parts.group(item, key, pointer)
    values = ((element, parts.number(group, element, inside)) for element in group)
    return {element: value for element, value in values if value is not None}
