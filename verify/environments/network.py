"""Couplings between environments by path, and magnetic equivalence.

Which paths may show: all over two and three bonds; over four where a multiple bond, an aromatic ring or a rigid W
lies on the way; over five through alkynes, across a double bond and across an aromatic ring; to 19F over five and
to 31P over four bonds. Common practice, from memory; sizes are the business of the expectations.
"""

from __future__ import annotations

from itertools import pairwise

from verify.environments.skeleton import AROMATIC, DOUBLE, SINGLE, Skeleton

SPINS = {9: "19F", 15: "31P"}
LONGEST = {"1H": 5, "19F": 5, "31P": 4}
MARKS = {SINGLE: "-", AROMATIC: ":", DOUBLE: "=", 6: "#"}


def chains_from(s: Skeleton, atom: int, longest: int) -> dict[int, tuple[int, ...]]:
    """Shortest chain of heavy atoms from ``atom`` to each atom within ``longest`` bonds.

    Among equally short chains the most unsaturated wins, since it carries the larger coupling.
    """
    found: dict[int, tuple[int, ...]] = {atom: (atom,)}
    weight = {atom: 0}
    edge = [atom]
    for _ in range(longest):
        reached: dict[int, tuple[int, ...]] = {}
        for last in edge:
            chain = found[last]
            for n, code in s.order[last].items():
                if n in found:
                    continue
                total = weight[last] + code
                if n not in reached or total > weight[n]:
                    reached[n] = (*chain, n)
                    weight[n] = total
        found.update(reached)
        edge = list(reached)
    return found


def may_show(s: Skeleton, chain: tuple[int, ...], bonds: int, heteronuclear: bool) -> bool:
    """True if a coupling over this chain of heavy atoms is ever resolved."""
    if bonds <= 3:
        return True
    codes = [s.order[a][b] for a, b in pairwise(chain)]
    if heteronuclear:
        return bonds <= 4 or any(c != SINGLE for c in codes)
    if bonds == 4:
        return any(c != SINGLE for c in codes) or rigid_w(s, chain)
    if bonds == 5:
        if all(c == AROMATIC for c in codes):
            return True
        middle = codes[1] if len(codes) == 3 else SINGLE
        return middle != SINGLE or (codes[0] != SINGLE and codes[2] != SINGLE)
    return False


def rigid_w(s: Skeleton, chain: tuple[int, ...]) -> bool:
    """True for three saturated atoms in a small or bridged ring, where a W path is held."""
    if len(chain) != 3 or not all(s.number[a] == 6 for a in chain):
        return False
    a, b, c = chain
    if b not in s.ring_neighbours[a] or c not in s.ring_neighbours[b]:
        return False
    held = [r for r in s.rings if a in r and b in r and c in r]
    bridged = any(len(s.ring_neighbours[x]) > 2 for x in chain)
    return any(len(r) <= 4 for r in held) or (bridged and any(len(r) <= 6 for r in held))


def path_words(s: Skeleton, chain: tuple[int, ...]) -> str:
    """Elements and bond orders along a chain: what makes two couplings of equal length differ."""
    text = str(s.number[chain[0]])
    for a, b in pairwise(chain):
        text += f"{MARKS.get(s.order[a][b], '~')}{s.number[b]}"
    return text
