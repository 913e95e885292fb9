"""Runs records one after the other in this process."""

from __future__ import annotations

from collections.abc import Iterable, Iterator

from verify.engine.work import Bench, judge_task
from verify.findings.result import RecordResult
from verify.sources.model import Task


def run_serially(tasks: Iterable[Task], bench: Bench) -> Iterator[RecordResult]:
    """Results in the order of the tasks, each made when it is asked for."""
    for task in tasks:
        yield judge_task(task, bench)
