"""The way of a record: the stages in order, and nothing else."""

from __future__ import annotations

from dataclasses import replace

from verify.assignment.model import RivalFit
from verify.assignment.stage import assign
from verify.environments.model import EnvironmentSet
from verify.environments.stage import find_environments
from verify.expectations.model import Expectation
from verify.expectations.stage import expect
from verify.findings.finding import Deviation
from verify.findings.problem import Problem
from verify.findings.result import RecordResult, verdict_of
from verify.peaklist.model import PeakList
from verify.peaklist.stage import read_peak_list, read_signals
from verify.pipeline.reach import solvent_and_field, unassessed_because
from verify.pipeline.rival_test import rival_fits
from verify.pipeline.summary import summarise, summary_of
from verify.record.model import Record, RecordReading, SpectrumText
from verify.rulebook.model import RecordCase, Rulebook, SpectrumCase
from verify.rulebook.stage import judge
from verify.structure.model import Structure
from verify.structure.stage import read_structure


def examine_record(
    reading: RecordReading, rulebook: Rulebook, deviations: tuple[Deviation, ...], today: str
) -> RecordResult:
    """Take one record all the way to its verdict; ``today`` is an ISO date that decides expiry of deviations."""
    case = build_case(reading)
    if rulebook.policy.rivals:
        case = replace(case, rivals=_rivals(case, rulebook))
    findings = judge(case, rulebook, deviations, today)
    because = unassessed_because(case)
    return RecordResult(
        compound=reading.compound,
        file=reading.file,
        verdict=verdict_of(findings, bool(because)),
        findings=findings,
        assignment=_assignments(case),
        unassessed_because=because,
        summary=summary_of(case),
    )


def _rivals(case: RecordCase, rulebook: Rulebook) -> tuple[RivalFit, ...]:
    """Near isomers that may explain the lists better by what the policy calls much."""
    return rival_fits(case, most=rulebook.policy.rivals, least_gain=rulebook.policy.limits.get("rival_gain", 0.0))


def build_case(reading: RecordReading) -> RecordCase:
    """Everything the rules look at, from the record's text alone."""
    record = reading.record
    if record is None:
        return RecordCase(reading, reading.problems)
    structure, problems = _structure(record)
    lists = tuple(read_list(spectrum) for spectrum in record.spectra)
    if structure is None:
        spectra = tuple(SpectrumCase(n, s, p) for n, (s, p) in enumerate(zip(record.spectra, lists, strict=True)))
        return RecordCase(reading, reading.problems + problems, None, None, spectra)
    environments = find_environments(structure)
    spectra = _spectra(record, lists, structure, environments)
    return RecordCase(reading, reading.problems + problems, structure, environments, spectra)


def _structure(record: Record) -> tuple[Structure | None, tuple[Problem, ...]]:
    read = read_structure(record.structure, record.components)
    return read.structure, read.problems


def read_list(spectrum: SpectrumText) -> PeakList:
    """The peak list of one spectrum, from free text or from structured signals."""
    if spectrum.report is not None:
        return read_peak_list(spectrum.report, spectrum.nucleus)
    return read_signals(spectrum.signals, spectrum.nucleus, f"{spectrum.pointer}/signals")


def _spectra(
    record: Record, lists: tuple[PeakList, ...], structure: Structure, environments: EnvironmentSet
) -> tuple[SpectrumCase, ...]:
    """Each list explained; spectra of one solvent and magnet share their expectations."""
    shared: dict[tuple[str | None, float | None], tuple[Expectation, ...]] = {}
    cases = []
    for number, (spectrum, peaks) in enumerate(zip(record.spectra, lists, strict=True)):
        solvent, field = solvent_and_field(spectrum, peaks)
        if (solvent, field) not in shared:
            shared[solvent, field] = expect(structure, environments, solvent, field)
        expectations = shared[solvent, field]
        assignment = assign(structure, expectations, peaks, number, solvent)
        cases.append(SpectrumCase(number, spectrum, peaks, expectations, assignment))
    return tuple(cases)


def _assignments(case: RecordCase) -> tuple[dict[str, object], ...]:
    return tuple(
        summarise(spectrum.assignment, spectrum.peaks, spectrum.expectations)
        for spectrum in case.spectra
        if spectrum.assignment is not None
    )
