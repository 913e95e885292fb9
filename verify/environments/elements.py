"""Stereo elements of a skeleton: tetrahedral atoms, double bonds, cumulenes, slow bonds, hindered axes."""

from __future__ import annotations

from dataclasses import dataclass, field

from verify.environments.skeleton import DOUBLE, Skeleton
from verify.environments.timescale import hindered_axes, slow_bonds

TETRAHEDRAL = frozenset({6, 14, 32, 50, 15, 33, 51, 16, 34, 52, 7, 5})
FREE = -1  # a slot that holds hydrogen or a lone pair


@dataclass(frozen=True, slots=True)
class End:
    """One end of a stereo element: two slots (heavy atoms first, ascending, then FREE) and the element's number."""

    element: int
    slots: tuple[int, int]


@dataclass(slots=True)
class Elements:
    """``centre[i]``: +1/-1 for a tetrahedral atom of fixed sense, 0 for none.

    ``ends``: (end atom, next atom on the axis) to End. ``sense[k]``: 0 if the first slots are cis (planar element) or
    the conventional twist (axial). ``open_centres``/``open_axes``: elements with no drawn sense, given a
    provisional one. ``slow[k]``: why an element stands for slow rotation, "" for a real double bond.
    """

    centre: list[int]
    ends: dict[tuple[int, int], End] = field(default_factory=dict)
    axial: list[bool] = field(default_factory=list)
    sense: list[int] = field(default_factory=list)
    slow: list[str] = field(default_factory=list)
    places: list[tuple[int, int]] = field(default_factory=list)
    open_centres: list[int] = field(default_factory=list)
    open_axes: list[int] = field(default_factory=list)


def find_elements(skeleton: Skeleton) -> Elements:
    """All stereo elements with their drawn or provisional sense."""
    elements = Elements(centre=[0] * skeleton.size)
    for atom in range(skeleton.size):
        if skeleton.tag[atom] or _holds_sense(skeleton, atom):
            elements.centre[atom] = skeleton.tag[atom] or 1
            if not skeleton.tag[atom]:
                elements.open_centres.append(atom)
    for atom in range(skeleton.size):
        for other, code in skeleton.order[atom].items():
            if code == DOUBLE:
                _add_double_bond(skeleton, elements, atom, other)
    for a, b, why in slow_bonds(skeleton):
        _add(skeleton, elements, (a, b), (b, a), axial=False, why=why)
    for a, b in hindered_axes(skeleton):
        _add(skeleton, elements, (a, b), (b, a), axial=True, why="hindered axis")
    return elements


def _holds_sense(s: Skeleton, atom: int) -> bool:
    """True for an atom with no drawn sense that keeps its configuration at room temperature."""
    number = s.number[atom]
    if number not in TETRAHEDRAL or s.hydrogens[atom] > 1:
        return False
    linked = s.neighbours[atom]
    total = len(linked) + s.hydrogens[atom]
    if number in (6, 14, 32, 50):
        labelled = sum(1 for n in linked if s.number[n] == 1)
        return total == 4 and s.hydrogens[atom] + labelled < 2
    if number == 7:
        return len(linked) == 4 and not s.hydrogens[atom]
    if number == 5:
        return len(linked) == 4 and s.charge[atom] < 0
    if s.aromatic(atom):
        return False
    return total in (3, 4)


def _add_double_bond(s: Skeleton, elements: Elements, atom: int, other: int) -> None:
    """Follow cumulated double bonds from ``atom`` over ``other``; add the element if both ends have slots."""
    if (atom, other) in s.small_ring or sum(1 for c in s.order[atom].values() if c == DOUBLE) != 1:
        return
    before, here, bonds = atom, other, 1
    while True:
        onward = [n for n, c in s.order[here].items() if c == DOUBLE and n != before]
        if len(onward) != 1 or s.number[here] != 6 or len(s.neighbours[here]) != 2:
            break
        before, here, bonds = here, onward[0], bonds + 1
    if here < atom:
        return
    _add(s, elements, (atom, other), (here, before), axial=bonds % 2 == 0, why="")


def _slots(s: Skeleton, atom: int, inward: int) -> tuple[int, int] | None:
    """The two slots of an end, None if it has no sides (C=O, nitro, N-H imine)."""
    heavy = [n for n in s.neighbours[atom] if n != inward]
    if s.number[atom] == 6:
        if len(heavy) + s.hydrogens[atom] != 2:
            return None
    elif s.number[atom] != 7 or not heavy and s.hydrogens[atom] != 2 or len(heavy) > 2:
        return None
    return (heavy[0] if heavy else FREE, heavy[1] if len(heavy) == 2 else FREE)


def _add(
    s: Skeleton, elements: Elements, first: tuple[int, int], last: tuple[int, int], axial: bool, why: str
) -> None:
    one, two = _slots(s, *first), _slots(s, *last)
    if one is None or two is None:
        return
    number = len(elements.sense)
    elements.ends[first] = End(number, one)
    elements.ends[last] = End(number, two)
    elements.axial.append(axial)
    elements.slow.append(why)
    elements.places.append((first[0], last[0]))
    drawn = s.stereo.get((min(first), max(first))) if not axial and not why and first[0] == last[1] else None
    if drawn is None:
        elements.sense.append(0)
        elements.open_axes.append(number)
        return
    low, high, trans = drawn
    at_first, at_last = (low, high) if first[0] < last[0] else (high, low)
    elements.sense.append(int(trans) ^ _slot_of(one, at_first) ^ _slot_of(two, at_last))


def _slot_of(slots: tuple[int, int], atom: int) -> int:
    """0 if ``atom`` sits in the first slot, else 1."""
    return 0 if slots[0] == atom else 1


