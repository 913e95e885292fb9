"""Is there a symmetry operation that carries one atom to another?

The substitution test asks whether two positions, marked in turn, give the same compound, mirror images or
diastereomers. That is the question whether an automorphism of the constitution exists that keeps the sense of every
stereo element (sign +1: homotopic), reverses every chiral one (sign -1: enantiotopic), or neither. Branches over
chain bonds are decided once each and remembered; only ring systems need backtracking.
"""

from __future__ import annotations

from collections.abc import Iterator

from verify.environments.elements import FREE, Elements
from verify.environments.skeleton import Skeleton

MOST_STEPS = 60_000
Images = dict[int, int]


class SearchLimit(Exception):
    """The bound on steps was reached; the question stays open."""


class Search:
    """Questions about one skeleton under one choice of senses for its open elements."""

    def __init__(self, skeleton: Skeleton, elements: Elements) -> None:
        self._s = skeleton
        self._e = elements
        self._known: dict[tuple[int, int, int, int, int, int], bool] = {}
        self._orders: dict[int, tuple[list[tuple[int, int]], list[list[int]]]] = {}
        self._steps = 0

    def carries(self, atom: int, image: int, sign: int, cross: int = -1) -> bool:
        """True if an operation of this sign carries ``atom`` to ``image``.

        ``cross`` 0/1 demands in addition that the first hydrogen of a CH2 lands on the first/second one (-1: either).
        Gives up with False when the bound on steps is reached.
        """
        if self._s.colour[atom] != self._s.colour[image]:
            return False
        self._steps = 0
        try:
            if self._s.block[atom] >= 0:
                return self._block(atom, image, (-1, -1), sign, -1, cross)
            return any(
                self._settle(atom, image, images, -1, sign, -1, cross)
                for images in self._matches(atom, image, {})
            )
        except (SearchLimit, RecursionError):
            return False

    def same_branch(self, atom: int, a: int, b: int) -> bool:
        """True if chain branches ``a`` and ``b`` at ``atom`` are alike in sense too."""
        self._steps = 0
        try:
            return self._branch(atom, a, atom, b, 1, -1)
        except (SearchLimit, RecursionError):
            return False

    def turns_alone(self, atom: int) -> bool:
        """True if reversing the sense of this ring atom alone gives the same compound or its mirror image."""
        centre = self._e.centre
        if not centre[atom]:
            return False
        kept = centre[atom]
        try:
            for sign in (1, -1):
                # an operation that fixes the atom and does there the opposite of what it does elsewhere
                centre[atom] = 0
                self._known.clear()
                if self.carries(atom, atom, sign, 1):
                    return True
        finally:
            centre[atom] = kept
            self._known.clear()
        return False

    def _matches(self, atom: int, image: int, fixed: Images) -> Iterator[Images]:
        """All ways to carry the neighbours of ``atom`` to those of ``image``, colours and bond orders kept."""
        colour, order = self._s.colour, self._s.order
        free = [n for n in self._s.neighbours[atom] if n not in fixed]
        used = set(fixed.values())
        targets = [n for n in self._s.neighbours[image] if n not in used]
        options = [
            [t for t in targets if colour[t] == colour[n] and order[image][t] == order[atom][n]] for n in free
        ]
        if all(len(o) == 1 for o in options):
            yield {**fixed, **{n: o[0] for n, o in zip(free, options, strict=True)}}
            return
        yield from self._spread(free, options, 0, dict(fixed))

    def _spread(self, free: list[int], options: list[list[int]], at: int, images: Images) -> Iterator[Images]:
        if at == len(free):
            yield images
            return
        used = set(images.values())
        for target in options[at]:
            if target not in used:
                yield from self._spread(free, options, at + 1, {**images, free[at]: target})

    def _settle(
        self, atom: int, image: int, images: Images, parent: int, sign: int, twist: int, cross: int
    ) -> bool:
        """Check senses at ``atom`` for this choice and decide every branch outside its ring system and parent."""
        self._steps += 1
        if self._steps > MOST_STEPS:
            raise SearchLimit
        s = self._s
        if not self._sense_kept(atom, image, images, sign, cross):
            return False
        if parent >= 0 and twist >= 0 and not self._twist_kept(atom, image, images, parent, twist):
            return False
        ring = s.ring_neighbours[atom]
        return all(
            self._branch(atom, n, image, m, sign, self._demand(atom, n, image, m, images, sign, parent, twist, cross))
            for n, m in images.items()
            if n != parent and n not in ring
        )

    def _sense_kept(self, atom: int, image: int, images: Images, sign: int, cross: int) -> bool:
        centre = self._e.centre
        if not centre[atom] and cross < 0:
            return True
        parity = 1
        row = [images[n] for n in self._s.neighbours[atom]]
        for i, first in enumerate(row):
            for second in row[i + 1 :]:
                if first > second:
                    parity = -parity
        if centre[atom]:
            return centre[atom] * centre[image] * parity == sign
        if self._s.hydrogens[atom] == 2 and (self._s.unsaturated(atom) or self._s.number[atom] == 7):
            return True  # =CH2 and amide NH2: settled through the far end of the element
        return parity * sign == (1 if cross == 0 else -1)

    def _twist_kept(self, atom: int, image: int, images: Images, parent: int, twist: int) -> bool:
        """Far end of an element: its slots must be swapped (1) or not (0) as the near end demands."""
        end = self._e.ends.get((atom, parent))
        if end is None or end.slots[0] == FREE:
            return True
        other = self._e.ends[(image, images[parent])]
        return int(images[end.slots[0]] != other.slots[0]) == twist

    def _demand(
        self, atom: int, n: int, image: int, m: int, images: Images, sign: int, parent: int, twist: int, cross: int
    ) -> int:
        """What the far end of the element over bond ``atom``-``n`` must do: 0, 1, or -1 for no demand."""
        end = self._e.ends.get((atom, n))
        if end is None:
            passing = parent >= 0 and twist >= 0 and (atom, parent) not in self._e.ends
            return twist if passing else -1
        other = self._e.ends[(image, m)]
        if end.slots[0] == FREE:
            if cross < 0:
                return -1
            swap = cross
        else:
            swap = int(images[end.slots[0]] != other.slots[0])
        turned = self._e.axial[end.element] and sign < 0
        return self._e.sense[end.element] ^ self._e.sense[other.element] ^ int(turned) ^ swap

    def _branch(self, x: int, p: int, y: int, q: int, sign: int, twist: int) -> bool:
        """True if the branch behind chain bond x-p can be carried onto the one behind y-q."""
        if p == q and x == y and sign > 0 and twist <= 0:
            return True
        key = (x, p, y, q, sign, twist)
        known = self._known.get(key)
        if known is not None:
            return known
        if self._s.block[p] >= 0:
            answer = self._block(p, q, (x, y), sign, twist, -1)
        else:
            answer = False
            for images in self._matches(p, q, {x: y}):
                if self._settle(p, q, images, x, sign, twist, -1):
                    answer = True
                    break
        self._known[key] = answer
        return answer

    def _order(self, start: int) -> tuple[list[tuple[int, int]], list[list[int]]]:
        """Ring system of ``start``: (atom, atom before) in walking order, and the atoms complete after each step."""
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

    def _block(self, start: int, image: int, entry: tuple[int, int], sign: int, twist: int, cross: int) -> bool:
        """True if the ring system can be carried with ``start`` on ``image`` and all its branches with it."""
        if self._s.block[image] < 0:
            return False
        walk, complete = self._order(start)
        ring, order, colour = self._s.ring_neighbours, self._s.order, self._s.colour
        images: Images = {start: image}
        used = {image}

        def finished(at: int) -> bool:
            for atom in complete[at]:
                fixed = {n: images[n] for n in ring[atom]}
                parent = -1
                if atom == start and entry[0] >= 0:
                    fixed[entry[0]] = entry[1]
                    parent = entry[0]
                own = cross if atom == start else -1
                need = twist if atom == start else -1
                if not any(
                    self._settle(atom, images[atom], m, parent, sign, need, own)
                    for m in self._matches(atom, images[atom], fixed)
                ):
                    return False
            return at + 1 < len(walk) or self._ring_axes_kept(walk, images, sign)

        def place(at: int) -> bool:
            if at == len(walk):
                return True
            atom, before = walk[at]
            linked = [n for n in ring[atom] if n in images]
            for target in ring[images[before]]:
                if target in used or colour[target] != colour[atom]:
                    continue
                if any(order[target].get(images[n]) != order[atom][n] for n in linked):
                    continue
                images[atom] = target
                used.add(target)
                if finished(at) and place(at + 1):
                    return True
                del images[atom]
                used.discard(target)
            return False

        return len(ring[start]) == len(ring[image]) and finished(0) and place(1)

    def _ring_axes_kept(self, walk: list[tuple[int, int]], images: Images, sign: int) -> bool:
        """Elements inside the ring system (double bonds of large rings)."""
        ends = self._e.ends
        for atom, _ in walk:
            for n in self._s.ring_neighbours[atom]:
                end = ends.get((atom, n))
                if end is None:
                    continue
                first, last = self._e.places[end.element]
                if first != atom:
                    continue
                back = next((b for b in self._s.ring_neighbours[last] if ends.get((last, b)) and
                             ends[(last, b)].element == end.element), -1)
                if back < 0 or last not in images:
                    continue
                swaps = [self._ring_swap(a, b, images) for a, b in ((atom, n), (last, back))]
                other = ends[(images[atom], images[n])]
                wanted = self._e.sense[end.element] ^ self._e.sense[other.element]
                wanted ^= int(self._e.axial[end.element] and sign < 0)
                if (swaps[0] ^ swaps[1]) != wanted:
                    return False
        return True

    def _ring_swap(self, atom: int, inward: int, images: Images) -> int:
        """1 if the ring member among the slots of an end lands in the other slot."""
        slots = self._e.ends[(atom, inward)].slots
        others = self._e.ends[(images[atom], images[inward])].slots
        return int(any(slot in images and images[slot] == others[1 - i] for i, slot in enumerate(slots)))
