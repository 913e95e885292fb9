"""The stage: ``Structure`` in, ``EnvironmentSet`` out."""

from __future__ import annotations

from dataclasses import replace

from rdkit import Chem

from verify.environments.build import Site, carbon_sites, hydrogen_sites, spin_sites
from verify.environments.couple import with_neighbours
from verify.environments.model import Environment, EnvironmentSet
from verify.environments.part import Part
from verify.environments.reading import read_skeleton
from verify.environments.symmetry import find_orbits
from verify.environments.vicinity import Doubling
from verify.structure.model import Structure

NUCLEI = ("1H", "13C", "19F", "31P")


def find_environments(structure: Structure) -> EnvironmentSet:
    """All environments of all components; copies of one component are told once.

    Order: components as listed, in each 1H, 13C, 19F, 31P, then by first carrier.
    """
    made: list[Environment] = []
    for part in _parts(structure):
        sites = [*hydrogen_sites(part), *carbon_sites(part), *spin_sites(part)]
        start = len(made)
        doubling = Doubling(part, structure)
        plain = [_environment(part, site, start + i, doubling) for i, site in enumerate(sites)]
        made += with_neighbours(part, sites, _with_partners(plain))
    return EnvironmentSet(tuple(made))


def environments(structure: Structure, nucleus: str = "1H") -> tuple[Environment, ...]:
    """Environments of one nucleus ("1H", "13C", "19F" or "31P"), ``index`` counted over all nuclei."""
    return find_environments(structure).of(nucleus)


def _parts(structure: Structure) -> list[Part]:
    """One Part per distinct component, with the number of nuclei scaled by copies and stoichiometry."""
    drawn = "@" in structure.smiles or "/" in structure.smiles or "\\" in structure.smiles
    several = len(structure.components) > 1
    skeletons = [read_skeleton(c.mol, drawn or several) for c in structure.components]
    hydrogens: dict[int, int] = {}
    for component, skeleton in zip(structure.components, skeletons, strict=True):
        hydrogens.update(zip(component.atoms, skeleton.hydrogens, strict=True))
    first: dict[int, int] = {}
    free = len(hydrogens)
    for atom in sorted(hydrogens):
        first[atom] = free
        free += hydrogens[atom]
    seen: dict[str, int] = {}
    parts: list[Part] = []
    offset = 0
    for number, (component, skeleton) in enumerate(zip(structure.components, skeletons, strict=True)):
        name = Chem.MolToSmiles(component.mol) if several else ""
        if name in seen:
            copy = parts[seen[name]]
            parts[seen[name]] = replace(copy, scale=copy.scale + component.per_molecule)
            continue
        seen[name] = len(parts)
        orbits, elements = find_orbits(skeleton)
        place = list(component.atoms)
        parts.append(Part(number, skeleton, elements, orbits, place, [first[a] for a in place],
                          component.per_molecule, offset))
        offset += skeleton.size
    return parts


def _environment(part: Part, site: Site, index: int, doubling: Doubling) -> Environment:
    """Environment without partners and couplings."""
    return Environment(
        index=index,
        nucleus=site.nucleus,
        atoms=tuple(sorted(site.nuclei)),
        carriers=tuple(part.place[c] for c in site.carriers),
        count=len(site.nuclei) * part.scale,
        kind=site.kind,
        constitution=part.offset + part.skeleton.colour[site.carriers[0]],
        partners=(),
        exchangeable=site.exchangeable,
        may_double=doubling.reason(site.carriers[0]),
        may_vanish=site.may_vanish,
        attached_h=site.attached_h,
        component=part.component,
        magnetically_equivalent=True,
        neighbours=(),
        reason=site.reason,
    )


def _with_partners(plain: list[Environment]) -> list[Environment]:
    """Environments of equal constitution told to each other."""
    groups: dict[tuple[str, int], list[int]] = {}
    for e in plain:
        groups.setdefault((e.nucleus, e.constitution), []).append(e.index)
    done = []
    for e in plain:
        others = tuple(i for i in groups[(e.nucleus, e.constitution)] if i != e.index)
        if others:
            words = f"{e.reason}; may coincide with {'another' if len(others) == 1 else 'others'} of equal constitution"
            e = replace(e, partners=others, kind="diastereotopic", reason=words)
        done.append(e)
    return done
