"""Finds the shipped rules and tables, from a checkout and from an installed wheel alike."""

from __future__ import annotations

from importlib.resources import files
from importlib.resources.abc import Traversable
from pathlib import Path

from verify.errors import ConfigurationError


def shipped(*parts: str) -> Traversable:
    """Return the shipped file or folder ``rules/<parts>``; raises ConfigurationError if it is not there.

    In a wheel the folder is ``verify/shipped_rules``; in a checkout it stands beside the package.
    """
    package = files("verify")
    root: Traversable = package.joinpath("shipped_rules")
    if not root.is_dir():
        root = Path(str(package)).parent / "rules"
    found = root
    for part in parts:
        found = found.joinpath(part)
    if not (found.is_dir() or found.is_file()):
        raise ConfigurationError(f"shipped file rules/{'/'.join(parts)} is missing; reinstall peakwitness")
    return found
