"""A run in the terminal: a table of verdicts, the findings with their places, and the sum.

No line begins with text of a record, so that nothing typed there is taken for a command by what reads the log.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

from rich.console import Console
from rich.table import Table
from rich.text import Text

from verify.findings.finding import Finding, Level
from verify.findings.location import Place
from verify.findings.result import RecordResult, Verdict
from verify.findings.run import RunResult
from verify.report.words import (
    CAUTION,
    COLOURS,
    LEVEL_COLOURS,
    MARKS,
    PLAIN_MARKS,
    counted,
    gravest,
    place_words,
    printable,
    short_place,
)

ALL_ROWS = 100  # registries up to this size are shown whole, larger ones without what is consistent
MOST_ROWS = 400
MOST_FINDINGS = 500
FIXED_WIDTH = 27  # verdict, number of findings and the gaps between the columns
LONGEST_ID = 24
SHORTEST_PLACE = 12
FEWEST_WORDS = 24  # characters of a message worth showing in the table


def print_run(console: Console, run: RunResult, *, notes: bool = False) -> None:
    """Table, findings (notes only if asked for) and sum of a run."""
    rows = _rows(run.records)
    if rows:
        console.print(_table(console, run, rows))
    left_out = len(run.records) - len(rows)
    consistent = run.counts[Verdict.CONSISTENT] if left_out else 0
    if left_out > consistent:
        console.print(f"({counted(left_out, 'record')} not shown, none of them more serious)", style="dim")
    elif left_out:
        console.print(f"({counted(left_out, 'consistent record')} not shown)", style="dim")
    _print_findings(console, list(_shown(run, notes)))
    console.print()
    console.print(_sum(console, run), soft_wrap=True)
    console.print(CAUTION, style="dim", soft_wrap=True)


def print_finding(console: Console, finding: Finding) -> None:
    """``file:line:column: level rule: message``, and below it what to do and the fingerprint."""
    place = place_words(finding.place)
    line = Text(f"{place}: " if place else "")
    line.append(str(finding.level), style=f"bold {LEVEL_COLOURS[finding.level]}")
    line.append(f" {finding.rule}: ", style="bold")
    line.append(printable(finding.message))
    console.print(line, soft_wrap=True)
    console.print(
        Text(f"    {printable(finding.remedy)} ({finding.fingerprint})", style="dim"), soft_wrap=True
    )


def verdict_text(console: Console, verdict: Verdict) -> Text:
    """The verdict with its shape and colour."""
    return Text(f"{marks_of(console)[verdict]} {verdict}", style=COLOURS[verdict])


def marks_of(console: Console) -> Mapping[Verdict, str]:
    """Shapes, or plain characters where the terminal's encoding has no shapes."""
    try:
        "".join(MARKS.values()).encode(console.encoding)
    except (UnicodeEncodeError, LookupError):
        return PLAIN_MARKS
    return MARKS


def _rows(records: Sequence[RecordResult]) -> list[RecordResult]:
    """What fits: everything, or what is not consistent, the gravest kept where even that is too much."""
    if len(records) <= ALL_ROWS:
        return list(records)
    rows = [record for record in records if record.verdict is not Verdict.CONSISTENT]
    if len(rows) <= MOST_ROWS:
        return rows
    order = (Verdict.CONTRADICTED, Verdict.UNASSESSED, Verdict.QUERIED)
    return [record for verdict in order for record in rows if record.verdict is verdict][:MOST_ROWS]


def _table(console: Console, run: RunResult, rows: Sequence[RecordResult]) -> Table:
    """Rule and place of the gravest finding; its message too, where the terminal is wide enough."""
    marks = marks_of(console)
    firsts = [_first(record) for record in rows]
    longest_id = min(max(len("compound"), *(len(record.compound) for record in rows)), LONGEST_ID)
    longest_rule = max(len("first finding"), *(len(first.rule) for first in firsts))
    room = max(console.width - FIXED_WIDTH - longest_id - longest_rule, SHORTEST_PLACE)
    places = [first.note or short_place(first.place, run.source, room) for first in firsts]
    left = room - max(len("where"), *(len(place) for place in places)) - 2
    table = Table(box=None, pad_edge=False, show_edge=False, header_style="bold")
    table.add_column("verdict", no_wrap=True)
    table.add_column("compound", no_wrap=True, overflow="ellipsis", max_width=LONGEST_ID)
    table.add_column("found", justify="right", no_wrap=True)
    table.add_column("first finding", no_wrap=True, overflow="ellipsis", style="bold")
    table.add_column("where", no_wrap=True, overflow="ellipsis")
    if left > FEWEST_WORDS:
        table.add_column("", no_wrap=True, overflow="ellipsis", width=left)
    for record, first, place in zip(rows, firsts, places, strict=True):
        found = len(record.standing(Level.ERROR)) + len(record.standing(Level.WARNING))
        verdict = Text(f"{marks[record.verdict]} {record.verdict}", style=COLOURS[record.verdict])
        cells = (verdict, printable(record.compound), str(found or ""), first.rule, place)
        table.add_row(*cells, *((first.message,) if left > FEWEST_WORDS else ()))
    return table


@dataclass(frozen=True, slots=True)
class _First:
    """What the table says of a record; ``note`` stands for the place where nothing speaks."""

    rule: str = ""
    place: Place | None = None
    message: str = ""
    note: str = ""


def _first(record: RecordResult) -> _First:
    """The gravest standing finding; where there is none, the deviation that accepts one."""
    finding = gravest(record)
    if finding is not None:
        return _First(finding.rule, finding.place, printable(finding.message))
    for accepted in record.findings:
        if accepted.deviation is not None:
            return _First(accepted.rule, note=f"accepted until {accepted.deviation.expires_on}")
    return _First(message=printable(record.unassessed_because))


def _shown(run: RunResult, notes: bool) -> Iterator[Finding]:
    """What stands; notes about records only if asked for, those about the registry always, for they are few."""
    yield from (notice for notice in run.notices if notice.stands)
    for record in run.records:
        yield from (f for f in record.findings if f.stands and (notes or f.level is not Level.NOTE))


def _print_findings(console: Console, shown: Sequence[Finding]) -> None:
    if shown:
        console.print()
    for finding in shown[:MOST_FINDINGS]:
        print_finding(console, finding)
    if len(shown) > MOST_FINDINGS:
        console.print(
            f"... and {len(shown) - MOST_FINDINGS} more; --json FILE writes all of them", style="dim"
        )


def _sum(console: Console, run: RunResult) -> Text:
    text = Text(f"{counted(len(run.records), 'record')}: ")
    parts = [(verdict, number) for verdict, number in run.counts.items() if number]
    for number, (verdict, count) in enumerate(parts):
        text.append(", " if number else "")
        text.append(f"{marks_of(console)[verdict]} {count} {verdict}", style=COLOURS[verdict])
    accepted = run.accepted
    text.append(f"; {counted(accepted, 'finding')} accepted by deviation" if accepted else "")
    held = len(run.held)
    gate = "the gate is clear" if run.is_clear else f"the gate holds {counted(held, 'record')}"
    text.append(f". Policy {run.policy}: {gate}.")
    return text
