"""The version of the tool, for reports and caches."""

from __future__ import annotations

from importlib.metadata import PackageNotFoundError, version


def tool_version() -> str:
    """Version of the installed distribution, "0+checkout" in a bare checkout."""
    try:
        return version("peakwitness")
    except PackageNotFoundError:
        return "0+checkout"
