"""A list written in a journal's order and read again says the same."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from verify.cli.main import main
from verify.findings.location import Span
from verify.peaklist.model import Coupling, Multiplicity, PeakList, Signal
from verify.peaklist.stage import read_peak_list
from verify.peaklist.styles import STYLES, differences, render, values

TEXT = (
    "1H NMR (400 MHz, CDCl3) δ 1.26 (t, J = 7.1 Hz, 3H), 4.12 (q, J = 7.1 Hz, 2H, OCH2), 7.30-7.21 (m, 5H), "
    "6.91 (dd, J = 8.4, 2.0 Hz, 1H), 5.30 (br s, 1H, OH)"
)


@pytest.mark.parametrize(
    ("style", "written"),
    [
        (
            "acs",
            "1H NMR (400 MHz, CDCl3) δ 7.30–7.21 (m, 5H), 6.91 (dd, J = 8.4, 2.0 Hz, 1H), 5.30 (br s, 1H, OH), "
            "4.12 (q, J = 7.1 Hz, 2H, OCH2), 1.26 (t, J = 7.1 Hz, 3H).",
        ),
        (
            "rsc",
            "δH (400 MHz; CDCl3) 7.30–7.21 (5 H, m), 6.91 (1 H, dd, J 8.4 and 2.0), 5.30 (1 H, br s, OH), "
            "4.12 (2 H, q, J 7.1, OCH2), 1.26 (3 H, t, J 7.1).",
        ),
        (
            "wiley",
            "1H NMR (400 MHz, CDCl3): δ = 7.30–7.21 (m, 5H), 6.91 (dd, J = 8.4, 2.0 Hz, 1H), 5.30 (br s, 1H; OH), "
            "4.12 (q, J = 7.1 Hz, 2H; OCH2), 1.26 (t, J = 7.1 Hz, 3H) ppm.",
        ),
    ],
)
def test_each_style(style: str, written: str) -> None:
    peaks = read_peak_list(TEXT)
    assert render(peaks, style) == written
    again = read_peak_list(written, "1H")
    assert values(again) == values(peaks)
    assert (again.field_mhz, again.solvent) == (400.0, "CDCl3")


LETTERS = {"s": (1,), "d": (2,), "t": (3,), "q": (4,), "dd": (2, 2), "dt": (2, 3), "quint": (5,), "sept": (7,)}


@st.composite
def signals(draw: st.DrawFn) -> Signal:
    letters = draw(st.sampled_from([*LETTERS, "m"]))
    low = draw(st.integers(-50, 1300)) / 100
    high = low + (draw(st.integers(0, 30)) / 100 if letters == "m" else 0)
    kind = Multiplicity("multiplet", (), "m", "m") if letters == "m" else Multiplicity("first-order", LETTERS[letters], letters, letters)
    wanted = 0 if letters in "sm" else len(LETTERS[letters])
    js = tuple(Coupling(draw(st.integers(5, 180)) / 10, 1) for _ in range(wanted))
    return Signal(low, round(high, 2), 2, Span(0, 1), kind, js, float(draw(st.integers(1, 9))))


@settings(max_examples=150, deadline=None)
@given(st.lists(signals(), min_size=1, max_size=12), st.sampled_from(list(STYLES)), st.booleans())
def test_what_is_written_is_read_again(found: list[Signal], style: str, ascending: bool) -> None:
    peaks = PeakList("1H", "", tuple(found), field_mhz=400.0, solvent="CDCl3")
    again = read_peak_list(render(peaks, style, ascending), "1H")
    assert differences(peaks, again) == 0
    assert again.problems == ()


def test_the_command_refuses_to_lose_something(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["restyle", TEXT, "--style", "rsc"]) == 0
    assert capsys.readouterr().out.startswith("δH (400 MHz; CDCl3) 7.30–7.21 (5 H, m)")
    assert main(["restyle", "δ 4.15 (q, J = 7.1 Hz, xH), 1.26 (t, J = 7.1 Hz, 3H)"]) == 1
    assert "not rewritten" in capsys.readouterr().err
    assert main(["restyle", "no list at all"]) == 2
