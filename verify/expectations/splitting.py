"""The patterns a spectroscopist would accept for an environment, each with its penalty in nats."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from functools import lru_cache

from verify.expectations.model import CouplingBlock, Splitting
from verify.expectations.pattern_price import MULTIPLET, PatternPrice, Prepared, prepare, price_pattern

LETTERS = {1: "s", 2: "d", 3: "t", 4: "q", 5: "quint", 6: "sext", 7: "sept", 8: "oct", 9: "non"}
ACCEPTED_UP_TO = 1.5
MAX_BLOCKS, MAX_OPTIONAL, MAX_ACCEPTED = 5, 3, 24
MEETING_HZ = 1.2  # couplings this close are read as one
MERGED_APART, SPLIT_ALIKE = 0.2, 0.15  # per letter: likely patterns are to stand first in a message

Group = tuple[CouplingBlock, ...]


def _partitions(blocks: Group) -> Iterator[tuple[Group, ...]]:
    """Ways to sort partners into letters; partners of one letter must have windows that meet."""
    if not blocks:
        yield ()
        return
    first, rest = blocks[0], blocks[1:]
    for partition in _partitions(rest):
        yield ((first,), *partition)
        for number, group in enumerate(partition):
            joined = (first, *group)
            if max(b.low for b in joined) <= min(b.high for b in joined):
                yield (*partition[:number], joined, *partition[number + 1 :])


def _chosen(blocks: Group) -> Iterator[tuple[Group, str]]:
    required = tuple(b for b in blocks if b.visibility == "required")[:MAX_BLOCKS]
    optional = tuple(b for b in blocks if b.visibility == "optional")
    yield required, "all partners seen"
    for block in optional[:MAX_OPTIONAL]:
        yield (*required, block), f"with {block.label}"
    if 1 < len(optional) <= MAX_OPTIONAL and len(required) + len(optional) <= MAX_BLOCKS:
        yield (*required, *optional), "with every small coupling"
    small = tuple(b for b in required if b.typical >= 4.0)
    if small != required:
        yield small, "small couplings not resolved"


def _middle(group: Group) -> float:
    low, high = max(b.low for b in group), min(b.high for b in group)
    return min(max(sum(b.typical for b in group) / len(group), low), high)


def _likelihood(partition: tuple[Group, ...]) -> float:
    """Small nats that put the likeliest of several fitting patterns first."""
    nats = 0.0
    for number, group in enumerate(partition):
        spread = max(b.typical for b in group) - min(b.typical for b in group)
        nats += MERGED_APART if spread > MEETING_HZ else 0.0
        for other in partition[number + 1 :]:
            nats += SPLIT_ALIKE if abs(_middle(group) - _middle(other)) < MEETING_HZ else 0.0
    return nats


def _as_splitting(blocks: Group, partition: tuple[Group, ...], why: str) -> Splitting | None:
    ordered = sorted(partition, key=lambda g: (-_middle(g), sum(b.count for b in g)))
    lines = tuple(1 + sum(b.count for b in group) for group in ordered) or (1,)
    if any(n not in LETTERS for n in lines):
        return None
    js = tuple(_middle(group) for group in ordered)
    price = price_pattern(blocks, lines, js, kind="first-order").cost + _likelihood(partition)
    windows = tuple((max(b.low for b in g), min(b.high for b in g)) for g in ordered)
    merged = any(len(g) > 1 for g in ordered)
    reason = f"{why}, like couplings merged" if merged else why
    return Splitting("".join(LETTERS[n] for n in lines), lines, windows, price, reason)


@lru_cache(maxsize=2048)
def _accepted(blocks: Group) -> tuple[Splitting, ...]:
    best: dict[tuple[int, ...], Splitting] = {}
    for chosen, why in _chosen(blocks):
        for partition in _partitions(chosen):
            found = _as_splitting(blocks, partition, why)
            if found is None or found.penalty > ACCEPTED_UP_TO:
                continue
            held = best.get(found.lines)
            if held is None or found.penalty < held.penalty - 1e-9:
                best[found.lines] = found
    ordered = sorted(best.values(), key=lambda s: (s.penalty, len(s.lines), s.letters))[:MAX_ACCEPTED]
    return (*ordered, Splitting("m", (), (), MULTIPLET, "not analysed"))


def accepted_splittings(blocks: Sequence[CouplingBlock]) -> tuple[Splitting, ...]:
    """Accepted patterns, likeliest first, ``m`` last: every partner seen, like couplings merged, optional
    ones seen or not, small ones dropped. Penalties are those of ``price_pattern`` at typical J, plus under
    0.5 nat of order."""
    return _accepted(tuple(blocks))


__all__ = ["PatternPrice", "Prepared", "accepted_splittings", "prepare", "price_pattern"]
