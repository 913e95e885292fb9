"""peakwitness: could this structure have given this NMR peak list?

The names of ``__all__`` are loaded when they are first used, so that importing the package costs nothing.
"""

from __future__ import annotations

import sys
from importlib import import_module
from types import ModuleType
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from verify.api import environments as environments
    from verify.api import examine, examine_frame, foresee, gate
    from verify.errors import ConfigurationError, PeakwitnessError, ToolFault, UsageError
    from verify.findings.finding import Finding, Level
    from verify.findings.result import RecordResult, Verdict
    from verify.findings.run import RunResult
    from verify.peaklist.model import PeakList, Signal
    from verify.peaklist.stage import read_peak_list
    from verify.record.model import Record

_HOMES = {
    "ConfigurationError": "verify.errors",
    "Finding": "verify.findings.finding",
    "Level": "verify.findings.finding",
    "PeakList": "verify.peaklist.model",
    "PeakwitnessError": "verify.errors",
    "Record": "verify.record.model",
    "RecordResult": "verify.findings.result",
    "RunResult": "verify.findings.run",
    "Signal": "verify.peaklist.model",
    "ToolFault": "verify.errors",
    "UsageError": "verify.errors",
    "Verdict": "verify.findings.result",
    "examine": "verify.api",
    "examine_frame": "verify.api",
    "foresee": "verify.api",
    "gate": "verify.api",
    "read_peak_list": "verify.peaklist.stage",
}

__all__ = [
    "ConfigurationError",
    "Finding",
    "Level",
    "PeakList",
    "PeakwitnessError",
    "Record",
    "RecordResult",
    "RunResult",
    "Signal",
    "ToolFault",
    "UsageError",
    "Verdict",
    "environments",
    "examine",
    "examine_frame",
    "foresee",
    "gate",
    "read_peak_list",
]


class _CallableRoom(ModuleType):
    """The package ``verify.environments``, which is also the public function of that name."""

    def __call__(self, *arguments: Any, **named: Any) -> Any:
        return import_module("verify.api").environments(*arguments, **named)


class _Package(ModuleType):
    """This package. Importing a room binds its name here, so the room itself has to answer to a call."""

    @property
    def environments(self) -> ModuleType:
        """The room ``verify.environments``, made callable."""
        room = import_module("verify.environments")
        room.__class__ = _CallableRoom
        return room

    @environments.setter
    def environments(self, _room: ModuleType) -> None:
        """Takes the import system's own binding, which says nothing new."""


sys.modules[__name__].__class__ = _Package


def __getattr__(name: str) -> Any:
    """A public name, on first use."""
    if name == "environments":  # the folder of that name is callable, see there
        return import_module("verify.environments")
    if name not in _HOMES:
        raise AttributeError(f"module 'verify' has no attribute '{name}'")
    value = getattr(import_module(_HOMES[name]), name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    return sorted({*globals(), *__all__})
