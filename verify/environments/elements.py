"""Stereo elements of a skeleton: tetrahedral atoms, double bonds, cumulenes, slow bonds, hindered axes."""

from __future__ import annotations

from dataclasses import dataclass, field

from verify.environments.skeleton import DOUBLE, Skeleton
from verify.environments.timescale import hindered_axes, slow_bonds

TETRAHEDRAL = frozenset({6, 14, 32, 50, 15, 33, 51, 16, 34, 52, 7, 5})
FREE = -1  # a slot that holds hydrogen or a lone pair
Leg = tuple[int, int]  # an end atom and the next atom on its axis


@dataclass(frozen=True, slots=True)
class End:
    """One end of a stereo element: two slots (heavy atoms ascending, then FREE) and the element's number."""

    element: int
    slots: tuple[int, int]


@dataclass(slots=True)
class Elements:
    """``centre[i]``: +1/-1 for a tetrahedral atom of fixed sense, 0 for none.

    ``ends``: leg to End; ``has_end[i]``: some element ends at the atom. ``sense[k]``: 0 if the first slots are cis
    (planar element) or the conventional twist (axial). ``slow[k]``: why an element stands for slow rotation, "" for
    a real double bond. ``open_centres``/``open_axes``: elements with no drawn sense, given a provisional one.
    ``ring_axes``: elements inside a ring system.
    """

    centre: list[int]
    has_end: list[bool]
    ends: dict[Leg, End] = field(default_factory=dict)
    legs: list[tuple[Leg, Leg]] = field(default_factory=list)
    axial: list[bool] = field(default_factory=list)
    sense: list[int] = field(default_factory=list)
    slow: list[str] = field(default_factory=list)
    open_centres: list[int] = field(default_factory=list)
    open_axes: list[int] = field(default_factory=list)
    ring_axes: list[int] = field(default_factory=list)

    def slots(self, number: int) -> tuple[tuple[int, int], tuple[int, int]]:
        """Slots of both ends of an element."""
        first, last = self.legs[number]
        return self.ends[first].slots, self.ends[last].slots


def find_elements(skeleton: Skeleton) -> Elements:
    """All stereo elements with their drawn or provisional sense."""
    size = skeleton.size
    elements = Elements(centre=[0] * size, has_end=[False] * size)
    double = []
    for atom in range(size):
        if skeleton.tag[atom] or _holds_sense(skeleton, atom):
            elements.centre[atom] = skeleton.tag[atom] or 1
            if not skeleton.tag[atom]:
                elements.open_centres.append(atom)
        if DOUBLE in skeleton.order[atom].values():
            double.append(atom)
    for atom in double:
        for other, code in skeleton.order[atom].items():
            if code == DOUBLE:
                _add_double_bond(skeleton, elements, atom, other)
    for a, b, why in slow_bonds(skeleton):
        _add(skeleton, elements, ((a, b), (b, a)), axial=False, why=why)
    for a, b in skeleton.delocalised:
        if (a, b) not in elements.ends:
            _add(skeleton, elements, ((a, b), (b, a)), axial=False, why="delocalised bond")
    for a, b in hindered_axes(skeleton):
        _add(skeleton, elements, ((a, b), (b, a)), axial=True, why="hindered axis")
    return elements


def _holds_sense(s: Skeleton, atom: int) -> bool:
    """True for an atom with no drawn sense that keeps its configuration at room temperature."""
    number = s.number[atom]
    if number not in TETRAHEDRAL or s.hydrogens[atom] > 1:
        return False
    linked = s.neighbours[atom]
    total = len(linked) + s.hydrogens[atom]
    if number in (6, 14, 32, 50):
        if total != 4:
            return False
        return not s.labelled or s.hydrogens[atom] + sum(1 for n in linked if s.number[n] == 1) < 2
    if number == 7:
        return len(linked) == 4 and not s.hydrogens[atom]
    if number == 5:
        return len(linked) == 4 and s.charge[atom] < 0
    return total in (3, 4) and not s.aromatic(atom) and not _acidic(s, atom)


def _acidic(s: Skeleton, atom: int) -> bool:
    """P or S with both =O and -OH (or -O-): the proton moves, so the two oxygens count as one kind."""
    terminal = [n for n in s.neighbours[atom] if s.number[n] in (8, 16) and len(s.neighbours[n]) == 1]
    return len(terminal) > 1 and any(s.order[atom][n] != DOUBLE for n in terminal)


def _add_double_bond(s: Skeleton, elements: Elements, atom: int, other: int) -> None:
    """Follow cumulated double bonds from ``atom`` over ``other``; add the element if both ends have slots."""
    if (atom, other) in s.small_ring or sum(1 for c in s.order[atom].values() if c == DOUBLE) != 1:
        return
    if (atom, other) in s.blurred:
        return
    before, here, bonds = atom, other, 1
    while True:
        onward = [n for n, c in s.order[here].items() if c == DOUBLE and n != before]
        if len(onward) != 1 or s.number[here] != 6 or len(s.neighbours[here]) != 2:
            break
        before, here, bonds = here, onward[0], bonds + 1
    if here > atom:
        _add(s, elements, ((atom, other), (here, before)), axial=bonds % 2 == 0, why="")


def _slots(s: Skeleton, leg: Leg) -> tuple[int, int] | None:
    """The two slots of an end, None if it has no sides (C=O, nitro, N-H imine)."""
    atom, inward = leg
    heavy = [n for n in s.neighbours[atom] if n != inward]
    if s.number[atom] == 6:
        if len(heavy) + s.hydrogens[atom] != 2:
            return None
    elif s.number[atom] != 7 or len(heavy) > 2 or (not heavy and s.hydrogens[atom] != 2):
        return None
    return (heavy[0] if heavy else FREE, heavy[1] if len(heavy) == 2 else FREE)


def _add(s: Skeleton, elements: Elements, legs: tuple[Leg, Leg], axial: bool, why: str) -> None:
    first, last = legs
    one, two = _slots(s, first), _slots(s, last)
    if one is None or two is None:
        return
    number = len(elements.sense)
    elements.ends[first] = End(number, one)
    elements.ends[last] = End(number, two)
    elements.has_end[first[0]] = elements.has_end[last[0]] = True
    elements.legs.append(legs)
    elements.axial.append(axial)
    elements.slow.append(why)
    if first[1] in s.ring_neighbours[first[0]]:
        elements.ring_axes.append(number)
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
