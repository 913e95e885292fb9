"""Plants errors in a registry's own consistent records and counts how many are held: the gate's catch rate there."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, replace

from verify.engine.work import Bench, judge_reading
from verify.findings.result import Verdict
from verify.pipeline.planting import KINDS, Specimen, plant
from verify.record.model import Record, RecordReading, StructureText
from verify.record.stage import reading_of

Told = Callable[[str, int, int], None]


@dataclass(frozen=True, slots=True)
class Caught:
    """Planted errors of one kind: how many, how many were contradicted, and how many held (contradicted,
    queried or unassessed)."""

    kind: str
    planted: int
    contradicted: int
    held: int
    missed: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Drill:
    """``records`` were read, ``used`` are consistent and carry the errors."""

    records: int
    used: int
    kinds: tuple[Caught, ...]


def run_drill(
    readings: Iterable[RecordReading], bench: Bench, kinds: Sequence[str] = tuple(KINDS), seed: int = 1,
    tell: Told | None = None,
) -> Drill:
    """Judge every record, then every planted error; the same seed plants the same errors.

    Records that are not consistent as they stand carry no errors: a finding would not show what it is about.
    """
    every = list(readings)
    right = [r.record for r in every if r.record is not None and _verdict(r, bench) is Verdict.CONSISTENT]
    specimens = [s for record in right if (s := specimen_of(record)) is not None]
    by_compound = {record.compound: record for record in right}
    found = []
    for number, kind in enumerate(kinds):
        if tell is not None:
            tell(kind, number, len(kinds))
        found.append(_one_kind(kind, specimens, by_compound, bench, seed))
    return Drill(len(every), len(specimens), tuple(found))


def _verdict(reading: RecordReading, bench: Bench) -> Verdict:
    return judge_reading(reading, bench).verdict


def specimen_of(record: Record) -> Specimen | None:
    """The part of a record that errors are planted in; None without a SMILES or a reported text."""
    if record.structure.format != "smiles":
        return None
    texts = {s.nucleus: s.report for s in record.spectra if s.report is not None}
    return Specimen(record.compound, record.structure.text, texts, record.compound) if texts else None


def _with(record: Record, specimen: Specimen) -> Record:
    """The record with the structure and the texts of a specimen."""
    spectra = tuple(
        s if s.report is None else replace(s, report=specimen.texts.get(s.nucleus, s.report)) for s in record.spectra
    )
    structure = StructureText("smiles", specimen.smiles, record.structure.pointer)
    return replace(record, structure=structure, spectra=spectra)


def _one_kind(
    kind: str, specimens: list[Specimen], records: dict[str, Record], bench: Bench, seed: int
) -> Caught:
    planted = contradicted = held = 0
    missed = []
    for specimen in specimens:
        made = plant(kind, specimen, specimens, seed)
        if made is None:
            continue
        planted += 1
        verdict = _verdict(reading_of(_with(records[specimen.compound], made)), bench)
        contradicted += verdict is Verdict.CONTRADICTED
        held += verdict is not Verdict.CONSISTENT
        if verdict is Verdict.CONSISTENT:
            missed.append(specimen.compound)
    return Caught(kind, planted, contradicted, held, tuple(missed))
