"""A summary in Markdown for a pull request or a lab journal, of bounded length."""

from __future__ import annotations

from collections.abc import Sequence

from verify.findings.finding import Finding, Level
from verify.findings.result import RecordResult, Verdict
from verify.findings.run import RunResult
from verify.report.words import CAUTION, MARKS, counted, place_words, printable

LONGEST = 60_000  # characters; comments of the usual code hosts hold 65,536
LONGEST_CELL = 400
_MARKUP = str.maketrans({"@": "@\u200b"} | {character: f"\\{character}" for character in "\\`*_[]<>|#~&"})


def write_markdown(run: RunResult) -> str:
    """What is held and why, then every standing error and warning in a table, cut where it grows too long."""
    head = [_title(run), "", _counts(run), ""]
    body = _held(run)
    rows = [row for finding in run.notices for row in _row("", finding)]
    rows += [
        row for record in run.records for finding in record.findings for row in _row(record.compound, finding)
    ]
    if rows:
        body += ["| compound | level | rule | finding | where |", "| --- | --- | --- | --- | --- |"]
        used = sum(len(line) + 1 for line in head + body) + len(CAUTION) + 200
        body += [*_fitting(rows, LONGEST - used), ""]
    return "\n".join([*head, *body, CAUTION, ""])


def _title(run: RunResult) -> str:
    words = "the gate is clear" if run.is_clear else f"the gate holds {counted(len(run.held), 'record')}"
    return f"## Peak lists against structures: {words}"


def _counts(run: RunResult) -> str:
    parts = ", ".join(
        f"{MARKS[verdict]} {number} {verdict}" for verdict, number in run.counts.items() if number
    )
    accepted = f" {counted(run.accepted, 'finding')} accepted by deviation." if run.accepted else ""
    named = _cell(run.registry or run.source)
    return f"{counted(len(run.records), 'record')} of {named} under policy {_cell(run.policy)}: {parts}.{accepted}"


def _held(run: RunResult) -> list[str]:
    """Records that could not be judged, with the reason; the others explain themselves in the table."""
    unassessed = [record for record in run.records if record.verdict is Verdict.UNASSESSED]
    lines = [_unassessed(record) for record in unassessed[:50]]
    if len(unassessed) > 50:
        lines.append(f"- and {len(unassessed) - 50} more")
    return [*lines, ""] if lines else []


def _unassessed(record: RecordResult) -> str:
    return (
        f"- {MARKS[record.verdict]} {_cell(record.compound)} unassessed: {_cell(record.unassessed_because)}"
    )


def _row(compound: str, finding: Finding) -> list[str]:
    if not finding.stands or finding.level is Level.NOTE:
        return []
    cells = (compound, str(finding.level), finding.rule, finding.message, place_words(finding.place))
    return ["| " + " | ".join(_cell(cell) for cell in cells) + " |"]


def _cell(text: str) -> str:
    """Text that cannot break a table, become markup or call a person."""
    plain = " ".join(printable(text).split())
    if len(plain) > LONGEST_CELL:
        plain = plain[: LONGEST_CELL - 1] + "…"
    return plain.translate(_MARKUP)


def _fitting(rows: Sequence[str], room: int) -> list[str]:
    kept: list[str] = []
    for number, row in enumerate(rows):
        room -= len(row) + 1
        if room < 0:
            return [*kept, f"| … | | | {counted(len(rows) - number, 'more finding')} in the JSON report | |"]
        kept.append(row)
    return kept
