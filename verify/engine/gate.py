"""The gate of a registry folder: its settings joined with the options of the call, then one run."""

from __future__ import annotations

from importlib.metadata import PackageNotFoundError, version
from pathlib import Path

from verify.engine.run import Seen, run
from verify.engine.settings import RunSettings
from verify.findings.run import RunResult
from verify.rulebook.deviations import load_deviations
from verify.sources.folder import FolderSource


def tool_version() -> str:
    """Version of the installed distribution, "0+checkout" in a bare checkout."""
    try:
        return version("peakwitness")
    except PackageNotFoundError:
        return "0+checkout"


def gate_folder(
    path: str, policy: str | None, packs: tuple[str, ...], workers: int, deviations: str | None, today: str,
    seen: Seen | None = None,
) -> RunResult:
    """Judge every record of a registry folder. Options outweigh ``registry.yaml``. Raises UsageError and
    ConfigurationError."""
    source = FolderSource(path)
    registry = source.registry
    found = deviations or registry.deviations
    settings = RunSettings(
        policy=policy or registry.policy or "registration",
        packs=(*registry.rule_packs, *(str(Path(pack).absolute()) for pack in packs)),
        folder=path,
        deviations=load_deviations(found) if found else (),
        today=today,
    )
    return run(source.tasks(), settings, path, registry.name, tool_version(), workers, seen)
