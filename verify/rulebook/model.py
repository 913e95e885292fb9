"""What a rule is, what it looks at, and a rulebook ready to judge."""

from __future__ import annotations

from dataclasses import dataclass

from verify.assignment.model import SpectrumAssignment
from verify.environments.model import EnvironmentSet
from verify.expectations.model import Expectation
from verify.findings.problem import Problem
from verify.peaklist.model import PeakList
from verify.record.model import RecordReading, SpectrumText
from verify.structure.model import Structure


@dataclass(frozen=True, slots=True)
class SpectrumCase:
    """One spectrum with everything known about it. ``number`` counts from 0 in the record.

    ``expectations`` are those of all nuclei, aligned with ``EnvironmentSet.all``, at this solvent and field;
    empty, with ``assignment`` None, where the structure could not be used.
    """

    number: int
    spectrum: SpectrumText
    peaks: PeakList
    expectations: tuple[Expectation, ...] = ()
    assignment: SpectrumAssignment | None = None


@dataclass(frozen=True, slots=True)
class RecordCase:
    """A record as the rules see it. ``problems`` joins those of the record and of its structure; those of a
    list stay in ``PeakList.problems`` (their spans count in the report text of that spectrum)."""

    reading: RecordReading
    problems: tuple[Problem, ...] = ()
    structure: Structure | None = None
    environments: EnvironmentSet | None = None
    spectra: tuple[SpectrumCase, ...] = ()
