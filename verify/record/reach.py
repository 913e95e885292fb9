"""How far a breach of the record's schema reaches: the record, one spectrum, or only the value itself."""

from __future__ import annotations

from dataclasses import replace

from verify.findings.problem import Problem

_LIST_KEYS = ("nucleus", "report", "signals")
_CHOICE = "record-key-choice"


def blocked_part(problem: Problem) -> Problem:
    """The problem with what it blocks, and with a code of its own where a part of the record has one."""
    steps = problem.locus.pointer.split("/")[1:]
    if problem.code == "record-unknown-key" or problem.blocks:
        return problem
    if not steps or steps[0] == "structure":
        return replace(problem, blocks="record", code=_structure_code(problem, steps))
    if steps[0] != "spectra":
        return problem
    if problem.code == _CHOICE and problem.locus.on_key:
        return replace(problem, code="spectrum-list-twice")
    if problem.code == _CHOICE:
        return replace(problem, blocks="spectrum", code="spectrum-list-missing")
    if len(steps) < 3 or (steps[2] in _LIST_KEYS and len(steps) <= 4):
        return replace(problem, blocks="spectrum")
    return problem


def _structure_code(problem: Problem, steps: list[str]) -> str:
    """A missing structure and one given twice have codes of their own."""
    if steps and problem.code == "record-key-missing":
        return "structure-missing"
    if problem.code == _CHOICE:
        return "structure-ambiguous" if problem.locus.on_key else "structure-missing"
    return problem.code
