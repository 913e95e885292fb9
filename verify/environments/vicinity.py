"""Which environments may be seen twice, and why."""

from __future__ import annotations

from verify.environments.elements import FREE
from verify.environments.part import Part
from verify.structure.model import Structure

ROTAMER_REACH = 6  # bonds from a slow bond within which a second set of signals is seen


class Doubling:
    """Reasons for a second set of signals, by distance from what causes it."""

    def __init__(self, part: Part, structure: Structure) -> None:
        self._everywhere = "undefined stereo" if "diastereomers-open" in structure.flags else ""
        self._near: dict[int, str] = {}
        elements, s = part.elements, part.skeleton
        for number, why in enumerate(elements.slow):
            if not why or why == "hindered axis" or not _two_rotamers(part, number):
                continue
            ends = (elements.legs[number][0][0], elements.legs[number][1][0])
            for atom in _within(s.neighbours, ends, ROTAMER_REACH):
                self._near.setdefault(atom, f"{why} rotamer")

    def reason(self, atom: int) -> str:
        """Why the environment on this atom may be doubled, "" if it may not."""
        return self._near.get(atom, "") or self._everywhere


def _two_rotamers(part: Part, number: int) -> bool:
    """True if the slots of both ends differ, so that two different rotamers exist."""
    colour = part.skeleton.colour
    return not any(
        first == FREE or (second != FREE and colour[first] == colour[second])
        for first, second in part.elements.slots(number)
    )


def _within(neighbours: list[list[int]], starts: tuple[int, int], reach: int) -> list[int]:
    found = dict.fromkeys(starts)
    edge = list(starts)
    for _ in range(reach):
        edge = [n for a in edge for n in neighbours[a] if n not in found]
        found.update(dict.fromkeys(edge))
    return list(found)
