"""Policies: levels, limits, required spectra and what holds a record; shipped ones and those of a registry."""

from __future__ import annotations

from collections.abc import Mapping
from importlib.resources.abc import Traversable
from pathlib import Path
from typing import Any

from verify.errors import ConfigurationError
from verify.findings.finding import Level
from verify.resources import shipped
from verify.rulebook.documents import nearest, read_document
from verify.rulebook.model import Policy

DEEPEST = 5


def shipped_policies() -> list[str]:
    """Names of the policies that come with the tool."""
    names = (entry.name for entry in shipped("policies").iterdir())
    return sorted(name.removesuffix(".yaml") for name in names if name.endswith(".yaml"))


def load_policy(name: str, folder: Path | None = None) -> Policy:
    """A shipped policy by name, or one from a file (a path, or ``policies/<name>.yaml`` in ``folder``).

    Raises ConfigurationError naming the nearest known policy.
    """
    return _policy(_merged(name, folder, 0))


def _find(name: str, folder: Path | None) -> tuple[Path | Traversable, bool]:
    if name.endswith((".yaml", ".yml")):
        return (folder / name if folder else Path(name)), False
    if folder is not None and (folder / "policies" / f"{name}.yaml").is_file():
        return folder / "policies" / f"{name}.yaml", False
    known = shipped_policies()
    if name not in known:
        raise ConfigurationError(f"there is no policy '{name}'{nearest(name, known)} (known: {', '.join(known)})")
    return shipped("policies", f"{name}.yaml"), True


def _merged(name: str, folder: Path | None, depth: int) -> dict[str, Any]:
    if depth > DEEPEST:
        raise ConfigurationError(f"policy '{name}': policies extend each other in a circle or too deep")
    path, trusted = _find(name, folder)
    own = dict(read_document(path, "policy", trusted=trusted))
    base = own.pop("extends", None)
    if base is None:
        return own
    merged = _merged(str(base), folder, depth + 1)
    for key, value in own.items():
        merged[key] = {**merged.get(key, {}), **value} if isinstance(value, dict) else value
    return merged


def _policy(found: Mapping[str, Any]) -> Policy:
    levels = {rule: None if level == "off" else Level(level) for rule, level in found.get("levels", {}).items()}
    limits = {name: float(value) for name, value in found.get("limits", {}).items()}
    return Policy(
        name=found["name"], title=found["title"], limits=limits, levels=levels,
        required=tuple(found.get("required", ())),
        holds=tuple(found.get("holds", ("contradicted", "unassessed"))), rivals=int(found.get("rivals", 0)),
    )  # fmt: skip
