"""Loads one compiled module of a library without the rest of it, where the rest only costs time at every start."""

from __future__ import annotations

from importlib.machinery import EXTENSION_SUFFIXES
from importlib.util import find_spec, module_from_spec, spec_from_file_location
from pathlib import Path
from types import ModuleType


def compiled_module(package: str, name: str) -> ModuleType | None:
    """The extension module ``package.name``; None where the library keeps it elsewhere, so that the caller imports
    the library as usual. The package itself is not imported."""
    found = find_spec(package)
    for folder in (found.submodule_search_locations or ()) if found else ():
        for suffix in EXTENSION_SUFFIXES:
            file = Path(folder) / f"{name}{suffix}"
            spec = spec_from_file_location(f"{package}.{name}", file) if file.is_file() else None
            if spec is not None and spec.loader is not None:
                module = module_from_spec(spec)
                spec.loader.exec_module(module)
                return module
    return None
