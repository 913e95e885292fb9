"""Joins environments by their couplings and judges magnetic equivalence."""

from __future__ import annotations

from dataclasses import replace

from verify.environments.build import Site
from verify.environments.model import Environment, Neighbour
from verify.environments.network import LONGEST, SPINS, chains_from, may_show, path_words
from verify.environments.part import Part

CARBON_REACH = 4
Key = tuple[int, int, str]


class _Map:
    """Where each spin of a component sits: node to environment, and chains from each carrier."""

    def __init__(self, part: Part, sites: list[Site], plain: list[Environment]) -> None:
        self.part = part
        self.home: dict[tuple[int, int], Environment] = {}
        self.spin: dict[int, Environment] = {}
        for site, environment in zip(sites, plain, strict=True):
            if site.nucleus == "1H":
                self.home.update(dict.fromkeys(site.nodes, environment))
            elif site.nucleus != "13C":
                self.spin.update(dict.fromkeys(site.carriers, environment))
        self.hetero = bool(self.spin)
        self._chains: dict[int, dict[int, tuple[int, ...]]] = {}

    def chains(self, atom: int) -> dict[int, tuple[int, ...]]:
        """Chains of up to three bonds, five where the component holds F or P."""
        if atom not in self._chains:
            self._chains[atom] = chains_from(self.part.skeleton, atom, 5 if self.hetero else 3)
        return self._chains[atom]

    def nodes(self, atom: int) -> list[tuple[int, int]]:
        """Hydrogen nodes on an atom."""
        if not self.part.skeleton.hydrogens[atom]:
            return []
        return [(atom, 0), (atom, 1)] if atom in self.part.orbits.pairs else [(atom, 0)]


def with_neighbours(part: Part, sites: list[Site], plain: list[Environment]) -> list[Environment]:
    """The environments with couplings and magnetic equivalence filled in."""
    known = _Map(part, sites, plain)
    done = []
    for site, environment in zip(sites, plain, strict=True):
        if site.nucleus == "13C" and not known.hetero:
            done.append(environment)
            continue
        neighbours = _neighbours(known, site, environment)
        even = site.nucleus == "13C" or len(site.nuclei) == 1 or _rows_agree(known, site)
        done.append(replace(environment, neighbours=neighbours, magnetically_equivalent=even))
    return done


def _neighbours(known: _Map, site: Site, own: Environment) -> tuple[Neighbour, ...]:
    """Couplings of the first nucleus of a site."""
    found: dict[Key, Neighbour] = {}
    atom, which = site.nodes[0]
    carried = int(site.nucleus == "1H")
    nucleus = min(known.part.hydrogens_of(atom, which)) if carried else known.part.place[atom]
    if carried and atom in known.part.orbits.pairs:
        twin = known.home[(atom, 1 - which)]
        if twin.index != own.index:
            path = (nucleus, known.part.place[atom], *known.part.hydrogens_of(atom, 1 - which))
            found[(twin.index, 2, "")] = Neighbour(twin.index, "1H", 1, 2, path)
    for target, chain in known.chains(atom).items():
        if target == atom and (carried or site.nucleus == "13C"):
            _add_spin(known, found, own, (nucleus,), target, chain, carried)
            continue
        if target != atom:
            _add_spin(known, found, own, (nucleus,), target, chain, carried)
        if site.nucleus != "13C":
            _add_hydrogens(known, found, own, nucleus, target, chain, carried)
    return tuple(sorted(found.values(), key=lambda n: (n.bonds, n.environment, n.path)))


def _add_hydrogens(
    known: _Map, found: dict[Key, Neighbour], own: Environment, nucleus: int, target: int,
    chain: tuple[int, ...], carried: int,
) -> None:
    """Hydrogens on the last atom of a chain."""
    s = known.part.skeleton
    bonds = len(chain) + carried
    hetero = not carried
    if not s.hydrogens[target] or bonds > LONGEST[own.nucleus] or not may_show(s, chain, bonds, hetero):
        return
    words = path_words(s, chain)
    for node in known.nodes(target):
        other = known.home[node]
        if bonds > 3 and (other.exchangeable or own.exchangeable):
            continue
        hydrogens = known.part.hydrogens_of(*node)
        head = (nucleus,) if carried else ()
        path = (*head, *(known.part.place[a] for a in chain), hydrogens[0])
        _count(found, (other.index, bonds, words), Neighbour(
            other.index, "1H", len(hydrogens), bonds, path, other.index == own.index))


def _add_spin(
    known: _Map, found: dict[Key, Neighbour], own: Environment, head: tuple[int, ...], target: int,
    chain: tuple[int, ...], carried: int,
) -> None:
    """The last atom of a chain itself, if it is F or P."""
    other = known.spin.get(target)
    if other is None:
        return
    s = known.part.skeleton
    bonds = len(chain) - 1 + carried
    longest = CARBON_REACH if own.nucleus == "13C" else min(LONGEST[own.nucleus], LONGEST[SPINS[s.number[target]]])
    if bonds > longest or (bonds > 3 and own.exchangeable) or not may_show(s, chain, bonds, True):
        return
    path = (*(head if carried else ()), *(known.part.place[a] for a in chain))
    _count(found, (other.index, bonds, path_words(s, chain)), Neighbour(
        other.index, other.nucleus, 1, bonds, path, other.index == own.index))


def _count(found: dict[Key, Neighbour], key: Key, new: Neighbour) -> None:
    old = found.get(key)
    found[key] = new if old is None else replace(old, count=old.count + new.count)


def _rows_agree(known: _Map, site: Site) -> bool:
    """True if every nucleus of the site has the same path to each spin outside it."""
    if site.nucleus == "1H" and len({n[0] for n in site.nodes}) < len(site.nodes) and _beside_pair(known, site):
        return False
    first: dict[int, str] | None = None
    for atom in site.carriers:
        row = _row(known, atom, site)
        if first is None:
            first = row
        elif row != first:
            return False
    return True


def _row(known: _Map, atom: int, site: Site) -> dict[int, str]:
    """Spin-bearing atom outside the site to the words of the path that leads there."""
    s = known.part.skeleton
    carried = int(site.nucleus == "1H")
    row = {}
    for target, chain in known.chains(atom).items():
        if target in site.carriers:
            continue
        bonds = len(chain) + carried
        shows = s.hydrogens[target] and bonds <= 5 and may_show(s, chain, bonds, not carried)
        if shows or (target in known.spin and may_show(s, chain, bonds - 1, True)):
            row[target] = path_words(s, chain)
    return row


def _beside_pair(known: _Map, site: Site) -> bool:
    """A CH2 whose two H are one signal beside another CH2 or CF2: AA'XX', not A2X2."""
    s = known.part.skeleton
    atom = site.nodes[0][0]
    for n in s.neighbours[atom]:
        if n in known.part.orbits.pairs:
            return True
        if sum(1 for f in s.neighbours[n] if s.number[f] == 9) == 2:
            return True
    return False
