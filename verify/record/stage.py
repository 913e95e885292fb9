"""The stage: bytes of a file, or a mapping, in; the typed record out, with the place of everything in it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace

from verify.findings.location import Locus
from verify.findings.problem import Problem
from verify.record.build import Parts, Typed, build_record
from verify.record.identity import identify
from verify.record.mapping import UnfitRecordError, plain_record
from verify.record.model import PlaceFinder, Record, RecordReading, StructureText
from verify.record.molfile import MolfileFolder
from verify.record.places import TextPlaces, ValuePlaces
from verify.record.reach import blocked_part
from verify.record.schema import Schema, shipped_schema
from verify.record.settings import NO_SETTINGS, ReadingSettings
from verify.record.source import Source, UnfitFileError, read_source
from verify.record.wording import shown

STRUCTURE_FORMATS = ("smiles", "molblock", "inchi")


def record_schema() -> Schema:
    """The schema of a record, compiled once per process."""
    return shipped_schema("record.schema.json", "record")


@dataclass(frozen=True, slots=True)
class Surroundings:
    """What stands around a record: its registry's settings, its folder's name, and what reads its MOL file.

    ``molfiles`` is None for a record that stands in no folder.
    """

    settings: ReadingSettings = NO_SETTINGS
    folder_name: str = ""
    molfiles: MolfileFolder | None = None


ALONE = Surroundings()


def read_record(data: bytes, file: str, around: Surroundings = ALONE) -> RecordReading:
    """Read the YAML or JSON text of one record; ``file`` is its name in reports."""
    return read_loaded(read_source(data, file), around)


def read_loaded(source: Source, around: Surroundings = ALONE) -> RecordReading:
    """Make the record of a file that was loaded before; a file that gave no data gives no record."""
    places = source.places
    if not source.usable:
        return _no_record(places.file, places, around, source.problems)
    reading = _read(source.data, places.file, places, places.typed, around)
    return replace(reading, problems=source.problems + reading.problems) if source.problems else reading


def record_from_mapping(
    mapping: Mapping[str, object], around: Surroundings = ALONE, file: str = ""
) -> RecordReading:
    """Read a record handed in by a program; places count inside the texts of the mapping."""
    try:
        data = plain_record(mapping)
    except UnfitRecordError as unfit:
        return _no_record(file, ValuePlaces(mapping), around, (unfit.problem,))
    return _read(data, file, ValuePlaces(data), lambda _: None, around)


def reading_of(record: Record) -> RecordReading:
    """A record made by a program, as the later stages want it; places count inside its texts."""
    texts = {record.structure.pointer: record.structure.text}
    texts |= {f"{each.pointer}/report": each.report for each in record.spectra if each.report is not None}
    texts |= {each.pointer: each.smiles for each in record.components}
    return RecordReading(
        record.compound or identify(None, "", "").compound, record.file, record, (), TextPlaces(texts)
    )


def _no_record(
    file: str, places: PlaceFinder, around: Surroundings, problems: tuple[Problem, ...]
) -> RecordReading:
    """A reading without a record; it goes by the name of the folder."""
    return RecordReading(identify(None, around.folder_name, "").compound, file, None, problems, places)


def _read(data: object, file: str, places: PlaceFinder, typed: Typed, around: Surroundings) -> RecordReading:
    """Check, then build from what is right; only a missing structure leaves no record."""
    if not isinstance(data, dict):
        message = f"the file holds {shown(data)}, which is no record"
        expected = "keys such as compound, structure and spectra"
        problem = Problem("record-not-a-record", message, Locus(), "record", expected)
        return _no_record(file, places, around, (problem,))
    settings = around.settings
    schema = record_schema()
    _drop_empty(data, schema)
    faults = tuple(blocked_part(problem) for problem in schema.check(data))
    parts = Parts(data, frozenset(problem.locus.pointer for problem in faults), typed)
    identity = identify(parts.text(data, "compound", ""), around.folder_name, settings.id_pattern)
    structure, more = _structure(parts, faults, around.molfiles)
    problems = faults + identity.problems + more
    if structure is None:
        return RecordReading(identity.compound, file, None, problems, places)
    record = build_record(parts, identity.compound, structure, file, settings.defaults)
    return RecordReading(identity.compound, file, record, _numbered(problems, record), places)


def _drop_empty(value: object, schema: Schema) -> None:
    """Known keys without a value (``batch:``) count as not given; an unknown one is still told."""
    if isinstance(value, dict):
        for key in [key for key, held in value.items() if held is None and key in schema.keys]:
            del value[key]
        for held in value.values():
            _drop_empty(held, schema)
    elif isinstance(value, list):
        for held in value:
            _drop_empty(held, schema)


def _structure(
    parts: Parts, faults: tuple[Problem, ...], molfiles: MolfileFolder | None
) -> tuple[StructureText | None, tuple[Problem, ...]]:
    """The one structure of the record; where there is none, a problem that blocks the record says why."""
    if any(problem.blocks == "record" for problem in faults):
        return None, ()
    group = parts.group(parts.data, "structure", "")
    for name in STRUCTURE_FORMATS:
        text = parts.text(group, name, "/structure")
        if text is not None:
            kept = text if name == "molblock" else text.rstrip()
            return StructureText(name, kept, f"/structure/{name}"), ()
    return _molfile(parts.text(group, "molfile", "/structure") or "", molfiles)


def _molfile(path: str, molfiles: MolfileFolder | None) -> tuple[StructureText | None, tuple[Problem, ...]]:
    locus = Locus("/structure/molfile")
    if molfiles is None:
        message = f'the MOL file "{path}" cannot be read here, because the record stands in no folder'
        expected = "smiles, molblock or inchi"
        return None, (Problem("structure-file-missing", message, locus, "record", expected),)
    try:
        return StructureText("molblock", molfiles.read(path), locus.pointer), ()
    except UnfitFileError as unfit:
        fault = unfit.fault
        return None, (Problem(fault.code, fault.message, locus, "record", fault.expected),)


def _numbered(problems: tuple[Problem, ...], record: Record) -> tuple[Problem, ...]:
    """Problems inside a spectrum that was kept carry its number, and that of their signal."""
    if not problems:
        return ()
    numbers = {spectrum.pointer: number for number, spectrum in enumerate(record.spectra)}
    numbered = []
    for problem in problems:
        steps = problem.locus.pointer.split("/")
        number = numbers.get("/".join(steps[:3]))
        if number is not None:
            signal = int(steps[4]) if len(steps) > 4 and steps[3] == "signals" else None
            problem = replace(problem, locus=replace(problem.locus, spectrum=number, signal=signal))
        numbered.append(problem)
    return tuple(numbered)
