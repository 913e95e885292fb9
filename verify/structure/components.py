"""Which fragment is the compound, which came with it as counter-ion or solvate."""

from __future__ import annotations

from collections.abc import Mapping
from functools import lru_cache

import yaml
from rdkit import Chem

from verify.errors import ConfigurationError
from verify.resources import shipped
from verify.structure.model import Component
from verify.structure.toolkit import parse_smiles

# The loader in C is ten times as fast; a build of the YAML library without it reads the same.
_LOADER = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
COMPANION_SHARE = 0.6  # an organic fragment of at least this share of the largest one counts as compound too


@lru_cache(maxsize=1)
def known_companions() -> Mapping[str, tuple[str, str]]:
    """Canonical SMILES to (role, name), from ``rules/tables/components.yaml``."""
    data = yaml.load(shipped("tables", "components.yaml").read_text(encoding="utf-8"), Loader=_LOADER)
    table: dict[str, tuple[str, str]] = {}
    for entry in data["components"]:
        for smiles in entry["smiles"]:
            mol = parse_smiles(smiles)
            if mol is None or entry["role"] not in ("counter-ion", "solvate"):
                raise ConfigurationError(f"rules/tables/components.yaml: cannot use {smiles!r} of {entry['name']}")
            table[Chem.MolToSmiles(mol)] = (entry["role"], entry["name"])
    return table


def drawn_components(mol: Chem.Mol) -> tuple[Component, ...]:
    """Fragments of a drawing with their part in it; equal compounds share the molecule, 1/n each."""
    pieces = Chem.GetMolFrags(mol)
    if len(pieces) == 1:
        return (Component("compound", mol, 1.0, pieces[0]),)
    parts = Chem.GetMolFrags(mol, asMols=True)
    names = [Chem.MolToSmiles(part) for part in parts]
    roles = _roles(parts, names)
    main = max((i for i, role in enumerate(roles) if role == "compound"), key=lambda i: parts[i].GetNumHeavyAtoms())
    share = 1.0 / names.count(names[main])
    return tuple(Component(roles[i], parts[i], share, pieces[i]) for i in range(len(parts)))


def _roles(parts: tuple[Chem.Mol, ...], names: list[str]) -> list[str]:
    """Role of each fragment; if all of them are known companions the largest is taken as the compound."""
    companions = known_companions()
    roles = [companions[n][0] if n in companions else "" for n in names]
    sizes = [_organic_size(part) for part in parts]
    free = [i for i, role in enumerate(roles) if not role]
    if not free:
        largest = max(range(len(parts)), key=lambda i: (sizes[i], parts[i].GetNumHeavyAtoms()))
        return ["compound" if n == names[largest] else role for n, role in zip(names, roles, strict=True)]
    top = max(sizes[i] for i in free)
    for i in free:
        if sizes[i] >= COMPANION_SHARE * top:
            roles[i] = "compound"
        else:
            roles[i] = "counter-ion" if Chem.GetFormalCharge(parts[i]) or not sizes[i] else "solvate"
    return roles


def _organic_size(mol: Chem.Mol) -> int:
    """Heavy atoms of a fragment that holds carbon, else 0."""
    return mol.GetNumHeavyAtoms() if any(a.GetAtomicNum() == 6 for a in mol.GetAtoms()) else 0
