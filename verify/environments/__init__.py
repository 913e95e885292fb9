"""Which nuclei of a structure are one signal, and how they couple.

The package can be called: ``verify.environments(structure, nucleus="1H", solvent=None)`` of the public interface has
the same name as this folder, and importing the folder must not hide the function.
"""

from __future__ import annotations

import sys
from types import ModuleType
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from verify.environments.model import Environment


class _CallablePackage(ModuleType):
    """A package that hands a call to the public function of its name."""

    def __call__(self, structure: str, nucleus: str = "1H", solvent: str | None = None) -> tuple[Environment, ...]:
        """See ``verify.api.environments``."""
        from importlib import import_module

        found: tuple[Environment, ...] = import_module("verify.api").environments(structure, nucleus, solvent)
        return found


sys.modules[__name__].__class__ = _CallablePackage
