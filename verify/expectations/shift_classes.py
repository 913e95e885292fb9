"""Finds the handbook class of every atom (patterns of ``rules/tables``) with its shift window in ppm."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache

from rdkit import Chem

from verify.errors import ConfigurationError
from verify.expectations.tables import read_table


@dataclass(frozen=True, slots=True)
class ShiftClass:
    """``windows``: nucleus, or solvent for exchangeable hydrogen, to (low, high) in ppm. ``size``: atoms of the
    pattern. ``elements``: atomic numbers without which it cannot match."""

    label: str
    pattern: Chem.Mol
    windows: Mapping[str, tuple[float, float]]
    size: int
    elements: frozenset[int]
    source: str


def _class(entry: Mapping[str, object], windows: Mapping[str, object], table: str) -> ShiftClass:
    pattern = Chem.MolFromSmarts(str(entry["smarts"]))
    if pattern is None:
        raise ConfigurationError(f"rules/tables/{table}.yaml: the pattern of '{entry['label']}' cannot be read")
    kept = {name: (float(w[0]), float(w[1])) for name, w in windows.items() if isinstance(w, list)}
    needed = frozenset(a.GetAtomicNum() for a in pattern.GetAtoms() if a.GetAtomicNum() > 1 and not _open(a))
    return ShiftClass(str(entry["label"]), pattern, kept, pattern.GetNumAtoms(), needed, str(entry["status"]))


def _open(atom: Chem.Atom) -> bool:
    """True where a pattern atom names alternatives, so that its first element is not required."""
    text = atom.GetSmarts()
    return "," in text or "!" in text or "$" in text


@lru_cache(maxsize=4)
def shift_classes(table: str) -> tuple[ShiftClass, ...]:
    """Classes of "shift_classes" (windows by nucleus), "exchangeables" (by solvent) or "shift_hetero:<nucleus>"."""
    name, _, part = table.partition(":")
    content = read_table(name)
    entries = content[part] if part else content["classes" if name == "shift_classes" else "exchangeables"]
    keys = {"shift_classes": ("1H", "13C"), "exchangeables": ("CDCl3", "DMSO-d6"), "shift_hetero": ("window",)}[name]
    try:
        return tuple(_class(e, {k: e.get(k) for k in keys}, name) for e in entries)
    except (KeyError, TypeError, ValueError) as error:
        raise ConfigurationError(f"rules/tables/{name}.yaml: {error}") from error


def classes_of_atoms(mol: Chem.Mol, table: str) -> dict[int, list[ShiftClass]]:
    """For every atom the classes whose first pattern atom it can be, in the order of the table.

    ``mol`` may go without explicit hydrogen, which halves the work.
    """
    present = {mol.GetAtomWithIdx(n).GetAtomicNum() for n in range(mol.GetNumAtoms())}
    found: dict[int, list[ShiftClass]] = {}
    for shift_class in shift_classes(table):
        if not shift_class.elements <= present:
            continue
        for match in mol.GetSubstructMatches(shift_class.pattern, uniquify=False, maxMatches=2000):
            held = found.setdefault(match[0], [])
            if not held or held[-1] is not shift_class:
                held.append(shift_class)
    return found
