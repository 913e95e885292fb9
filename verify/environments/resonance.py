"""Charge spread over a conjugated system: bonds and atoms that differ on paper only.

An amidinium, a cyanine, an imidazolium or a cyclopentadienide is drawn with one of several equal Lewis structures. For
symmetry the charge and the bond orders of each charged conjugated system are evened out.
"""

from __future__ import annotations

from dataclasses import dataclass

from rdkit import Chem

from verify.environments.skeleton import AROMATIC, Rows


@dataclass(frozen=True, slots=True)
class Evened:
    """``colour`` and ``bonding`` with charge spread; ``bonds``: chain bonds (low, high) of partial double character.

    ``blurred``: bonds (both directions) between a spread ring and its surroundings, which are no stereo elements.
    """

    colour: list[int]
    bonding: Rows
    bonds: tuple[tuple[int, int], ...]
    blurred: frozenset[tuple[int, int]]


def even_out(mol: Chem.Mol, order: Rows, rings: tuple[tuple[int, ...], ...]) -> Evened | None:
    """Spread the charge of every charged conjugated system; None if there is none."""
    systems = [part for part in _systems(mol) if sum(mol.GetAtomWithIdx(a).GetFormalCharge() for a in part)]
    if not systems:
        return None
    bonding = [dict(row) for row in order]
    copy = Chem.RWMol(mol)
    bonds: list[tuple[int, int]] = []
    blurred: set[tuple[int, int]] = set()
    for part in systems:
        inside = set(part)
        ringed = {a for ring in rings if inside.issuperset(ring) for a in ring}
        for a in part:
            copy.GetAtomWithIdx(a).SetFormalCharge(0)
            for b in order[a]:
                if b not in inside or b < a or not mol.GetBondBetweenAtoms(a, b).GetIsConjugated():
                    continue
                bonding[a][b] = bonding[b][a] = AROMATIC
                copy.GetBondBetweenAtoms(a, b).SetBondType(Chem.BondType.AROMATIC)
                if a in ringed or b in ringed:
                    blurred |= {(a, b), (b, a)}
                elif not mol.GetBondBetweenAtoms(a, b).IsInRing():
                    bonds.append((a, b))
    colour = list(Chem.CanonicalRankAtoms(copy, breakTies=False, includeChirality=False))
    return Evened(colour, bonding, tuple(bonds), frozenset(blurred))


def _systems(mol: Chem.Mol) -> list[list[int]]:
    """Conjugated systems (atoms joined by conjugated bonds), each ascending."""
    linked: dict[int, list[int]] = {}
    for bond in mol.GetBonds():
        if bond.GetIsConjugated() or bond.GetIsAromatic():
            a, b = bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()
            linked.setdefault(a, []).append(b)
            linked.setdefault(b, []).append(a)
    seen: set[int] = set()
    found = []
    for start in sorted(linked):
        if start in seen:
            continue
        part = [start]
        seen.add(start)
        for atom in part:
            for other in linked[atom]:
                if other not in seen:
                    seen.add(other)
                    part.append(other)
        found.append(sorted(part))
    return found
