"""Prices reported letters and J against the coupling partners of one environment, in nats.

A price of 0 to 1 is what a spectroscopist writes without a thought, 3 and more deserves a question.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from itertools import combinations, permutations

from verify.expectations.model import CouplingBlock
from verify.expectations.pattern_search import (
    CAP,
    GROUP_CUT,
    GROUP_CUT_DOUBTFUL,
    HIDDEN_SEEN,
    LEFT_OUT,
    LEFT_OUT_SMALL,
    OPTIONAL_SEEN,
    SMALL_DROPPED,
    SMALL_DROPPED_EXPLAINED,
    SMALL_J_HZ,
    SMALL_WINDOW_HZ,
    SPURIOUS,
    Letter,
    Partner,
    Placement,
    outside,
    place_partners,
)

MULTIPLET = 0.25
BROAD_SINGLET_FREE, BROAD_SINGLET_COUPLED = 0.1, 0.3
SECOND_ORDER_NAME, SECOND_ORDER_UNCOUPLED = 0.4, 2.5
SINGLET_START, SINGLET_EACH, SINGLET_CAP = 2.5, 2.2, 9.0
LINES_LOST = 1.5  # a septet written as a quintet: the outer lines drown in the noise
DOUBLED_J = 1.5  # "dt, J = 13.8, 6.9" for a septet-like pattern
SWAPPED = 0.7
EXTRA_J = 0.2
OVERLAPPED_FACTOR = 0.5  # what is left of the letters says less
BROAD_FACTOR, APPARENT_FACTOR, RANGE_FACTOR = 0.6, 0.6, 0.7
J_MARGIN_HZ, J_FLOOR_HZ = 2.0, 5.0
MAX_LETTERS, MAX_J_ORDERS = 5, 6
FREE_TO_CUT = "hh.alkene_cis_or_trans"  # the two H of =CH2 couple unequally


@dataclass(frozen=True, slots=True)
class PatternPrice:
    """``unused``: positions in ``blocks`` of required partners (or parts of them) that the letters leave out.
    ``impossible_js``: J in Hz beyond every coupling of the environment. ``swapped``: the J stand in
    another order than the letters. ``overlap_reading``: overlapped signals picked as one multiplet explain
    the pattern."""

    cost: float
    reason: str = ""
    unused: tuple[int, ...] = ()
    impossible_js: tuple[float, ...] = ()
    swapped: bool = False
    overlap_reading: bool = False

    def dearer(self, nats: float) -> PatternPrice:
        """The same reading at a higher price."""
        return replace(self, cost=self.cost + nats)


@dataclass(frozen=True, slots=True, eq=False)
class Prepared:
    """Coupling blocks in the form the search wants, required partners first, tight windows first.

    Equal blocks give the same object, so that its identity serves as a key.
    """

    partners: tuple[Partner, ...]
    required: int
    far: bool
    largest: float
    names: tuple[str, ...]


def _partner(number: int, block: CouplingBlock) -> Partner:
    if block.visibility == "required":
        left_out, seen = (LEFT_OUT_SMALL if block.typical < SMALL_WINDOW_HZ else LEFT_OUT), 0.0
    else:
        left_out, seen = 0.0, OPTIONAL_SEEN if block.visibility == "optional" else HIDDEN_SEEN
    doubtful = block.label.startswith(("xh.", "hh.ring_"))
    cut = 0.0 if block.label == FREE_TO_CUT else GROUP_CUT_DOUBTFUL if doubtful else GROUP_CUT
    return Partner(block.count, block.low, block.high, left_out, seen, cut, number)


@lru_cache(maxsize=4096)
def prepare(blocks: tuple[CouplingBlock, ...]) -> Prepared:
    """The blocks of one environment, ready to be priced many times."""
    partners = [_partner(n, b) for n, b in enumerate(blocks)]
    partners.sort(key=lambda p: (p.left_out == 0.0, p.seen, -p.low, p.high, p.block))
    required = sum(p.count for p in partners if p.left_out > 0.0)
    far = any(p.left_out == 0.0 and p.low < SMALL_J_HZ for p in partners)
    largest = max((p.high for p in partners), default=0.0)
    return Prepared(tuple(partners), required, far, largest, tuple(b.label for b in blocks))


def _singlet(facts: Prepared, broad: bool) -> PatternPrice:
    if broad:
        return PatternPrice(BROAD_SINGLET_COUPLED if facts.required else BROAD_SINGLET_FREE)
    if not facts.required:
        return PatternPrice(0.0)
    full = sum(p.count for p in facts.partners if p.left_out == LEFT_OUT)
    small = sum(p.count for p in facts.partners if p.left_out == LEFT_OUT_SMALL)
    cost = SINGLET_START + SINGLET_EACH * full if full else 0.0
    unused = tuple(sorted(p.block for p in facts.partners if p.left_out > 0.0))
    return PatternPrice(min(cost + LEFT_OUT_SMALL * small, SINGLET_CAP), "singlet on a coupled group", unused)


def _many_lines(facts: Prepared, counts: tuple[int, ...], js: tuple[float, ...]) -> tuple[float, str] | None:
    """Patterns of many lines are misread in two known ways; price and words, or None where neither
    applies."""
    required = [p for p in facts.partners if p.left_out > 0.0]
    low, high = max((p.low for p in required), default=0.0), min((p.high for p in required), default=0.0)
    if low > high + 1.0:
        return None
    if len(counts) == 1 and counts[0] >= 3 and 1 <= facts.required - counts[0] <= 2:
        fit = outside(js[0], low, high) if js else 0.0
        return LINES_LOST + fit, "outer lines lost"
    if len(counts) == 2 and len(js) == 2 and facts.required >= 5:
        large, small = max(js), min(js)
        if abs(large - 2.0 * small) <= 0.5:
            return DOUBLED_J + outside(small, low, high), "many-line pattern read as nested letters"
    return None


def _orders(counts: tuple[int, ...], js: tuple[float, ...]) -> list[tuple[float, tuple[float, ...]]]:
    """J per letter in every order worth a thought, with its price; -1.0 stands where none was given."""
    letters = len(counts)
    if not js:
        return [(0.0, (-1.0,) * letters)]
    if len(js) > letters:
        return [(EXTRA_J, chosen) for chosen in combinations(js[: MAX_LETTERS + 1], letters)]
    if len(js) < letters:
        orders = []
        for places in combinations(range(letters), len(js)):
            given = dict(zip(places, js, strict=True))
            orders.append((0.0, tuple(given.get(n, -1.0) for n in range(letters))))
        return orders
    if letters == 1 or len(set(counts)) == 1:
        return [(0.0, js)]  # equal letters: every order is the same pattern
    found = [(0.0, js)]
    for order in permutations(js):
        if order not in (chosen for _, chosen in found):
            found.append((SWAPPED, order))
        if len(found) > MAX_J_ORDERS:
            break
    return found


def _drop_price(count: int, j: float, facts: Prepared, merged: bool) -> float:
    if 0.0 <= j <= SMALL_J_HZ:
        return SMALL_DROPPED_EXPLAINED if facts.far else SMALL_DROPPED
    return SPURIOUS if merged and count == 1 else CAP


def _place(
    facts: Prepared, counts: tuple[int, ...], js: tuple[float, ...], merged: bool, cap: float
) -> Placement:
    letters = tuple(Letter(c, j, _drop_price(c, j, facts, merged)) for c, j in zip(counts, js, strict=True))
    return place_partners(facts.partners, letters, cap)


def _nested(facts: Prepared, counts: tuple[int, ...], js: tuple[float, ...], merged: bool) -> PatternPrice:
    """First-order letters with at least one splitting."""
    best, swapped, placement = CAP, False, None
    for price, order in _orders(counts, js):
        if price >= best:
            continue
        found = _place(facts, counts, order, merged, best - price)
        if found.cost + price < best - 1e-9:
            best, swapped, placement = found.cost + price, price == SWAPPED, found
        if best <= SWAPPED:
            break
    reason = ""
    unused: tuple[int, ...] = ()
    if placement is not None:
        unused = tuple(sorted(
            p.block for p, put in zip(facts.partners, placement.placed, strict=True)
            if p.left_out > 0.0 and put < p.count
        ))
    known = _many_lines(facts, counts, js) if best > LINES_LOST else None
    if known is not None and known[0] < best:
        best, reason = known
        swapped, unused = False, ()
    elif best > MULTIPLET:
        reason = "J in another order than the letters" if swapped else _words(facts, unused)
    return PatternPrice(best, reason, unused, (), swapped)


def _words(facts: Prepared, unused: tuple[int, ...]) -> str:
    if unused:
        return "partners left out: " + ", ".join(sorted({facts.names[n] for n in unused}))
    return "letters or J without a fitting partner"


def _overlapped(
    facts: Prepared, counts: tuple[int, ...], js: tuple[float, ...], nuclei: float, merged: bool
) -> PatternPrice | None:
    """Overlapped signals picked as one multiplet: the first "J" is a shift difference."""
    limit = max(facts.largest, J_FLOOR_HZ) + J_MARGIN_HZ
    impossible = tuple(j for j in js if j > limit)
    if not impossible or js[0] != max(js) or not (nuclei >= 2.0 or len(counts) >= 3):
        return None
    kept = [(c, j) for c, j in zip(counts, js, strict=False) if j <= limit]
    counts_left, js_left = tuple(c for c, _ in kept), tuple(j for _, j in kept)
    rest = _nested(facts, counts_left, js_left, merged) if counts_left else PatternPrice(0.0)
    cost = SPURIOUS + 0.5 * (len(impossible) - 1) + OVERLAPPED_FACTOR * rest.cost
    return PatternPrice(cost, "overlapped signals picked as one", rest.unused, impossible, rest.swapped, True)


@lru_cache(maxsize=32768)
def _price(
    facts: Prepared, lines: tuple[int, ...], js: tuple[float, ...], nuclei: float, merged: bool
) -> PatternPrice:
    counts = tuple(n - 1 for n in lines if n > 1)[:MAX_LETTERS]
    if not counts:
        return _singlet(facts, False)
    found = _nested(facts, counts, js, merged)
    limit = max(facts.largest, J_FLOOR_HZ) + J_MARGIN_HZ
    impossible = tuple(j for j in js if j > limit)
    if impossible:
        found = replace(found, impossible_js=impossible)
        other = _overlapped(facts, counts, js, nuclei, merged)
        if other is not None and other.cost < found.cost:
            return other
    return found


def price_pattern(
    blocks: Sequence[CouplingBlock] | Prepared,
    lines: tuple[int, ...],
    js: tuple[float, ...],
    *,
    kind: str,
    broad: bool = False,
    apparent: bool = False,
    is_range: bool = False,
    nuclei: float = 1.0,
    strict: bool = False,
    merged: bool = False,
) -> PatternPrice:
    """Nats for reading letters as these partners. ``kind`` and ``lines`` as in a reported multiplicity
    (line count of each nested letter), ``js`` in Hz in the order typed, ``nuclei`` of the whole signal.
    ``merged``: the signal holds other environments too. ``strict``: open-chain sp3 with simple partners,
    where range and "app" excuse less."""
    facts = blocks if isinstance(blocks, Prepared) else prepare(tuple(blocks))
    if kind == "multiplet":
        return PatternPrice(MULTIPLET)
    if kind != "first-order":
        coupled = bool(facts.partners) or nuclei >= 2.0
        return PatternPrice(SECOND_ORDER_NAME if coupled else SECOND_ORDER_UNCOUPLED)
    if broad and all(n <= 1 for n in lines):
        return _singlet(facts, True)
    found = _price(facts, lines, tuple(abs(j) for j in js), nuclei, merged)
    factor = 1.0
    if broad:
        factor = BROAD_FACTOR
    elif apparent:
        factor = 0.5 * (1.0 + APPARENT_FACTOR) if strict else APPARENT_FACTOR
    elif is_range:
        factor = 0.5 * (1.0 + RANGE_FACTOR) if strict else RANGE_FACTOR
    return found if factor == 1.0 or found.cost == 0.0 else replace(found, cost=found.cost * factor)
