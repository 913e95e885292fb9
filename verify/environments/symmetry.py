"""Which nuclei are one signal: the substitution test over all atoms and hydrogens of a component."""

from __future__ import annotations

from collections.abc import Hashable, Sequence
from dataclasses import dataclass, replace
from itertools import product

from verify.environments.cages import settle_cages
from verify.environments.elements import FREE, Elements, find_elements
from verify.environments.search import Search
from verify.environments.skeleton import Skeleton

MOST_OPEN = 4  # open elements tried in both senses; beyond it each keeps to itself
Node = tuple[int, int]  # atom, hydrogen of a CH2 (0/1); hydrogen 0 where they are not told apart


@dataclass(frozen=True, slots=True)
class Orbits:
    """``proper``/``all``: node to class number under rotations, and under rotations and reflections.

    ``pairs``: atoms whose two hydrogens are told apart. ``open_elements``: number of stereo elements with no drawn
    sense that matter.
    """

    proper: dict[Node, int]
    all: dict[Node, int]
    pairs: frozenset[int]
    open_elements: int


def find_orbits(skeleton: Skeleton) -> tuple[Orbits, Elements]:
    """Classes of all atoms (node ``(atom, 0)``) and of the hydrogens of each CH2 that may differ."""
    elements = find_elements(skeleton)
    settle_cages(skeleton, elements)
    pairs = frozenset(i for i in range(skeleton.size) if _pair(skeleton, elements, i))
    nodes = [(i, k) for i in range(skeleton.size) for k in ((0, 1) if i in pairs else (0,))]
    centres, axes = _relevant(skeleton, elements)
    proper: list[dict[Node, int]] = []
    whole: list[dict[Node, int]] = []
    strict = len(centres) + len(axes) > MOST_OPEN
    used = _apart(skeleton, centres, axes, elements) if strict else skeleton
    for variant in [elements] if strict else _variants(elements, centres, axes):
        search = Search(used, variant)
        first, second = _partition(used, search, nodes, pairs)
        proper.append(first)
        whole.append(second)
    found = Orbits(_meet(nodes, proper), _meet(nodes, whole), pairs, len(centres) + len(axes))
    return found, elements


def _pair(s: Skeleton, elements: Elements, atom: int) -> bool:
    """True for CH2 (not CH3, not a free NH2) and for NH2 held by slow rotation."""
    if s.hydrogens[atom] != 2:
        return False
    if s.number[atom] in (6, 14, 32, 50):
        return True
    return any((atom, n) in elements.ends for n in s.neighbours[atom])


def _relevant(s: Skeleton, elements: Elements) -> tuple[list[int], list[int]]:
    """Open elements whose sense makes a difference: those with no two like branches to exchange."""
    if not (elements.open_centres or elements.open_axes) or len(set(s.colour)) == s.size:
        return [], []
    search = Search(s, elements)
    centres = [c for c in elements.open_centres if not _exchangeable_at(s, search, c, s.neighbours[c])]
    axes = []
    for k in elements.open_axes:
        if not any(
            slots[0] == FREE or (FREE not in slots and _exchangeable_at(s, search, leg[0], slots))
            for leg, slots in zip(elements.legs[k], elements.slots(k), strict=True)
        ):
            axes.append(k)
    return centres, axes


def _exchangeable_at(s: Skeleton, search: Search, atom: int, linked: Sequence[int]) -> bool:
    """True if two branches at ``atom`` are the same compound part, so that naming them is a convention."""
    for i, a in enumerate(linked):
        for b in linked[i + 1 :]:
            if s.colour[a] == s.colour[b] and s.order[atom][a] == s.order[atom][b]:
                chain = a not in s.ring_neighbours[atom] and b not in s.ring_neighbours[atom]
                if chain and search.same_branch(atom, a, b):
                    return True
                if not chain and search.turns_alone(atom):
                    return True
    return False


def _variants(elements: Elements, centres: list[int], axes: list[int]) -> list[Elements]:
    """Every combination of senses of the open elements; the first stays as it is, mirror images count once."""
    names: list[tuple[str, int]] = [("c", c) for c in centres] + [("a", k) for k in axes]
    if len(names) < 2:
        return [elements]
    made = []
    for flips in product((False, True), repeat=len(names) - 1):
        centre, sense = list(elements.centre), list(elements.sense)
        for (kind, which), flip in zip(names[1:], flips, strict=True):
            if flip and kind == "c":
                centre[which] = -centre[which]
            elif flip:
                sense[which] ^= 1
        made.append(replace(elements, centre=centre, sense=sense))
    if any(v and i not in elements.open_centres for i, v in enumerate(elements.centre)) or not centres:
        flipped = []
        for variant in made:
            centre, sense = list(variant.centre), list(variant.sense)
            if centres:
                centre[centres[0]] = -centre[centres[0]]
            else:
                sense[axes[0]] ^= 1
            flipped.append(replace(variant, centre=centre, sense=sense))
        made += flipped
    return made


def _apart(s: Skeleton, centres: list[int], axes: list[int], elements: Elements) -> Skeleton:
    """Skeleton in which every open element is its own kind: too fine rather than too coarse."""
    colour = [c * 2 * s.size for c in s.colour]
    marked = sorted({*centres, *(elements.legs[k][0][0] for k in axes)})
    for number, atom in enumerate(marked, start=1):
        colour[atom] += number
    return replace(s, colour=colour)


def _partition(
    s: Skeleton, search: Search, nodes: list[Node], pairs: frozenset[int]
) -> tuple[dict[Node, int], dict[Node, int]]:
    """Classes under proper operations, and under all."""
    proper: dict[Node, int] = {}
    whole: dict[Node, int] = {}
    by_colour: dict[int, list[Node]] = {}
    for node in nodes:
        by_colour.setdefault(s.colour[node[0]], []).append(node)
    for members in by_colour.values():
        heads: list[Node] = []
        for node in members:
            head = next((h for h in heads if _related(search, h, node, 1, pairs)), None)
            if head is None:
                heads.append(node)
                head = node
            proper[node] = len(proper) if head == node else proper[head]
        tops: list[Node] = []
        merged: dict[Node, Node] = {}
        for head in heads:
            top = next((t for t in tops if _related(search, t, head, -1, pairs)), head)
            if top == head:
                tops.append(head)
            merged[head] = top
        by_number = {proper[h]: merged[h] for h in heads}
        for node in members:
            whole[node] = proper[by_number[proper[node]]]
    return proper, whole


def _related(search: Search, first: Node, second: Node, sign: int, pairs: frozenset[int]) -> bool:
    cross = first[1] ^ second[1] if first[0] in pairs else -1
    return search.carries(first[0], second[0], sign, cross)


def _meet(nodes: list[Node], partitions: list[dict[Node, int]]) -> dict[Node, int]:
    """Coarsest partition finer than all of them."""
    numbers: dict[Hashable, int] = {}
    return {n: numbers.setdefault(tuple(p[n] for p in partitions), len(numbers)) for n in nodes}
