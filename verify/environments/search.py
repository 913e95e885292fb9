"""Is there a symmetry operation that carries one atom to another?

The substitution test asks whether two positions, marked in turn, give the same compound, mirror images or
diastereomers. That is the question whether an automorphism of the constitution exists that keeps the sense
of every stereo element (sign +1: homotopic), reverses every chiral one (sign -1: enantiotopic), or neither.
Branches over chain bonds are decided once each and remembered; only ring systems need backtracking.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from verify.environments.elements import FREE, Elements
from verify.environments.ring_axes import ring_axes_kept
from verify.environments.skeleton import Skeleton

MOST_STEPS = 20_000
NO_DEMAND, IMPOSSIBLE = -1, -2
Images = dict[int, int]


class SearchLimitError(Exception):
    """The bound on steps was reached; the question stays open."""


@dataclass(frozen=True, slots=True)
class Demand:
    """What is asked of the operation where a walk begins or enters a ring system.

    ``parent`` is carried to ``parent_image`` (-1: none). ``twist``: 0/1 if the slots of a far end must be kept or
    swapped. ``cross``: 0/1 if the first H of a CH2 must land on the first/second one; -1 where free.
    """

    sign: int
    parent: int = -1
    parent_image: int = -1
    twist: int = NO_DEMAND
    cross: int = NO_DEMAND


class Search:
    """Questions about one skeleton under one choice of senses for its open elements."""

    def __init__(self, skeleton: Skeleton, elements: Elements) -> None:
        self._s = skeleton
        self._e = elements
        self._known: dict[tuple[int, int, int, int, int, int], bool] = {}
        self._orders: dict[int, tuple[list[tuple[int, int]], list[list[int]]]] = {}
        self._steps = 0

    def carries(self, atom: int, image: int, sign: int, cross: int = NO_DEMAND) -> bool:
        """True if an operation of this sign carries ``atom`` to ``image``.

        ``cross`` 0/1 demands in addition that the first hydrogen of a CH2 lands on the first/second one.
        Gives up with False when the bound on steps is reached.
        """
        if self._s.colour[atom] != self._s.colour[image]:
            return False
        self._steps = 0
        demand = Demand(sign, cross=cross)
        try:
            if self._s.block[atom] >= 0:
                return self._block(atom, image, demand)
            return any(
                self._settle(atom, image, images, demand) for images in self._matches(atom, image, {})
            )
        except (SearchLimitError, RecursionError):
            return False

    def same_branch(self, atom: int, a: int, b: int) -> bool:
        """True if chain branches ``a`` and ``b`` at ``atom`` are alike in sense too."""
        self._steps = 0
        try:
            return self._branch(atom, a, atom, b, 1, NO_DEMAND)
        except (SearchLimitError, RecursionError):
            return False

    def turns_alone(self, atom: int) -> bool:
        """True if reversing the sense of this atom alone gives the same compound or its mirror image."""
        centre = self._e.centre
        kept = centre[atom]
        if not kept:
            return False
        try:
            # an operation that fixes the atom and does there the opposite of what it does elsewhere
            centre[atom] = 0
            self._known.clear()
            return self.carries(atom, atom, 1, 1) or self.carries(atom, atom, -1, 1)
        finally:
            centre[atom] = kept
            self._known.clear()

    def _matches(self, atom: int, image: int, fixed: Images) -> Iterator[Images]:
        """All ways to carry the neighbours of ``atom`` to those of ``image``: equal colours and bonds."""
        colour = self._s.colour
        row, target_row = self._s.bonding[atom], self._s.bonding[image]
        used = set(fixed.values())
        free = [n for n in row if n not in fixed]
        targets = [t for t in target_row if t not in used]
        if len(free) == 1 and len(targets) == 1:
            n, t = free[0], targets[0]
            if colour[n] == colour[t] and row[n] == target_row[t]:
                fixed[n] = t
                yield fixed
            return
        options = [[t for t in targets if colour[t] == colour[n] and target_row[t] == row[n]] for n in free]
        if all(len(o) == 1 for o in options):
            fixed.update((n, o[0]) for n, o in zip(free, options, strict=True))
            if len(fixed) == len(set(fixed.values())):
                yield fixed
            return
        yield from self._spread(free, options, 0, fixed)

    def _spread(self, free: list[int], options: list[list[int]], at: int, images: Images) -> Iterator[Images]:
        if at == len(free):
            yield images
            return
        used = set(images.values())
        for target in options[at]:
            if target not in used:
                yield from self._spread(free, options, at + 1, {**images, free[at]: target})

    def _settle(self, atom: int, image: int, images: Images, demand: Demand) -> bool:
        """Check senses at ``atom`` for this choice and decide every branch outside its ring system and parent."""
        self._steps += 1
        if self._steps > MOST_STEPS:
            raise SearchLimitError
        s = self._s
        if not self._sense_kept(atom, image, images, demand):
            return False
        parent = demand.parent
        if demand.twist >= 0 and not self._twist_kept(atom, image, images, demand):
            return False
        ring = s.ring_neighbours[atom]
        twisted = self._e.has_end[atom] or demand.twist >= 0
        for n, m in images.items():
            if n == parent or n in ring:
                continue
            twist = self._twist_behind(atom, n, image, m, images, demand) if twisted else NO_DEMAND
            if twist == IMPOSSIBLE or not self._branch(atom, n, image, m, demand.sign, twist):
                return False
        return True

    def _sense_kept(self, atom: int, image: int, images: Images, demand: Demand) -> bool:
        centre = self._e.centre
        if not centre[atom] and demand.cross < 0:
            return True
        parity = 1
        row = [images[n] for n in self._s.neighbours[atom]]
        for i, first in enumerate(row):
            for second in row[i + 1 :]:
                if first > second:
                    parity = -parity
        if centre[atom]:
            return centre[atom] * centre[image] * parity == demand.sign
        if self._s.hydrogens[atom] == 2 and self._e.has_end[atom]:
            return True  # =CH2 and amide NH2: settled through the far end of the element
        return parity * demand.sign == (1 if demand.cross == 0 else -1)

    def _twist_kept(self, atom: int, image: int, images: Images, demand: Demand) -> bool:
        """Far end of an element: its slots must be swapped (1) or not (0) as the near end demands."""
        end = self._e.ends.get((atom, demand.parent))
        if end is None or end.slots[0] == FREE:
            return True
        other = self._e.ends.get((image, demand.parent_image))
        return other is not None and int(images[end.slots[0]] != other.slots[0]) == demand.twist

    def _twist_behind(self, atom: int, n: int, image: int, m: int, images: Images, demand: Demand) -> int:
        """What the far end of the element over bond ``atom``-``n`` must do: 0, 1, or no demand."""
        end = self._e.ends.get((atom, n))
        if end is None:
            passing = demand.parent >= 0 and (atom, demand.parent) not in self._e.ends
            return demand.twist if passing else NO_DEMAND
        other = self._e.ends.get((image, m))
        if other is None:
            return IMPOSSIBLE
        if end.slots[0] == FREE:
            if demand.cross < 0:
                return NO_DEMAND
            swap = demand.cross
        else:
            swap = int(images[end.slots[0]] != other.slots[0])
        turned = self._e.axial[end.element] and demand.sign < 0
        return self._e.sense[end.element] ^ self._e.sense[other.element] ^ int(turned) ^ swap

    def _branch(self, x: int, p: int, y: int, q: int, sign: int, twist: int) -> bool:
        """True if the branch behind chain bond x-p can be carried onto the one behind y-q."""
        if p == q and x == y and sign > 0 and twist <= 0:
            return True
        key = (x, p, y, q, sign, twist)
        known = self._known.get(key)
        if known is not None:
            return known
        demand = Demand(sign, x, y, twist)
        answer = False
        if self._s.block[p] >= 0:
            answer = self._block(p, q, demand)
        else:
            for images in self._matches(p, q, {x: y}):
                if self._settle(p, q, images, demand):
                    answer = True
                    break
        self._known[key] = answer
        return answer

    def _order(self, start: int) -> tuple[list[tuple[int, int]], list[list[int]]]:
        """Ring system of ``start``: (atom, atom before) in walking order; atoms complete after each step."""
        if start in self._orders:
            return self._orders[start]
        ring = self._s.ring_neighbours
        walk = [(start, -1)]
        place = {start: 0}
        for atom, _ in walk:
            for n in ring[atom]:
                if n not in place:
                    place[n] = len(walk)
                    walk.append((n, atom))
        complete: list[list[int]] = [[] for _ in walk]
        for atom, at in place.items():
            complete[max(at, *(place[n] for n in ring[atom]))].append(atom)
        self._orders[start] = (walk, complete)
        return walk, complete

    def _block(self, start: int, image: int, demand: Demand) -> bool:
        """True if the ring system can be carried with ``start`` on ``image`` and all its branches with it."""
        s = self._s
        if s.block[image] < 0 or len(s.ring_neighbours[start]) != len(s.ring_neighbours[image]):
            return False
        walk, complete = self._order(start)
        images: Images = {start: image}
        return self._placed(1, walk, complete, images, {image}, demand)

    def _placed(
        self, at: int, walk: list[tuple[int, int]], complete: list[list[int]], images: Images,
        used: set[int], demand: Demand,
    ) -> bool:
        """Place atom number ``at`` of the walk and all behind it."""
        if at == len(walk):
            return not self._e.ring_axes or ring_axes_kept(self._s, self._e, images, demand.sign)
        ring, bonding, colour = self._s.ring_neighbours, self._s.bonding, self._s.colour
        atom, before = walk[at]
        linked = [n for n in ring[atom] if n in images]
        for target in ring[images[before]]:
            if target in used or colour[target] != colour[atom]:
                continue
            if any(bonding[target].get(images[n]) != bonding[atom][n] for n in linked):
                continue
            images[atom] = target
            used.add(target)
            if self._complete(complete[at], walk[0][0], images, demand) and self._placed(
                at + 1, walk, complete, images, used, demand
            ):
                return True
            del images[atom]
            used.discard(target)
        return False

    def _complete(self, atoms: list[int], start: int, images: Images, demand: Demand) -> bool:
        """Settle ring atoms whose ring neighbours are all placed."""
        for atom in atoms:
            fixed = {n: images[n] for n in self._s.ring_neighbours[atom]}
            own = Demand(demand.sign)
            if atom == start:
                own = demand
                if demand.parent >= 0:
                    fixed[demand.parent] = demand.parent_image
            if not any(
                self._settle(atom, images[atom], found, own)
                for found in self._matches(atom, images[atom], fixed)
            ):
                return False
        return True
