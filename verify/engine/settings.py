"""What a run is carried out with: frozen and picklable, so that a worker can build its own rulebook."""

from __future__ import annotations

import os
from dataclasses import dataclass

from verify.findings.finding import Deviation
from verify.record.registry import RegistrySettings
from verify.rulebook.deviations import load_deviations

DEFAULT_POLICY = "registration"
YAML_ENDINGS = (".yaml", ".yml")


@dataclass(frozen=True, slots=True)
class RunSettings:
    """``packs`` are absolute paths; ``folder`` is where a registry keeps its own policies ("" = nowhere).

    ``required`` are the nuclei a record must have, None where the policy says it. ``today`` (ISO date)
    decides expiry of deviations. ``seconds`` limits one record's time; 0 sets no limit.
    """

    today: str
    policy: str = DEFAULT_POLICY
    packs: tuple[str, ...] = ()
    folder: str = ""
    required: tuple[str, ...] | None = None
    deviations: tuple[Deviation, ...] = ()
    seconds: float = 0.0


@dataclass(frozen=True, slots=True)
class Overrides:
    """What the caller says instead of the registry; "" and () leave its own word."""

    policy: str = ""
    packs: tuple[str, ...] = ()
    deviations: str = ""


NO_OVERRIDES = Overrides()


def settings_for(
    registry: RegistrySettings, today: str, overrides: Overrides = NO_OVERRIDES, seconds: float = 0.0
) -> RunSettings:
    """A registry's settings with the caller's overrides; raises ConfigurationError for unfit deviations."""
    deviations = overrides.deviations or registry.deviations
    return RunSettings(
        today=today,
        policy=whole_policy(overrides.policy or registry.policy or DEFAULT_POLICY),
        packs=whole_paths(overrides.packs or registry.rule_packs),
        folder=os.path.abspath(registry.folder),
        required=registry.required_spectra,
        deviations=load_deviations(deviations) if deviations else (),
        seconds=seconds,
    )


def whole_policy(policy: str) -> str:
    """A policy file as an absolute path, since workers may start elsewhere; a name stays a name."""
    return os.path.abspath(policy) if policy.endswith(YAML_ENDINGS) else policy


def whole_paths(paths: tuple[str, ...]) -> tuple[str, ...]:
    """Absolute paths, in order."""
    return tuple(os.path.abspath(path) for path in paths)
