"""The typed text with marks under the characters a finding speaks of."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from verify.findings.location import Span
from verify.report.excerpt import excerpt

LIST = "4.12 (q, J = 7.1 Hz, 2H), 2.04 (s, 3H), 1.26 (t, J = 71 Hz, 3H)"


@pytest.mark.parametrize("width", [20, 40, 66, 200])
@pytest.mark.parametrize("part", ["4.12", "2.04", "71", "3H)"])
def test_marks_stand_below_the_part(part: str, width: int) -> None:
    start = LIST.rindex(part)
    line, marks = excerpt(LIST, Span(start, start + len(part)), width)
    begin, end = marks.index("^"), len(marks)
    assert line[begin:end] == part
    assert len(line) <= width


def test_both_ends_show_that_text_was_cut() -> None:
    line, _ = excerpt(LIST, Span(26, 30), 20)
    assert line.startswith("…")
    assert line.endswith("…")


def test_an_empty_span_still_has_a_mark() -> None:
    assert excerpt("abc", Span(3, 3), 20) == ("abc", "   ^")


def test_line_breaks_do_not_shift_the_marks() -> None:
    assert excerpt("ab\ncd\te", Span(3, 5), 20) == ("ab cd e", "   ^^")


@given(st.text(max_size=120), st.integers(-5, 130), st.integers(-5, 130), st.integers(10, 90))
def test_any_span_fits_the_width(text: str, start: int, end: int, width: int) -> None:
    line, marks = excerpt(text, Span(start, end), width)
    assert len(line) <= width
    assert len(marks) <= width + 1
    assert "^" in marks
