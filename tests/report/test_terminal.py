"""What a person sees: words and shapes beside colours, places that editors jump to, widths that hold."""

from __future__ import annotations

import io
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from rich.console import Console

from verify.engine.run import gate_folder
from verify.findings.finding import Deviation, Level
from verify.findings.location import Place
from verify.findings.result import Verdict
from verify.report.terminal import ALL_ROWS, MOST_FINDINGS, MOST_ROWS, print_run
from verify.report.words import COLOURS, MARKS, PLAIN_MARKS, short_place

EXAMPLE = Path(__file__).parents[2] / "registry_example"
Make = Callable[..., Any]


def _printed(run: Any, width: int = 100, *, notes: bool = False, **how: Any) -> str:
    file = how.pop("file", io.StringIO())
    print_run(Console(file=file, width=width, highlight=False, markup=False, **how), run, notes=notes)
    return file.getvalue() if isinstance(file, io.StringIO) else ""


def test_every_verdict_has_its_own_word_shape_and_colour() -> None:
    for table in (MARKS, PLAIN_MARKS, COLOURS):
        assert set(table) == set(Verdict)
        assert len(set(table.values())) == len(Verdict)


def test_row_finding_and_sum(make_finding: Make, make_record: Make, make_run: Make) -> None:
    run = make_run(make_record("C-1", make_finding("water-listed", Level.ERROR)), make_record("C-2"))
    text = _printed(run)
    row, other = text.splitlines()[1:3]
    assert row.split() == ["■", "contradicted", "C-1", "1", "water-listed", "compounds/C-1/record.yaml:9:14"]
    assert other.split() == ["○", "consistent", "C-2"]
    assert "\nreg/compounds/C-1/record.yaml:9:14: error water-listed: 8.38 fits OCH3 poorly\n" in text
    assert "    Check the digits. (0123456789abcdef)" in text
    assert "2 records: ○ 1 consistent, ■ 1 contradicted. Policy registration: the gate holds 1 record." in text


def test_notes_are_shown_only_if_asked_for(make_finding: Make, make_record: Make, make_run: Make) -> None:
    run = make_run(make_record("C-1", make_finding("shift-digits", Level.NOTE)))
    assert "shift-digits" not in _printed(run)
    assert ": note shift-digits: " in _printed(run, notes=True)


def test_notices_about_the_registry_are_always_shown(make_finding: Make, make_record: Make, make_run: Make) -> None:
    notice = make_finding("deviation-unmatched", Level.NOTE, place=None)
    text = _printed(make_run(make_record(), notices=(notice,)))
    assert "\nnote deviation-unmatched: " in text


def test_an_accepted_finding_is_named_but_does_not_stand(
    make_finding: Make, make_record: Make, make_run: Make, deviation: Deviation
) -> None:
    text = _printed(make_run(make_record("C-1", make_finding("group-cut", Level.ERROR, deviation=deviation))))
    assert "○ consistent  C-1" in text
    assert "group-cut" in text
    assert "accepted until 2027-01-01" in text
    assert "; 1 finding accepted by deviation. Policy registration: the gate is clear." in text
    assert ": error" not in text


@pytest.mark.parametrize("width", [80, 100, 140])
def test_the_table_keeps_to_the_width_and_loses_no_place(width: int) -> None:
    run = gate_folder(str(EXAMPLE / "incoming"), today="2026-12-01")
    rows = _printed(run, width).split("\n\n")[0].splitlines()
    assert len(rows) == len(run.records) + 1
    assert max(map(len, rows)) <= width
    found = [row for row in rows if "record.yaml" in row]
    assert len(found) == sum(any(record.standing(level) for level in list(Level)[:2]) for record in run.records)
    assert all(row.split("record.yaml:")[1].split()[0].count(":") == 1 for row in found)


def test_large_registries_show_what_is_not_consistent(
    make_finding: Make, make_record: Make, make_run: Make
) -> None:
    queried = make_record("C-Q", make_finding())
    text = _printed(make_run(*(make_record(f"C-{n}") for n in range(ALL_ROWS)), queried))
    assert "C-Q" in text
    assert "C-5" not in text
    assert f"({ALL_ROWS} consistent records not shown)" in text


def test_very_many_findings_are_cut_with_a_word(make_finding: Make, make_record: Make, make_run: Make) -> None:
    contradicted = make_record("C-LAST", make_finding("water-listed", Level.ERROR))
    run = make_run(*(make_record(f"C-{n}", make_finding()) for n in range(MOST_FINDINGS + 9)), contradicted)
    text = _printed(run)
    assert "and 10 more; --json FILE writes all of them" in text
    assert "contradicted  C-LAST" in text
    assert text.count(" queried ") <= MOST_ROWS


def test_no_line_begins_with_text_of_a_record_or_moves_the_cursor(
    make_finding: Make, make_record: Make, make_run: Make
) -> None:
    nasty = "::error::gone\n::warning::\x1b[2J\x07\r"
    finding = make_finding(message=nasty, remedy=nasty, place=Place(nasty, 1, 1, 1, 1))
    text = _printed(make_run(make_record(nasty, finding, because=nasty)))
    assert not {"\x1b", "\x07", "\r"} & set(text)
    assert not any(line.startswith("::w") for line in text.splitlines())


def test_colours_only_on_a_terminal_and_never_against_no_color(
    make_record: Make, make_run: Make, monkeypatch: pytest.MonkeyPatch
) -> None:
    run = make_run(make_record())
    monkeypatch.delenv("NO_COLOR", raising=False)
    assert "\x1b[" not in _printed(run)
    assert "38;2;0;158;115" in _printed(run, force_terminal=True, color_system="truecolor")
    monkeypatch.setenv("NO_COLOR", "1")
    assert "38;2" not in _printed(run, force_terminal=True, color_system="truecolor")


def test_shapes_give_way_where_the_encoding_has_none(make_record: Make, make_run: Make) -> None:
    raw = io.BytesIO()
    file = io.TextIOWrapper(raw, encoding="ascii")
    _printed(make_run(make_record()), file=file)
    file.flush()
    assert b"o consistent" in raw.getvalue()


@pytest.mark.parametrize(
    ("room", "expected"),
    [(40, "compounds/C-1/record.yaml:9:14"), (27, "…/C-1/record.yaml:9:14"), (18, "…/record.yaml:9:14"), (9, "…:9:14")],
)
def test_places_shorten_from_the_left(room: int, expected: str) -> None:
    assert short_place(Place("reg/compounds/C-1/record.yaml", 9, 14, 9, 18), "reg/", room) == expected


def test_no_place_no_words() -> None:
    assert short_place(None, "reg", 40) == ""
