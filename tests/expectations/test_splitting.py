"""Letters and J are priced as a spectroscopist would: free, a shrug, or a question."""

from __future__ import annotations

import pytest

from verify.expectations.coupling_table import coupling_table
from verify.expectations.model import CouplingBlock
from verify.expectations.pattern_search import CAP, place_partners
from verify.expectations.pattern_search import Letter as PatternLetter
from verify.expectations.pattern_search import Partner as PatternPartner
from verify.expectations.splitting import PatternPrice, accepted_splittings, price_pattern

Blocks = tuple[CouplingBlock, ...]


def partner(label: str, count: int, visibility: str = "required") -> CouplingBlock:
    row = coupling_table()[label]
    nucleus = "19F" if label.startswith("hf.") else "1H"
    return CouplingBlock(
        1, nucleus, count, row.low, row.high, row.typical, visibility, row.bonds, label, row.source
    )


METHYL_OF_ETHYL = (partner("hh.vicinal_ethyl", 2),)
METHYLENE_OF_ETHYL = (partner("hh.vicinal_ethyl", 3),)
MIDDLE_OF_PROPYL = (partner("hh.vicinal_ethyl", 3), partner("hh.vicinal_free_rotation", 2))
CH_OF_ISOPROPYL = (partner("hh.vicinal_isopropyl", 6),)
TRANS_CROTYL = (partner("hh.alkene_trans", 1), partner("hh.vinyl_CH_sp3CH", 3))
FREE_VINYL = (partner("hh.alkene_cis_or_trans", 1), partner("hh.alkene_cis_or_trans", 1),
              partner("hh.vinyl_CH_sp3CH", 2))
ARYL_CH = (partner("hh.benzene_ortho", 1), partner("hh.benzene_meta", 1, "optional"))
MIDDLE_ARYL = (partner("hh.benzene_ortho", 1), partner("hh.benzene_ortho", 1),
               partner("hh.benzene_meta", 1, "optional"))
FLUORO_ORTHO = (partner("hh.benzene_ortho", 1), partner("hf.aryl_ortho_3J", 1))
METHOXY: Blocks = ()
HALF_OF_CH2 = (partner("hh.geminal_sp3", 1), partner("hh.vicinal_CH2_CH", 1))


def price(blocks: Blocks, lines: tuple[int, ...], *js: float, **facts: object) -> PatternPrice:
    return price_pattern(blocks, lines, js, kind="first-order", **facts)  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("blocks", "lines", "js"),
    [
        (METHYL_OF_ETHYL, (3,), (7.1,)),
        (METHYL_OF_ETHYL, (3,), ()),
        (METHYLENE_OF_ETHYL, (4,), (7.1,)),
        (MIDDLE_OF_PROPYL, (6,), (7.4,)),
        (MIDDLE_OF_PROPYL, (4, 3), (7.5, 7.0)),
        (CH_OF_ISOPROPYL, (7,), (6.8,)),
        (TRANS_CROTYL, (2, 4), (15.5, 6.9)),
        (FREE_VINYL, (2, 2, 3), (17.0, 10.2, 6.7)),
        (ARYL_CH, (2,), (8.4,)),
        (ARYL_CH, (2, 2), (8.4, 2.0)),
        (MIDDLE_ARYL, (3,), (7.6,)),
        (MIDDLE_ARYL, (2, 2), (8.2, 7.1)),
        (MIDDLE_ARYL, (3, 2), (7.6, 1.5)),
        (MIDDLE_ARYL, (2, 2, 2), (8.2, 7.1, 1.4)),
        (FLUORO_ORTHO, (3,), (8.8,)),
        (METHOXY, (1,), ()),
        (HALF_OF_CH2, (2, 2), (13.4, 4.1)),
    ],
)
def test_what_anyone_would_write_is_nearly_free(blocks: Blocks, lines: tuple[int, ...], js: tuple[float, ...]) -> None:
    assert price(blocks, lines, *js).cost <= 0.3


@pytest.mark.parametrize(
    ("blocks", "lines", "js"),
    [
        (METHYLENE_OF_ETHYL, (1,), ()),
        (METHYLENE_OF_ETHYL, (2,), (7.1,)),
        (METHYLENE_OF_ETHYL, (4,), (13.1,)),
        (METHYL_OF_ETHYL, (2,), (7.1,)),
        (METHYL_OF_ETHYL, (1,), ()),
        (METHOXY, (3,), (7.1,)),
        (METHOXY, (2,), ()),
        (TRANS_CROTYL, (4,), (15.5,)),
        (TRANS_CROTYL, (2, 4), (7.0, 2.1)),
        (ARYL_CH, (1,), ()),
        (ARYL_CH, (4,), (7.0,)),
        (HALF_OF_CH2, (1,), ()),
        (MIDDLE_OF_PROPYL, (3,), (7.0,)),
    ],
)
def test_what_no_one_would_write_is_dear(blocks: Blocks, lines: tuple[int, ...], js: tuple[float, ...]) -> None:
    assert price(blocks, lines, *js).cost >= 2.5


def test_habits_of_authors_cost_a_shrug() -> None:
    # published habits, measured on 602 published lists: outer lines lost, doubled J, letters out of order
    assert 1.0 <= price(CH_OF_ISOPROPYL, (5,), 6.1).cost <= 1.6
    assert 1.0 <= price(CH_OF_ISOPROPYL, (2, 3), 13.8, 6.9).cost <= 1.6
    assert price(MIDDLE_OF_PROPYL, (2, 3), 13.9, 7.0).cost <= 1.6
    swapped = price(MIDDLE_ARYL, (2, 3), 1.5, 7.9)
    assert swapped.cost <= 0.3  # a small first J needs no swap: only the order of the letters is odd
    other_way = price((*MIDDLE_ARYL[:2], partner("hh.benzene_meta", 1, "optional")), (2, 3), 7.9, 1.5)
    assert other_way.swapped
    assert other_way.cost <= 1.0


def test_small_couplings_need_no_partner() -> None:
    assert price(ARYL_CH, (2, 2, 2), 8.3, 2.1, 0.5).cost <= 0.5
    assert price(METHYL_OF_ETHYL, (3, 2), 7.1, 1.0).cost == pytest.approx(1.2)
    assert price(METHYL_OF_ETHYL, (3, 2), 7.1, 5.0).cost > 3.0


def test_m_and_broad_singlets_say_little() -> None:
    for blocks in (METHOXY, MIDDLE_OF_PROPYL, ARYL_CH):
        assert price_pattern(blocks, (), (), kind="multiplet").cost == 0.25
        assert price(blocks, (1,), broad=True).cost <= 0.3


def test_broad_apparent_and_ranges_soften() -> None:
    plain = price(METHYLENE_OF_ETHYL, (2,), 7.1).cost
    assert price(METHYLENE_OF_ETHYL, (2,), 7.1, broad=True).cost == pytest.approx(0.6 * plain)
    assert price(METHYLENE_OF_ETHYL, (2,), 7.1, apparent=True).cost == pytest.approx(0.6 * plain)
    assert price(METHYLENE_OF_ETHYL, (2,), 7.1, is_range=True).cost == pytest.approx(0.7 * plain)


def test_overlapped_signals_are_recognised() -> None:
    # "7.57 (ddd, J = 26.3, 23.6, 7.9 Hz, 2H)": shift differences picked as couplings
    found = price(ARYL_CH, (2, 2, 2), 26.3, 23.6, 7.9, nuclei=2.0)
    assert found.overlap_reading
    assert found.impossible_js == (26.3, 23.6)
    assert found.cost <= 2.0
    alone = price(ARYL_CH, (2,), 38.4, nuclei=1.0)
    assert not alone.overlap_reading
    assert alone.impossible_js == (38.4,)
    assert alone.cost > 3.0


def test_merged_signal_may_hold_one_spurious_doublet() -> None:
    # "1.25 (dd, J = 9.6, 6.8 Hz, 6H)" for two methyl doublets of an isopropyl group
    methyl = (partner("hh.vicinal_isopropyl", 1),)
    assert price(methyl, (2, 2), 9.6, 6.8, nuclei=6.0, merged=True).cost <= 1.0
    assert price(methyl, (2, 2), 9.6, 6.8, nuclei=3.0).cost >= 3.0


def test_second_order_names_need_a_partner() -> None:
    assert price_pattern(HALF_OF_CH2, (), (), kind="second-order").cost < 1.0
    assert price_pattern(METHOXY, (), (), kind="second-order", nuclei=1.0).cost > 2.0


def test_missing_j_is_no_fault_of_the_letters() -> None:
    assert price(TRANS_CROTYL, (2, 4), 15.5).cost == price(TRANS_CROTYL, (2, 4)).cost == 0.0


ALL = [METHYL_OF_ETHYL, METHYLENE_OF_ETHYL, MIDDLE_OF_PROPYL, CH_OF_ISOPROPYL, TRANS_CROTYL, FREE_VINYL, ARYL_CH,
       MIDDLE_ARYL, FLUORO_ORTHO, METHOXY, HALF_OF_CH2]


@pytest.mark.parametrize("blocks", ALL)
def test_accepted_splittings_cost_their_penalty(blocks: Blocks) -> None:
    accepted = accepted_splittings(blocks)
    assert accepted[-1].letters == "m"
    assert len({s.lines for s in accepted}) == len(accepted)
    for splitting in accepted[:-1]:
        middle = [min(max(6.9, low), high) for low, high in splitting.j_windows]
        found = price(blocks, splitting.lines, *(middle if splitting.lines != (1,) else ()))
        assert found.cost <= splitting.penalty + 0.75
        assert splitting.penalty <= 2.0


def test_likeliest_pattern_stands_first() -> None:
    assert [accepted_splittings(b)[0].letters for b in (METHYLENE_OF_ETHYL, MIDDLE_OF_PROPYL, METHOXY, TRANS_CROTYL)] \
        == ["q", "sext", "s", "dq"]


def test_search_agrees_with_trying_everything() -> None:
    # exhaustive over single-nucleus partners: every map of partners to letters or to nothing
    partners = tuple(
        PatternPartner(1, low, high, left_out, seen, 2.2, n)
        for n, (low, high, left_out, seen) in enumerate(
            [(6.3, 9.8, 2.6, 0.0), (6.3, 9.8, 2.6, 0.0), (10.5, 18.8, 2.6, 0.0), (0.7, 3.3, 0.0, 0.05)]
        )
    )
    for letters in (((1, 8.0), (1, 15.0)), ((2, 7.0), (1, 1.5)), ((3, 8.0),), ((1, 2.0), (1, 8.0), (1, -1.0))):
        asked = tuple(PatternLetter(n, j, 12.0) for n, j in letters)
        assert place_partners(partners, asked).cost == pytest.approx(min(CAP, brute(partners, asked)))


def brute(partners: tuple[PatternPartner, ...], letters: tuple[PatternLetter, ...]) -> float:
    best = 1e9
    for code in range((len(letters) + 1) ** len(partners)):
        places = [code // (len(letters) + 1) ** n % (len(letters) + 1) for n in range(len(partners))]
        cost, room = 0.0, [x.partners for x in letters]
        spans = [(0.0, 1e9)] * len(letters)
        for one, place in zip(partners, places, strict=True):
            if place == len(letters):
                cost += one.left_out
                continue
            room[place] -= 1
            j, (low, high) = letters[place].j, spans[place]
            beyond = max(one.low - j, j - one.high) if j >= 0 else 0.0
            cost += one.seen + (min(0.9 + 0.9 * (beyond - 0.6), 6.0) if beyond > 0.6 else 0.0)
            cost += 2.4 if low - one.high > 0.6 or one.low - high > 0.6 else 0.0
            spans[place] = (max(low, one.low), min(high, one.high))
        if min(room) >= 0:
            best = min(best, cost + sum(min(3.2 * free, 12.0) for free in room))
    return best
