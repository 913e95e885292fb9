"""Bridgeheads of small bridged rings: geometry leaves their senses no choice, drawn or not.

Three bridges leave a bridgehead and meet again at the other one. Seen from outside, they run clockwise at one end and
anticlockwise at the other. Where the largest ring is small no bridgehead can point inwards, so the sense of one
bridgehead gives that of the other. Textbook (in,out isomers need medium rings); the limit is from memory.
"""

from __future__ import annotations

from collections.abc import Iterator
from itertools import combinations

from verify.environments.elements import Elements
from verify.environments.skeleton import Skeleton

LARGEST_RING = 9  # members of the ring made by the two longest bridges; above it, in,out isomers are known
LONGEST_BRIDGE = LARGEST_RING - 3
Path = tuple[int, ...]  # atoms of a bridge, from one bridgehead to the other, both included


def settle_cages(s: Skeleton, elements: Elements) -> None:
    """Give every open bridgehead the sense that its partners leave it, and take it from ``open_centres``.

    A cage without any drawn sense keeps one provisional sense as a whole, which counts as one of two mirror images.
    """
    heads = [i for i, sense in enumerate(elements.centre) if sense and len(s.ring_neighbours[i]) == 3]
    still_open = set(elements.open_centres)
    if len(heads) < 2 or still_open.isdisjoint(heads):
        return
    partners = {head: dict(_partners(s, head, set(heads))) for head in heads}
    settled: set[int] = set()
    for start in sorted(heads, key=lambda head: (head in still_open, head)):  # drawn ones lead
        if start in settled or not partners[start]:
            continue
        settled.add(start)
        waiting = [start]
        for head in waiting:
            for other, bridges in partners[head].items():
                if other in settled:
                    continue
                if other in still_open:
                    elements.centre[other] = _opposite(s, elements.centre[head], head, other, bridges)
                settled.add(other)
                waiting.append(other)
    elements.open_centres[:] = [c for c in elements.open_centres if c not in settled]


def _partners(s: Skeleton, head: int, heads: set[int]) -> Iterator[tuple[int, tuple[Path, Path, Path]]]:
    """Bridgeheads joined to ``head`` by three short bridges that share no atom, with the bridges."""
    found: dict[int, list[Path]] = {}
    for path in _paths(s, (head,)):
        if path[-1] in heads and len(path) > 2:
            found.setdefault(path[-1], []).append(path)
    for other, paths in found.items():
        if other in s.ring_neighbours[head]:
            continue  # a direct bond is a fusion: cis and trans both exist
        for trio in combinations(sorted(paths, key=len), 3):
            inner = [atom for path in trio for atom in path[1:-1]]
            if len(set(inner)) == len(inner) and len(trio[1]) + len(trio[2]) - 2 <= LARGEST_RING:
                yield other, (trio[0], trio[1], trio[2])
                break


def _paths(s: Skeleton, path: Path) -> Iterator[Path]:
    """All simple paths over ring bonds with at most ``LONGEST_BRIDGE`` atoms between their ends."""
    for n in s.ring_neighbours[path[-1]]:
        if n not in path:
            longer = (*path, n)
            yield longer
            if len(longer) < LONGEST_BRIDGE + 2:
                yield from _paths(s, longer)


def _opposite(s: Skeleton, sense: int, head: int, other: int, bridges: tuple[Path, Path, Path]) -> int:
    """Sense of ``other`` whose bridges run the other way round than at ``head``."""
    here = _parity(s.neighbours[head], [path[1] for path in bridges])
    there = _parity(s.neighbours[other], [path[-2] for path in bridges])
    return -sense * here * there


def _parity(ascending: list[int], bridges: list[int]) -> int:
    """+1 if an even number of exchanges takes the ascending neighbours to the bridges' order, outward one last."""
    order = bridges + [n for n in ascending if n not in bridges]
    odd = sum(1 for i, a in enumerate(order) for b in order[i + 1 :] if a > b)
    return -1 if odd % 2 else 1
