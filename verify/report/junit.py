"""The report as JUnit XML, for CI systems that show test results: one case a record, held records as failures."""

from __future__ import annotations

import re
from xml.etree import ElementTree

from verify.findings.finding import Finding, Level
from verify.findings.result import RecordResult, Verdict
from verify.findings.run import RunResult
from verify.report.words import place_words

# Characters that XML 1.0 does not allow (W3C, section 2.2).
_FORBIDDEN = re.compile("[^\t\n\r\u0020-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")


def _plain(text: str) -> str:
    return _FORBIDDEN.sub("\ufffd", text)


def _line(finding: Finding) -> str:
    place = place_words(finding.place)
    return f"{place + ': ' if place else ''}{finding.level} {finding.rule}: {finding.message}"


def write_junit(run: RunResult) -> str:
    """The XML text. Held records are failures, unassessed ones errors; findings of others stand in their output."""
    suite = ElementTree.Element("testsuite", name=_plain(run.registry or run.source), tests=str(len(run.records)))
    failures = errors = 0
    for record in run.records:
        case = _case(record)
        held = record.verdict in run.holds
        lines = [_line(f) for f in record.findings if f.stands and f.level is not Level.NOTE]
        if held:
            kind = "error" if record.verdict is Verdict.UNASSESSED else "failure"
            failures += kind == "failure"
            errors += kind == "error"
            message = record.unassessed_because or (lines[0] if lines else str(record.verdict))
            told = ElementTree.SubElement(case, kind, type=str(record.verdict), message=_plain(message))
            told.text = _plain("\n".join(lines))
        elif lines:
            ElementTree.SubElement(case, "system-out").text = _plain("\n".join(lines))
        suite.append(case)
    suite.set("failures", str(failures))
    suite.set("errors", str(errors))
    ElementTree.indent(suite)
    return '<?xml version="1.0" encoding="UTF-8"?>\n' + ElementTree.tostring(suite, encoding="unicode") + "\n"


def _case(record: RecordResult) -> ElementTree.Element:
    named = {"name": _plain(record.compound), "classname": "peakwitness", "file": _plain(record.file)}
    return ElementTree.Element("testcase", named)
