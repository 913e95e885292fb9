"""Least-cost placement of coupling partners on the letters of a first-order pattern.

Penalties in nats are those measured on published lists with a throw-away prototype; windows in Hz.
"""

from __future__ import annotations

from dataclasses import dataclass, field

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
SPURIOUS = 0.9
SMALL_WINDOW_HZ = 4.0
NODE_LIMIT = 3000

Place = tuple[int, int]  # (letter, nuclei)


@dataclass(frozen=True, slots=True)
class Partner:
    """A coupling block as the search sees it. ``left_out``: nats per H for not seeing it; ``seen``: nats
    for seeing it."""

    count: int
    low: float
    high: float
    left_out: float
    seen: float
    cut: float
    far: bool
    block: int


@dataclass(frozen=True, slots=True)
class Letter:
    """One nested letter: ``partners`` = lines - 1, its J in Hz (-1.0 = not given), nats for explaining it
    away."""

    partners: int
    j: float
    dropped: float


@dataclass(slots=True)
class Placement:
    """Cost of the best placement found and, per partner, the nuclei that found a place."""

    cost: float
    placed: tuple[int, ...]


def outside(value: float, low: float, high: float) -> float:
    """Nats for a J beyond its window; free within the digital resolution."""
    beyond = max(low - value, value - high)
    if beyond <= OUTSIDE_FREE_HZ:
        return 0.0
    return min(OUTSIDE_START + OUTSIDE_SLOPE * (beyond - OUTSIDE_FREE_HZ), OUTSIDE_CAP)


@dataclass(slots=True)
class Search:
    """Branch and bound over partners in turn: each goes wholly to a letter, over two letters, or is left
    out."""

    partners: tuple[Partner, ...]
    letters: tuple[Letter, ...]
    best: float = 1e9
    placed: tuple[int, ...] = ()
    nodes: int = 0
    fit: list[list[float]] = field(default_factory=list)
    required_after: list[int] = field(default_factory=list)
    all_after: list[int] = field(default_factory=list)
    cheapest_left_out: float = LEFT_OUT

    def run(self) -> Placement:
        """Exact up to ``NODE_LIMIT`` nodes, beyond it the best placement seen so far."""
        for partner in self.partners:
            low, high = partner.low, partner.high
            self.fit.append([0.0 if x.j < 0.0 else outside(x.j, low, high) for x in self.letters])
        required, everything = 0, 0
        self.required_after, self.all_after = [0], [0]
        for partner in reversed(self.partners):
            if partner.left_out > 0.0:
                required += partner.count
                self.cheapest_left_out = min(self.cheapest_left_out, partner.left_out)
            everything += partner.count
            self.required_after.append(required)
            self.all_after.append(everything)
        self.required_after.reverse()
        self.all_after.reverse()
        room = [letter.partners for letter in self.letters]
        spans = [(0.0, 1e9)] * len(self.letters)
        self._visit(0, 0.0, room, spans, ())
        return Placement(self.best, self.placed)

    def _unfilled(self, room: list[int]) -> float:
        return sum(
            min(LINE_WITHOUT_PARTNER * free, letter.dropped)
            for free, letter in zip(room, self.letters, strict=True) if free
        )

    def _bound(self, number: int, room: list[int]) -> float:
        free = sum(room)
        bound = self.cheapest_left_out * max(0, self.required_after[number] - free)
        short = free - self.all_after[number]
        if short > 0:
            bound += min(min(LINE_WITHOUT_PARTNER, letter.dropped) for letter in self.letters)
        return bound

    def _visit(
        self, number: int, cost: float, room: list[int], spans: list[tuple[float, float]], placed:
        tuple[int, ...] ) -> None:
        self.nodes += 1
        if number == len(self.partners):
            total = cost + self._unfilled(room)
            if total < self.best - 1e-9:
                self.best, self.placed = total, placed
            return
        if self.nodes > NODE_LIMIT and self.placed:
            return
        if cost + self._bound(number, room) >= self.best - 1e-9:
            return
        for price, places, put in self._options(number, room, spans):
            if cost + price >= self.best - 1e-9:
                break
            if not places:
                self._visit(number + 1, cost + price, room, spans, (*placed, put))
                continue
            new_room, new_spans, partner = room.copy(), spans.copy(), self.partners[number]
            for letter, nuclei in places:
                new_room[letter] -= nuclei
                low, high = spans[letter]
                new_spans[letter] = (max(low, partner.low), min(high, partner.high))
            self._visit(number + 1, cost + price, new_room, new_spans, (*placed, put))

    def _options(
        self, number: int, room: list[int], spans: list[tuple[float, float]]
    ) -> list[tuple[float, tuple[Place, ...], int]]:
        """Ways to place one partner, cheapest first: (nats, places, nuclei placed)."""
        partner, fit = self.partners[number], self.fit[number]
        count = partner.count
        options: list[tuple[float, tuple[Place, ...], int]] = [(partner.left_out * count, (), 0)]
        open_letters = [n for n, free in enumerate(room) if free]
        for letter in open_letters:
            nuclei = min(room[letter], count)
            price = partner.seen + fit[letter] + partner.left_out * (count - nuclei)
            price += self._clash(partner, spans[letter], nuclei)
            options.append((price, ((letter, nuclei),), nuclei))
        if count > 1 and len(open_letters) > 1:
            for first in open_letters:
                for second in open_letters:
                    if first < second:
                        options.append(self._cut(partner, fit, room, spans, first, second))
        options.sort(key=_by_price)
        return options

    @staticmethod
    def _clash(partner: Partner, span: tuple[float, float], nuclei: int) -> float:
        apart = max(span[0] - partner.high, partner.low - span[1])
        return MERGED_DISJOINT * nuclei if apart > OUTSIDE_FREE_HZ else 0.0

    def _cut(
        self, partner: Partner, fit: list[float], room: list[int], spans: list[tuple[float, float]],
        first: int, second: int,
    ) -> tuple[float, tuple[Place, ...], int]:
        one = min(room[first], partner.count - 1)
        other = min(room[second], partner.count - one)
        price = partner.seen + partner.cut + fit[first] + fit[second]
        price += partner.left_out * (partner.count - one - other)
        price += self._clash(partner, spans[first], one) + self._clash(partner, spans[second], other)
        return price, ((first, one), (second, other)), one + other


def _by_price(option: tuple[float, tuple[Place, ...], int]) -> float:
    return option[0]
