"""Dead, endless and broken workers lose no record, and order is kept."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from itertools import islice
from pathlib import Path

import pytest

from verify.engine import processes
from verify.engine.faults import TOOL_FAULT
from verify.engine.processes import AHEAD, Pool, run_in_processes
from verify.engine.settings import RunSettings
from verify.engine.work import make_bench
from verify.errors import ToolFault
from verify.findings.result import RecordResult, Verdict
from verify.sources.folder import FolderSource
from verify.sources.model import Task

SETTINGS = RunSettings("2026-12-01")
HOSTILE = '''
import os, signal
from verify.engine.work import judge_task

def die(task, bench):
    if task.key in ("C-003", "C-010"):
        os.kill(os.getpid(), signal.SIGKILL)
    return judge_task(task, bench)

def run_on(task, bench):
    while task.key == "C-001":
        pass
    return judge_task(task, bench)
'''


@pytest.fixture
def hostile(tmp_path_factory: pytest.TempPathFactory, monkeypatch: pytest.MonkeyPatch) -> Callable[[str], object]:
    """Functions that a worker process can import by name."""
    folder = tmp_path_factory.mktemp("modules")
    (folder / "hostile_judges.py").write_text(HOSTILE, encoding="utf-8")
    monkeypatch.syspath_prepend(str(folder))
    module = __import__("hostile_judges")
    return lambda name: getattr(module, name)


def _ids(results: list[RecordResult]) -> list[str]:
    return [result.compound for result in results]


def test_results_come_in_the_order_of_the_tasks(make_registry: Callable[[int], Path]) -> None:
    tasks = list(FolderSource(make_registry(11)).tasks())
    results = list(run_in_processes(tasks, Pool(SETTINGS, 2, chunk=2)))
    assert _ids(results) == [task.key for task in tasks]
    assert [r.verdict for r in results].count(Verdict.CONTRADICTED) == 3


def test_a_worker_that_dies_loses_no_record(
    make_registry: Callable[[int], Path], hostile: Callable[[str], object]
) -> None:
    tasks = list(FolderSource(make_registry(13)).tasks())
    results = list(run_in_processes(tasks, Pool(SETTINGS, 2, 3, hostile("die"))))
    assert _ids(results) == [task.key for task in tasks]
    lost = [result for result in results if result.verdict is Verdict.UNASSESSED]
    assert _ids(lost) == ["C-003", "C-010"]
    assert all(result.findings[0].rule == TOOL_FAULT and result.unassessed_because for result in lost)
    assert lost[0].file.endswith("compounds/C-003/record.yaml")


def test_an_endless_step_is_ended_by_the_system(
    make_registry: Callable[[int], Path], hostile: Callable[[str], object]
) -> None:
    tasks = list(FolderSource(make_registry(3)).tasks())
    settings = RunSettings("2026-12-01", seconds=0.5)
    results = list(run_in_processes(tasks, Pool(settings, 1, 2, hostile("run_on"))))
    assert [result.verdict for result in results][:2] == [Verdict.CONSISTENT, Verdict.UNASSESSED]
    assert len(results) == 3


def test_tasks_are_drawn_no_faster_than_results_are_taken(make_registry: Callable[[int], Path]) -> None:
    drawn = 0

    def counted(tasks: Iterator[Task]) -> Iterator[Task]:
        nonlocal drawn
        for task in tasks:
            drawn += 1
            yield task

    results = run_in_processes(counted(FolderSource(make_registry(40)).tasks()), Pool(SETTINGS, 1, chunk=2))
    assert len(list(islice(results, 4))) == 4
    assert drawn <= 2 * (AHEAD + 2)
    results.close()


def test_workers_that_never_start_are_a_fault_of_the_tool(make_registry: Callable[[int], Path]) -> None:
    tasks = FolderSource(make_registry(2)).tasks()
    unloadable = RunSettings("2026-12-01", policy="no such policy")
    with pytest.raises(ToolFault, match="--workers 1"):
        list(run_in_processes(tasks, Pool(unloadable, 1)))


def test_the_parent_is_never_prepared_as_a_worker() -> None:
    assert make_bench(SETTINGS).rulebook.rules
    assert processes._prepared is None
