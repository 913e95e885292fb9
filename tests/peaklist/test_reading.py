"""Lists as chemists type them: what must be read out of each habit (common practice; forms seen in open journals)."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from verify.peaklist.model import PeakList
from verify.peaklist.normalise import plain
from verify.peaklist.stage import read_peak_list, read_signals


def shape(peaks: PeakList) -> list[tuple[float, float, str, tuple[float, ...], float | None]]:
    return [
        (s.low, s.high, s.multiplicity.letters if s.multiplicity else "", tuple(c.value for c in s.couplings), s.nuclei)
        for s in peaks.signals
    ]


ETHYL = [(4.12, 4.12, "q", (7.1,), 2.0), (1.26, 1.26, "t", (7.1,), 3.0)]


@pytest.mark.parametrize(
    "text",
    [
        "δ 4.12 (q, J = 7.1 Hz, 2H), 1.26 (t, J = 7.1 Hz, 3H)",  # order of the American Chemical Society
        "δH (400 MHz; CDCl3) 4.12 (2 H, q, J 7.1, CH2), 1.26 (3 H, t, J 7.1, CH3)",  # of the Royal Society of Chemistry
        "δ = 4.12 (q, J = 7.1 Hz, 2H; OCH2), 1.26 ppm (t, J = 7.1 Hz, 3H; CH3)",  # of German journals
        "1H NMR (400 MHz, CDCl3): 4.12 (q, 3J(H,H) = 7.1 Hz, 2 H), 1.26 (t, ³JHH = 7.1 Hz, 3 H).",
        "1H-NMR (d6-DMSO, 400 MHz) δ: 4.12(2H,q,J=7.1Hz,OCH2);1.26(3H,t,J=7.1Hz,CH3)",
        "4.12 (quartet, 2H, J = 7.1 Hz) and 1.26 (triplet, 3H, J = 7.1 Hz)",
        "4,12 (q, J = 7,1 Hz, 2H); 1,26 (t, J = 7,1 Hz, 3H)",
        "δ 4.12, q, J = 7.1 Hz, 2H; 1.26, t, J = 7.1 Hz, 3H",
        "<i>δ</i> 4.12 (q, <i>J</i> = 7.1 Hz, 2H), 1.26 (t, <i>J</i> = 7.1 Hz, 3H)",
        "$\\delta$ 4.12 (q, $J$ = 7.1 Hz, 2H), 1.26 (t, $J$ = 7.1 Hz, 3H)",
        "δ 4.l2 (q, J = 7.1 Hz, 2H), 1.26 (t, J = 7.1 Hz, 3H)",
        "4.12 [q, J = 7.1 Hz, 2H], 1.26 [t, J = 7.1 Hz, 3H]",
    ],
)
def test_every_order_says_the_same(text: str) -> None:
    peaks = read_peak_list(text, "1H")
    assert shape(peaks) == ETHYL
    assert peaks.problems == ()


@pytest.mark.parametrize(
    ("text", "letters", "broad", "apparent"),
    [
        ("br s", "s", True, False), ("bs", "s", True, False), ("brs", "s", True, False), ("s (br)", "s", True, False),
        ("br. s.", "s", True, False), ("br", "s", True, False), ("app t", "t", False, True), ("app. td", "td", False, True),
        ("pseudo t", "t", False, True), ("br d", "d", True, False), ("quin", "quint", False, False),
        ("p", "quint", False, False), ("pent", "quint", False, False), ("sx", "sext", False, False),
        ("hept", "sept", False, False), ("d.d", "dd", False, False), ("d of d", "dd", False, False),
        ("doublet of triplets", "dt", False, False), ("AA'BB'", "AA'BB'", False, False), ("ABq", "ABq", False, False),
        ("m", "m", False, False), ("M", "m", False, False), ("multiplet", "m", False, False), ("dm", "m", False, False),
        ("ddt", "ddt", False, False), ("dquint", "dquint", False, False),
    ],
)  # fmt: skip
def test_multiplicities(text: str, letters: str, broad: bool, apparent: bool) -> None:
    signal = read_peak_list(f"δ 3.21 ({text}, 2H)", "1H").signals[0]
    assert signal.multiplicity is not None
    assert (signal.multiplicity.letters, signal.multiplicity.broad, signal.multiplicity.apparent) == (letters, broad, apparent)
    assert signal.nuclei == 2.0


@pytest.mark.parametrize(
    ("details", "couplings"),
    [
        ("dd, J = 8.4, 2.1 Hz, 1H", (8.4, 2.1)), ("dd, J1 = 8.4 Hz, J2 = 2.1 Hz, 1H", (8.4, 2.1)),
        ("dd, J = 8.4 and 2.1 Hz, 1H", (8.4, 2.1)), ("dd, J = 8.4 Hz, J = 2.1 Hz, 1H", (8.4, 2.1)),
        ("dd, 2J = 8.4, 3J = 2.1, 1H", (8.4, 2.1)), ("d, 8.4 Hz, 1H", (8.4,)), ("d, J = 8.7 Hz, 1H, 3',5'-H", (8.7,)),
        ("d, J = 8 Hz, 1H, H-5", (8.0,)), ("d, J5,6 = 7.7 Hz, 1H", (7.7,)), ("dd, J = 9.5/2.3 Hz, 1H", (9.5, 2.3)),
        ("s, 1H", ()),
    ],
)  # fmt: skip
def test_couplings(details: str, couplings: tuple[float, ...]) -> None:
    signal = read_peak_list(f"7.12 ({details})", "1H").signals[0]
    assert tuple(c.value for c in signal.couplings) == couplings
    assert signal.nuclei == 1.0


def test_partner_of_a_coupling() -> None:
    peaks = read_peak_list("δ 161.3 (d, 1JC–F = 242.3 Hz), 115.8 (d, J = 21.6 Hz)", "13C")
    assert [c.partner for s in peaks.signals for c in s.couplings] == ["C-F", ""]


@pytest.mark.parametrize(
    ("text", "nuclei"),
    [
        ("s, 3H, 13-CH3", 3.0), ("m, 5H, 3CH+NH2", 5.0), ("2 x 3H, s", 6.0), ("s, 3H x 2", 6.0), ("s, 6H, 2 × OCH3", 6.0),
        ("s, 0.6H", 0.6), ("s, H, NH", 1.0), ("1H, s, 1-H", 1.0), ("m, 2H, 6-H2", 2.0), ("t, 2H, H5", 2.0), ("s, ~1H", 1.0),
        ("s, OCH3", None),
    ],
)  # fmt: skip
def test_counts(text: str, nuclei: float | None) -> None:
    assert read_peak_list(f"3.80 ({text})", "1H").signals[0].nuclei == nuclei


def test_carbon_lists() -> None:
    text = "13C NMR (101 MHz, CDCl3) δ 170.2 (C=O), 128.4 (2C), 127.9 (CH), 60.1 (CH2, OCH2), 29.39–28.81 (3 CH2), 14.1 (CH3)"
    peaks = read_peak_list(text)
    assert peaks.nucleus == "13C"
    assert [s.low for s in peaks.signals] == [170.2, 128.4, 127.9, 60.1, 28.81, 14.1]
    assert [s.attached_h for s in peaks.signals] == [None, None, 1, 2, 2, 3]
    assert [s.nuclei for s in peaks.signals] == [None, 2.0, None, None, 3.0, None]


def test_negative_shifts_keep_their_sign() -> None:
    assert [s.low for s in read_peak_list("19F NMR (376 MHz, CDCl3) δ –62.5 (s), -113.2 (m)").signals] == [-62.5, -113.2]
    assert read_peak_list("δ –0.12 (s, 9H)", "1H").signals[0].low == -0.12


def test_the_head_of_the_text() -> None:
    peaks = read_peak_list("1H NMR (600 MHz, Chloroform-d, 298 K) δ 8.93 (s, 1H)")
    assert (peaks.nucleus, peaks.field_mhz, peaks.solvent, peaks.temperature_k) == ("1H", 600.0, "CDCl3", 298.0)


@pytest.mark.parametrize(
    ("text", "code", "marked"),
    [
        ("δ 4.15 (q, J = 7.1 Hz, xH), 1.26 (t, 3H)", "nuclei-unreadable", "xH"),
        ("δ 4.15 (q, J = 7.1 Hz, 0H)", "nuclei-impossible", "0H"),
        ("δ 4.15 (q, 1000000000H)", "nuclei-impossible", "1000000000H"),
        ("in agreement with the literature", "list-no-number", "in agreement with the literature"),
        ("", "list-empty", ""),
        ("δ 775.2 (s, 1H), 2.1 (s, 3H)", "shift-impossible", "775.2"),
        ("δ 1.78 (dd, J = 18.0, 7.8 Hz, 1.64 (s, 3H), 1.52 (s, 3H)", "bracket-open", "("),
        ("δ 7.2 (d, J = , 1H)", "coupling-unreadable", "J ="),
    ],
)
def test_what_cannot_be_read_has_a_place(text: str, code: str, marked: str) -> None:
    problems = {p.code: p for p in read_peak_list(text, "1H").problems}
    assert code in problems
    span = problems[code].locus.span
    assert span is not None
    assert text[span.start : span.end].strip() == marked


def test_the_rest_of_a_list_is_still_read() -> None:
    peaks = read_peak_list("δ 1.78 (dd, J = 18.0, 7.8 Hz, 1.64 (s, 3H), 1.52 (s, 3H)", "1H")
    assert [(s.low, s.nuclei) for s in peaks.signals] == [(1.78, None), (1.64, 3.0), (1.52, 3.0)]


def test_a_tale_is_no_list() -> None:
    tale = (
        "The ortho protons of the ring appear as doublets that have been seen at 6.86 and 7.16 ppm with a splitting of "
        "8.4 Hz, while the aliphatic proton has given its signal as a triplet at 4.27 ppm"
    )
    assert [p.code for p in read_peak_list(tale, "1H").problems] == ["list-prose"]


def test_structured_signals() -> None:
    entries = [{"shift": 4.12, "multiplicity": "q", "couplings": [7.1], "nuclei": 2}, {"low": 1.2, "high": 1.3, "nuclei": 3}]
    peaks = read_signals(entries, "1H", "/spectra/0/signals")
    assert shape(peaks) == [(4.12, 4.12, "q", (7.1,), 2.0), (1.2, 1.3, "", (), 3.0)]
    assert [peaks.text[s.span.start : s.span.end] for s in peaks.signals] == ["4.12 (q, J = 7.1 Hz, 2H)", "1.30-1.20 (3H)"]
    wrong = read_signals([{"multiplicity": "zz"}, {"shift": 1.0, "nuclei": 0}], "1H", "/spectra/0/signals")
    assert [(p.code, p.locus.pointer) for p in wrong.problems] == [
        ("shift-impossible", "/spectra/0/signals/0"),
        ("letters-unknown", "/spectra/0/signals/0/multiplicity"),
        ("nuclei-impossible", "/spectra/0/signals/1/nuclei"),
    ]


PIECES = st.sampled_from(
    ["7.26", " (", ")", "s", ", ", "J = ", "7.1 Hz", "2H", "–", "δ", "(", "m", "br ", "ppm", "13C NMR ", "x", "…", "\u2009", "1.", "; "]
)


@settings(max_examples=300, deadline=None)
@given(st.one_of(st.text(max_size=120), st.lists(PIECES, max_size=40).map("".join)), st.sampled_from(["1H", "13C", None]))
def test_any_text_is_read_without_a_fault(text: str, nucleus: str | None) -> None:
    peaks = read_peak_list(text, nucleus)
    assert peaks == read_peak_list(text, nucleus)
    assert len(plain(text)) == len(text)
    for signal in peaks.signals:
        assert 0 <= signal.span.start < signal.span.end <= len(text)
        assert signal.low <= signal.high
    for problem in peaks.problems:
        if problem.locus.span is not None:
            assert 0 <= problem.locus.span.start <= problem.locus.span.end <= len(text)
