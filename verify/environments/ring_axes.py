"""Stereo elements that lie inside a ring system: double bonds of rings of eight and more atoms."""

from __future__ import annotations

from verify.environments.elements import Elements, End
from verify.environments.skeleton import Skeleton


def ring_axes_kept(s: Skeleton, elements: Elements, images: dict[int, int], sign: int) -> bool:
    """True if an operation given by ``images`` keeps every element inside the ring system it covers."""
    for number in elements.ring_axes:
        (first, onward), (last, back) = elements.legs[number]
        if first not in images or last not in images or onward not in s.ring_neighbours[first]:
            continue
        one = elements.ends[(first, onward)]
        two = elements.ends[(last, back)]
        image_one = elements.ends.get((images[first], images[onward]))
        image_two = elements.ends.get((images[last], images[back]))
        if image_one is None or image_two is None:
            return False
        wanted = elements.sense[number] ^ elements.sense[image_one.element]
        wanted ^= int(elements.axial[number] and sign < 0)
        if _swap(one, image_one, images) ^ _swap(two, image_two, images) != wanted:
            return False
    return True


def _swap(end: End, other: End, images: dict[int, int]) -> int:
    """1 if the ring member among the slots of an end lands in the other slot."""
    return int(any(slot in images and images[slot] == other.slots[1 - i] for i, slot in enumerate(end.slots)))
