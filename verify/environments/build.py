"""From symmetry classes to sites: sets of nuclei with one shift."""

from __future__ import annotations

from dataclasses import dataclass

from verify.environments.exchange import exchange_class, vanishing_carbon, vanishing_hydrogen
from verify.environments.network import SPINS
from verify.environments.part import Part
from verify.environments.symmetry import Node

KIND_WORDS = {
    "single": "one nucleus",
    "homotopic": "interchanged by rotation",
    "enantiotopic": "interchanged by reflection only (one signal in an achiral solvent)",
}


@dataclass(frozen=True, slots=True)
class Site:
    """One environment before it knows its surroundings; ``nodes`` and ``carriers`` count inside the component."""

    nucleus: str
    nodes: tuple[Node, ...]
    carriers: tuple[int, ...]
    nuclei: tuple[int, ...]
    kind: str
    exchangeable: str
    may_vanish: str
    attached_h: int
    reason: str


def hydrogen_sites(part: Part) -> list[Site]:
    """Sites of 1H, by first carrier."""
    s, orbits = part.skeleton, part.orbits
    groups: dict[int, list[Node]] = {}
    for node, label in orbits.all.items():
        if s.hydrogens[node[0]]:
            groups.setdefault(label, []).append(node)
    sites = []
    for nodes in sorted(groups.values()):
        atom = nodes[0][0]
        nuclei = tuple(h for n in nodes for h in part.hydrogens_of(*n))
        kind = _kind(len(nuclei), {orbits.proper[n] for n in nodes})
        carriers = tuple(sorted({n[0] for n in nodes}))
        exchangeable = exchange_class(s, atom)
        vanish = "" if exchangeable else vanishing_hydrogen(s, atom)
        name = _group_name(part, atom)
        reason = f"{exchangeable} {name}".strip() + _times(len(carriers)) + f": {KIND_WORDS[kind]}"
        sites.append(Site("1H", tuple(nodes), carriers, nuclei, kind, exchangeable, vanish, -1, reason))
    return sites


def carbon_sites(part: Part) -> list[Site]:
    """Sites of 13C, by first atom."""
    s = part.skeleton
    return [
        _atom_site(part, atoms, "13C", vanishing_carbon(s, atoms[0]), s.hydrogens[atoms[0]])
        for atoms in _atom_groups(part, (6,))
    ]


def spin_sites(part: Part) -> list[Site]:
    """Sites of 19F, then 31P, by first atom."""
    return [
        _atom_site(part, atoms, nucleus, "", -1)
        for number, nucleus in SPINS.items()
        for atoms in _atom_groups(part, (number,))
    ]


def _atom_groups(part: Part, numbers: tuple[int, ...]) -> list[list[int]]:
    """Atoms of these elements by symmetry class, each ascending, classes by first atom."""
    groups: dict[tuple[int, ...], list[int]] = {}
    for atom, number in enumerate(part.skeleton.number):
        if number in numbers:
            groups.setdefault(_label(part, part.orbits.all, atom), []).append(atom)
    return list(groups.values())


def _label(part: Part, classes: dict[Node, int], atom: int) -> tuple[int, ...]:
    if atom in part.orbits.pairs:
        return tuple(sorted({classes[(atom, 0)], classes[(atom, 1)]}))
    return (classes[(atom, 0)],)


def _atom_site(part: Part, atoms: list[int], nucleus: str, vanish: str, attached: int) -> Site:
    kind = _kind(len(atoms), {_label(part, part.orbits.proper, a) for a in atoms})
    name = _group_name(part, atoms[0])
    return Site(
        nucleus=nucleus,
        nodes=tuple((a, 0) for a in atoms),
        carriers=tuple(atoms),
        nuclei=tuple(part.place[a] for a in atoms),
        kind=kind,
        exchangeable="",
        may_vanish=vanish,
        attached_h=attached,
        reason=f"{name}{_times(len(atoms))}: {KIND_WORDS[kind]}",
    )


def _kind(count: int, proper: set[int] | set[tuple[int, ...]]) -> str:
    if count == 1:
        return "single"
    return "homotopic" if len(proper) == 1 else "enantiotopic"


def _group_name(part: Part, atom: int) -> str:
    """CH3, NH2, C, ... as a chemist would write the group."""
    s = part.skeleton
    hydrogens = s.hydrogens[atom]
    symbol = SYMBOLS.get(s.number[atom], "X")
    return symbol + ("" if not hydrogens else "H" if hydrogens == 1 else f"H{hydrogens}")


def _times(carriers: int) -> str:
    return "" if carriers == 1 else f" x {carriers}"


SYMBOLS = {
    1: "H", 5: "B", 6: "C", 7: "N", 8: "O", 9: "F", 14: "Si", 15: "P", 16: "S", 17: "Cl", 32: "Ge", 33: "As",
    34: "Se", 35: "Br", 50: "Sn", 52: "Te", 53: "I",
}
