"""JUnit XML: one case a record, counts that agree, text that cannot break the XML."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any
from xml.etree import ElementTree

from verify.findings.finding import Level
from verify.report.junit import write_junit

Make = Callable[..., Any]


def test_held_records_are_failures(make_finding: Make, make_record: Make, make_run: Make) -> None:
    error = make_finding(level=Level.ERROR, message="8.38 & <b> \x00 fits poorly")
    records = (make_record("C-1", error), make_record("C-2", make_finding()), make_record("C-3"))
    suite = ElementTree.fromstring(write_junit(make_run(*records)).encode())
    assert (suite.get("tests"), suite.get("failures"), suite.get("errors")) == ("3", "1", "0")
    first, second, third = suite.findall("testcase")
    failure = first.find("failure")
    assert failure is not None
    assert "8.38 & <b> \ufffd fits poorly" in (failure.text or "")
    assert second.find("failure") is None
    assert "shift-unlikely" in (second.findtext("system-out") or "")
    assert list(third) == []
