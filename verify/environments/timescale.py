"""What does not average at room temperature: rotation about partial double bonds and hindered axes.

Barriers of 60 to 90 kJ/mol (amides, carbamates, thioamides, nitrosamines, vinylogous amides) separate signals; common
practice, from memory.
"""

from __future__ import annotations

from verify.environments.skeleton import AROMATIC, DOUBLE, SINGLE, Skeleton


def slow_bonds(s: Skeleton) -> list[tuple[int, int, str]]:
    """(nitrogen, other end, why) for single bonds to nitrogen that turn slowly."""
    found = []
    for atom in range(s.size):
        if s.number[atom] != 7 or s.charge[atom] > 0 or s.unsaturated(atom):
            continue
        if len(s.neighbours[atom]) + s.hydrogens[atom] != 3 or s.hydrogens[atom] == 1:
            continue
        for other in s.neighbours[atom]:
            if other in s.ring_neighbours[atom]:
                continue
            why = _why_slow(s, atom, other)
            if why:
                found.append((atom, other, why))
    return found


def _why_slow(s: Skeleton, nitrogen: int, other: int) -> str:
    """Kind of partial double bond between an amine-like nitrogen and ``other``, "" if it turns freely."""
    double = [n for n, code in s.order[other].items() if code == DOUBLE]
    if len(double) != 1 or s.aromatic(other):
        return ""
    far = s.number[double[0]]
    if s.number[other] == 7:
        return {8: "nitrosamine", 7: "triazene"}.get(far, "")
    if s.number[other] != 6:
        return ""
    if far == 6:
        return "vinylogous amide" if _withdraws(s, double[0], other) else ""
    rest = [s.number[n] for n in s.neighbours[other] if n not in (nitrogen, double[0])]
    if far == 8:
        if not rest:
            return "formamide"
        return {7: "urea", 8: "carbamate"}.get(rest[0], "amide")
    return {16: "thioamide", 34: "selenoamide", 7: "amidine"}.get(far, "")


def _withdraws(s: Skeleton, alkene: int, inner: int) -> bool:
    """True if the far alkene carbon bears C=O, C=N, cyano, nitro or sulfonyl."""
    for n in s.neighbours[alkene]:
        if n == inner:
            continue
        if s.number[n] in (6, 7, 16) and any(
            code in (DOUBLE, 6) and s.number[m] in (7, 8) for m, code in s.order[n].items()
        ):
            return True
    return False


def hindered_axes(s: Skeleton) -> list[tuple[int, int]]:
    """Single bonds between aromatic rings with at least three ortho groups larger than H and F."""
    found = []
    for atom in range(s.size):
        if not s.aromatic(atom):
            continue
        for other, code in s.order[atom].items():
            if other < atom or code != SINGLE or other in s.ring_neighbours[atom] or not s.aromatic(other):
                continue
            five = sum(1 for end in (atom, other) if _in_five_ring(s, end))
            if _ortho_groups(s, atom) + _ortho_groups(s, other) - five >= 3:
                found.append((atom, other))
    return found


def _in_five_ring(s: Skeleton, atom: int) -> bool:
    return any(len(ring) == 5 and atom in ring for ring in s.rings)


def _ortho_groups(s: Skeleton, atom: int) -> int:
    """Ortho positions of a ring atom that carry more than H or F."""
    count = 0
    for ortho, code in s.order[atom].items():
        if code != AROMATIC:
            continue
        outward = [n for n in s.neighbours[ortho] if n != atom and s.number[n] not in (1, 9)]
        count += len(outward) >= 2
    return count
