"""Exceptions that mean the tool, its configuration or its call is broken, never that chemistry is bad.

    PeakwitnessError
    ├── UsageError           the call cannot be carried out as given          exit status 2
    ├── ConfigurationError   rules, policy, tables, deviations or registry    exit status 2
    └── ToolFault            a fault inside the tool                          exit status 3

Every exception carries only text, so that it survives pickling between processes.
"""

from __future__ import annotations


class PeakwitnessError(Exception):
    """Base of all exceptions raised on purpose; ``str()`` of it is written for the user."""

    exit_status: int = 3


class UsageError(PeakwitnessError):
    """The command or function was called with something it cannot work on."""

    exit_status = 2


class ConfigurationError(PeakwitnessError):
    """A rule, policy, table, deviation or registry file cannot be used."""

    exit_status = 2


class ToolFault(PeakwitnessError):
    """A fault inside the tool itself; worth a report to its maintainers."""

    exit_status = 3
