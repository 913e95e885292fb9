"""The Markdown summary: bounded, and proof against what a record may hold."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from verify.findings.finding import Deviation, Level
from verify.report.markdown import LONGEST, write_markdown

Make = Callable[..., Any]


def test_title_counts_and_rows(make_finding: Make, make_record: Make, make_run: Make) -> None:
    held = make_record("C-1", make_finding("water-listed", Level.ERROR))
    text = write_markdown(make_run(held, make_record("C-2"), make_record("C-3", because="no list")))
    assert text.startswith("## Peak lists against structures: the gate holds 2 records\n")
    assert "3 records of R under policy registration: ○ 1 consistent, ■ 1 contradicted, △ 1 unassessed." in text
    row = "| C-1 | error | water-listed | 8.38 fits OCH3 poorly | reg/compounds/C-1/record.yaml:9:14 |"
    assert row in text.splitlines()
    assert "- △ C-3 unassessed: no list" in text


def test_clear_gate_without_rows(make_finding: Make, make_record: Make, make_run: Make, deviation: Deviation) -> None:
    notes = make_record("C-1", make_finding(level=Level.NOTE), make_finding(deviation=deviation))
    text = write_markdown(make_run(notes))
    assert "the gate is clear" in text
    assert "| level |" not in text
    assert "1 finding accepted by deviation." in text


def test_length_is_bounded_and_the_rest_counted(make_finding: Make, make_record: Make, make_run: Make) -> None:
    records = [make_record(f"C-{n}", make_finding(message="x" * 300), because="y" * 900) for n in range(600)]
    text = write_markdown(make_run(*records))
    assert len(text) <= LONGEST
    shown = sum(line.startswith("| C-") for line in text.splitlines())
    assert f"| {600 - shown} more findings in the JSON report | |" in text
    assert "- and 550 more" in text


def test_text_of_a_record_is_no_markup(make_finding: Make, make_record: Make, make_run: Make) -> None:
    nasty = "a|b <img src=x> [l](http://h) `c`\n# head *b* C[C@H](O)C ~~s~~ \x1b[31m"
    text = write_markdown(make_run(make_record("C-1", make_finding(message=nasty))))
    (row,) = (line for line in text.splitlines() if line.startswith("| C-1"))
    assert row.replace("\\|", "").count("|") == 6
    assert "\\<img" in row
    assert "\\[l\\](" in row
    assert "@H" not in row
    assert "\x1b" not in text
