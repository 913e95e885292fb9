"""From a result to the exit status of the command."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from verify.findings.finding import Level
from verify.report.exit_status import BROKEN, CLEAR, HELD, status_of_record, status_of_run

Make = Callable[..., Any]


def test_clear_unless_the_policy_holds_a_record(make_finding: Make, make_record: Make, make_run: Make) -> None:
    queried = make_record("C-1", make_finding())
    assert status_of_run(make_run(queried)) == CLEAR
    assert status_of_run(make_run(queried, holds=("queried",))) == HELD
    assert status_of_run(make_run(make_record("C-1", make_finding(level=Level.ERROR)))) == HELD
    assert status_of_run(make_run(make_record("C-1", because="no list"))) == HELD
    assert status_of_run(make_run()) == CLEAR


def test_an_error_about_the_registry_holds_the_gate(make_finding: Make, make_run: Make) -> None:
    assert status_of_run(make_run(notices=(make_finding(level=Level.NOTE),))) == CLEAR
    assert status_of_run(make_run(notices=(make_finding(level=Level.ERROR),))) == HELD


def test_a_fault_of_the_tool_outranks_what_was_found(make_finding: Make, make_record: Make, make_run: Make) -> None:
    broken = make_record("C-1", make_finding("tool-fault"), because="the tool broke")
    held = make_record("C-2", make_finding(level=Level.ERROR))
    assert status_of_run(make_run(held, broken)) == BROKEN
    assert status_of_record(broken, ()) == BROKEN
    assert status_of_record(held, ("contradicted",)) == HELD
    assert status_of_record(held, ()) == CLEAR
