"""Whatever breaks on one record becomes its result: unassessed, with the reason and the place of the fault."""

from __future__ import annotations

from dataclasses import dataclass
from functools import partial
from typing import Any

import pytest

from verify.engine.faults import TIME_LIMIT, TOOL_FAULT
from verify.engine.settings import RunSettings
from verify.engine.time_limit import OutOfTimeError, time_limit
from verify.engine.work import Bench, judge_reading, judge_task, make_bench
from verify.findings.result import Verdict
from verify.sources.model import Task

TODAY = "2026-12-01"


@dataclass
class Unreadable:
    """A reading that does something of its own when the pipeline looks at its record."""

    act: Any
    compound: str = "C-1"
    file: str = "compounds/C-1/record.yaml"
    problems: tuple[()] = ()

    @property
    def record(self) -> object:
        return self.act()


def _raise(error: BaseException) -> object:
    raise error


def _run_on() -> object:
    while True:
        pass


def _bench(seconds: float = 0.0) -> Bench:
    return make_bench(RunSettings(TODAY, seconds=seconds))


@pytest.mark.parametrize("error", [ValueError("odd\nvalue"), MemoryError(), RecursionError("deep"), KeyError("x")])
def test_an_exception_leaves_the_record_unassessed(error: Exception) -> None:
    result = judge_reading(Unreadable(lambda: _raise(error)), _bench())  # type: ignore[arg-type]
    assert result.verdict is Verdict.UNASSESSED
    (finding,) = result.findings
    assert finding.rule == TOOL_FAULT
    assert type(error).__name__ in finding.message
    assert "verify/pipeline/one_record.py:" in finding.message
    assert "\n" not in finding.message
    assert "Traceback" not in finding.message
    assert finding.place is not None
    assert finding.place.file == result.file


def test_fingerprint_of_a_fault_does_not_depend_on_the_line() -> None:
    readings = [Unreadable(partial(_raise, ValueError(word))) for word in "ab"]
    first, second = (judge_reading(reading, _bench()) for reading in readings)  # type: ignore[arg-type]
    assert first.findings[0].message != second.findings[0].message
    assert first.findings[0].fingerprint == second.findings[0].fingerprint


def test_a_record_has_only_so_much_time() -> None:
    result = judge_reading(Unreadable(_run_on), _bench(0.05))  # type: ignore[arg-type]
    assert result.verdict is Verdict.UNASSESSED
    assert result.findings[0].rule == TIME_LIMIT


def test_ctrl_c_is_not_taken_for_a_fault() -> None:
    with pytest.raises(KeyboardInterrupt):
        judge_reading(Unreadable(lambda: _raise(KeyboardInterrupt())), _bench())  # type: ignore[arg-type]


def test_a_task_without_a_file_is_a_result_too() -> None:
    task = Task("folder", "C-9", "compounds/C-9/record.yaml", "/nowhere/record.yaml", "/nowhere")
    result = judge_task(task, _bench())
    assert (result.compound, result.verdict) == ("C-9", Verdict.UNASSESSED)
    assert [finding.rule for finding in result.findings] != [TOOL_FAULT]


def test_time_limit_ends_a_loop_and_restores_the_signal() -> None:
    import signal

    before = signal.getsignal(signal.SIGALRM)
    with pytest.raises(OutOfTimeError), time_limit(0.02):
        _run_on()
    assert signal.getsignal(signal.SIGALRM) is before
    with time_limit(0):
        pass


def test_registry_decides_which_spectra_are_required() -> None:
    plain, strict = make_bench(RunSettings(TODAY)), make_bench(RunSettings(TODAY, required=("1H", "13C")))
    assert strict.rulebook.policy.required == ("1H", "13C")
    assert strict.rulebook.digest != plain.rulebook.digest
    same = make_bench(RunSettings(TODAY, required=plain.rulebook.policy.required))
    assert same.rulebook == plain.rulebook
