"""What a rule is, what it looks at, and a rulebook ready to judge."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any

from verify.assignment.model import RivalFit, SpectrumAssignment
from verify.environments.model import EnvironmentSet
from verify.expectations.model import Expectation
from verify.findings.finding import Level
from verify.findings.problem import Problem
from verify.peaklist.model import PeakList
from verify.record.model import RecordReading, SpectrumText
from verify.rulebook.conditions import Condition
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
    rivals: tuple[RivalFit, ...] = ()


@dataclass(frozen=True, slots=True)
class Example:
    """Facts (dotted name to value; all others neutral) and whether the rule must speak."""

    says: str
    facts: Mapping[str, Any]
    fires: bool
    level: Level | None = None


@dataclass(frozen=True, slots=True)
class Rule:
    """One rule as read from its file.

    scope      "record", "mass", "elemental", "spectrum", "signal", "missing", "problem", "registry": how often asked
    nuclei     spectra it is asked of; empty = all
    codes      scope "problem": codes of problems it owns (a trailing ``*`` matches any ending)
    locus      where it points: "list", "signal", "shift", "letters", "nuclei", "coupling", "structure", "record",
               "problem", or a JSON Pointer of the record
    raised     level where ``raised_when`` holds as well
    softened   level where the text or the structure softens every statement; None = silent then
    """

    id: str
    title: str
    scope: str
    level: Level
    condition: Condition
    message: str
    remedy: str
    basis: str
    locus: str
    subject: str
    file: str
    nuclei: tuple[str, ...] = ()
    codes: tuple[str, ...] = ()
    raised: Level | None = None
    raised_when: Condition | None = None
    softened: Level | None = None
    examples: tuple[Example, ...] = ()


@dataclass(frozen=True, slots=True)
class Policy:
    """``levels``: rule id to level, None = off. ``limits``: named numbers that conditions use.
    ``required``: nuclei without which a record is queried. ``holds``: verdicts that hold a record."""

    name: str
    title: str
    limits: Mapping[str, float]
    levels: Mapping[str, Level | None] = field(default_factory=dict)
    required: tuple[str, ...] = ()
    holds: tuple[str, ...] = ("contradicted", "unassessed")
    rivals: int = 0


@dataclass(frozen=True, slots=True)
class Rulebook:
    """Rules with a policy applied, by scope; ``digest`` changes with any rule, table or limit."""

    policy: Policy
    rules: tuple[Rule, ...]
    digest: str

    def of(self, scope: str) -> tuple[Rule, ...]:
        """Rules of one scope, in order of their id."""
        return tuple(rule for rule in self.rules if rule.scope == scope)
