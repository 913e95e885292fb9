"""Least-cost placement of coupling partners on the letters of a first-order pattern.

Penalties in nats are those measured on published lists; windows in Hz.
"""

from __future__ import annotations

from dataclasses import dataclass

LEFT_OUT = 2.6  # a partner that a reader would expect to see
LEFT_OUT_SMALL = 1.0  # the same, if its coupling may be as small as the line width
LINE_WITHOUT_PARTNER = 3.2
MERGED_DISJOINT = 2.4  # per H, one letter for partners whose windows do not meet
GROUP_CUT = 2.2
GROUP_CUT_DOUBTFUL = 1.2
OUTSIDE_START, OUTSIDE_SLOPE, OUTSIDE_CAP, OUTSIDE_FREE_HZ = 0.9, 0.9, 6.0, 0.6
SMALL_J_HZ = 3.6
SMALL_DROPPED_EXPLAINED, SMALL_DROPPED = 0.3, 1.2
OPTIONAL_SEEN, HIDDEN_SEEN = 0.05, 0.5
OPTIONAL_MISFIT = 2.0  # an optional partner is no explanation for a J further outside its window
SPURIOUS = 0.9
SMALL_WINDOW_HZ = 4.0
CAP = 12.0  # nobody asks how much worse than this a reading is
NODE_LIMIT = 600

Place = tuple[int, int]  # (letter, nuclei)
Span = tuple[float, float]
Option = tuple[float, tuple[Place, ...], int]  # nats, places, nuclei placed


@dataclass(frozen=True, slots=True)
class Partner:
    """A coupling block as the search sees it. ``left_out`` and ``seen``: nats per H for not seeing it, nats
    for seeing it; ``cut``: nats for seeing it under two letters; ``block``: its position among the blocks."""

    count: int
    low: float
    high: float
    left_out: float
    seen: float
    cut: float
    block: int


@dataclass(frozen=True, slots=True)
class Letter:
    """One nested letter: ``partners`` = lines - 1, its J in Hz (-1.0 = not given), nats for explaining it
    away without a partner."""

    partners: int
    j: float
    dropped: float


@dataclass(frozen=True, slots=True)
class Placement:
    """Cost of the best placement found and, per partner, the nuclei that found a place (empty at the cap)."""

    cost: float
    placed: tuple[int, ...]


def outside(value: float, low: float, high: float) -> float:
    """Nats for a J beyond its window; free within the digital resolution."""
    beyond = max(low - value, value - high)
    if beyond <= OUTSIDE_FREE_HZ:
        return 0.0
    return min(OUTSIDE_START + OUTSIDE_SLOPE * (beyond - OUTSIDE_FREE_HZ), OUTSIDE_CAP)


def _clash(partner: Partner, span: Span, nuclei: int) -> float:
    if span[0] - partner.high > OUTSIDE_FREE_HZ or partner.low - span[1] > OUTSIDE_FREE_HZ:
        return MERGED_DISJOINT * nuclei
    return 0.0


def _by_price(option: Option) -> float:
    return option[0]


class _Search:
    """Branch and bound: each partner in turn goes to one letter, to two, or is left out."""

    __slots__ = ("best", "fits", "left_after", "letters", "nodes", "partners", "placed", "room_after", "unit")

    def __init__(self, partners: tuple[Partner, ...], letters: tuple[Letter, ...], cap: float) -> None:
        self.partners, self.letters, self.best = partners, letters, cap
        self.placed: tuple[int, ...] = ()
        self.nodes = 0
        self.fits = [
            [0.0 if x.j < 0.0 else outside(x.j, p.low, p.high) for x in letters] for p in partners
        ]
        self.unit = [min(LINE_WITHOUT_PARTNER, x.dropped / x.partners) for x in letters]
        needed, everything = 0, 0
        self.left_after, self.room_after = [0], [0]
        for partner in reversed(partners):
            needed += partner.count if partner.left_out > LEFT_OUT_SMALL else 0
            everything += partner.count
            self.left_after.append(needed)
            self.room_after.append(everything)
        self.left_after.reverse()
        self.room_after.reverse()

    def _bound(self, number: int, room: tuple[int, ...]) -> float:
        free = sum(room)
        bound = LEFT_OUT * max(0, self.left_after[number] - free)
        short = free - self.room_after[number]
        return bound + short * min(self.unit) if short > 0 else bound

    def visit(
        self, number: int, cost: float, room: tuple[int, ...], spans: tuple[Span, ...], placed: tuple[int,
        ...] ) -> None:
        """Place partner ``number`` and all after it; keeps the best complete placement."""
        if number == len(self.partners):
            for letter, free in enumerate(room):
                if free:
                    cost += min(LINE_WITHOUT_PARTNER * free, self.letters[letter].dropped)
            if cost < self.best - 1e-9:
                self.best, self.placed = cost, placed
            return
        self.nodes += 1
        if self.nodes > NODE_LIMIT or cost + self._bound(number, room) >= self.best - 1e-9:
            return
        partner = self.partners[number]
        for price, places, put in self._options(number, room, spans):
            if cost + price >= self.best - 1e-9:
                break
            if not places:
                self.visit(number + 1, cost + price, room, spans, (*placed, 0))
                continue
            left, held = list(room), list(spans)
            for letter, nuclei in places:
                left[letter] -= nuclei
                low, high = held[letter]
                held[letter] = (max(low, partner.low), min(high, partner.high))
            self.visit(number + 1, cost + price, tuple(left), tuple(held), (*placed, put))

    def _options(self, number: int, room: tuple[int, ...], spans: tuple[Span, ...]) -> list[Option]:
        partner, fit = self.partners[number], self.fits[number]
        count, left_out = partner.count, partner.left_out
        options: list[Option] = [(left_out * count, (), 0)]
        usable = [n for n, free in enumerate(room) if free and (left_out or fit[n] <= OPTIONAL_MISFIT)]
        for letter in usable:
            nuclei = room[letter] if room[letter] < count else count
            price = partner.seen + fit[letter] + left_out * (count - nuclei)
            options.append((price + _clash(partner, spans[letter], nuclei), ((letter, nuclei),), nuclei))
        if count > 1 and len(usable) > 1:
            for place, first in enumerate(usable):
                for second in usable[place + 1 :]:
                    options.append(self._cut(number, room, spans, first, second))
        if len(options) > 1:
            options.sort(key=_by_price)
        return options

    def _cut(
        self, number: int, room: tuple[int, ...], spans: tuple[Span, ...], first: int, second: int
    ) -> Option:
        partner, fit = self.partners[number], self.fits[number]
        one = min(room[first], partner.count - 1)
        other = min(room[second], partner.count - one)
        price = partner.seen + partner.cut + fit[first] + fit[second]
        price += partner.left_out * (partner.count - one - other)
        price += _clash(partner, spans[first], one) + _clash(partner, spans[second], other)
        return price, ((first, one), (second, other)), one + other


def place_partners(partners: tuple[Partner, ...], letters: tuple[Letter, ...], cap: float = CAP) -> Placement:
    """Cheapest placement, exact up to ``NODE_LIMIT`` nodes; ``cap``, with nothing placed, where none is
    cheaper."""
    search = _Search(partners, letters, cap)
    room = tuple(letter.partners for letter in letters)
    search.visit(0, 0.0, room, ((0.0, 1e9),) * len(letters), ())
    return Placement(search.best, search.placed)
