"""Loads the tables of shifts, solvents and impurities from ``rules/tables/``, each once."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import yaml

from verify.errors import ConfigurationError
from verify.resources import shipped

# The loader in C is ten times as fast; a build of the YAML library without it reads the same.
_LOADER = getattr(yaml, "CSafeLoader", yaml.SafeLoader)


def read_table(name: str) -> Mapping[str, Any]:
    """Parse ``rules/tables/<name>.yaml``; raises ConfigurationError if it is missing or not a mapping."""
    text = shipped("tables", f"{name}.yaml").read_text(encoding="utf-8")
    try:
        table = yaml.load(text, Loader=_LOADER)  # both loaders are safe ones
    except yaml.YAMLError as error:
        raise ConfigurationError(f"rules/tables/{name}.yaml: {error}") from error
    if not isinstance(table, dict):
        raise ConfigurationError(f"rules/tables/{name}.yaml does not hold a mapping")
    return table


@dataclass(frozen=True, slots=True)
class Width:
    """``scale`` in ppm covers about 68 % of what is observed, ``reach`` in ppm nearly all of it; from
    ``count`` atoms."""

    scale: float
    reach: float
    count: int


@dataclass(frozen=True, slots=True)
class ShiftTable:
    """Additive increments of one nucleus. ``increments``: term to hundredths of a ppm. ``widths``: kind of
    atom and depth to which its surroundings were met in the data ("a2") to width. ``source``: one line."""

    nucleus: str
    base: float
    increments: Mapping[str, int]
    widths: Mapping[str, Width]
    source: str


@lru_cache(maxsize=4)
def shift_table(nucleus: str) -> ShiftTable:
    """Fitted increments of "1H" or "13C"; raises ConfigurationError if the shipped table cannot be used."""
    name = f"shift_increments_{nucleus.lower()}"
    table = read_table(name)
    try:
        fields = table["increments"].split()
        increments = dict(zip(fields[::2], map(int, fields[1::2]), strict=True))
        widths = {key: Width(scale, reach, count) for key, (scale, reach, count) in table["widths"].items()}
        return ShiftTable(nucleus, table["base"] / 100.0, increments, widths, table["source"])
    except (KeyError, TypeError, ValueError, AttributeError) as error:
        raise ConfigurationError(f"rules/tables/{name}.yaml: {error}") from error
