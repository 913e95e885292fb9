"""The settings of a registry folder: ``registry.yaml``, checked, with paths made whole."""

from __future__ import annotations

import os
import re
from collections.abc import Mapping
from dataclasses import dataclass

from verify.errors import ConfigurationError
from verify.findings.location import Locus
from verify.findings.problem import Problem
from verify.record.schema import shipped_schema
from verify.record.settings import NO_SETTINGS, Defaults, ReadingSettings
from verify.record.source import Source, read_file
from verify.record.wording import shown

REGISTRY_FILE = "registry.yaml"
DEVIATIONS_FILE = "deviations.yaml"
_POLICY_ENDINGS = (".yaml", ".yml")


@dataclass(frozen=True, slots=True)
class RegistrySettings:
    """``policy`` is the name or path of a policy, "" where the registry names none; ``rule_packs`` are paths.

    ``deviations`` is the path of the accepted deviations, "" where there is no such file.
    ``required_spectra`` is None where the registry leaves that to the policy.
    """

    folder: str
    name: str = ""
    description: str = ""
    policy: str = ""
    reading: ReadingSettings = NO_SETTINGS
    required_spectra: tuple[str, ...] | None = None
    rule_packs: tuple[str, ...] = ()
    deviations: str = ""


def load_registry(folder: str) -> RegistrySettings:
    """Read ``registry.yaml`` of a folder; raises ConfigurationError that names file, line, column and key."""
    path = os.path.join(folder, REGISTRY_FILE)
    source = read_file(path, path)
    _raise_if_wrong(source, source.problems)
    data = source.data
    if not isinstance(data, dict):
        problem = Problem(
            "registry-wrong-type", f"the file cannot be {shown(data)}", Locus(), expected="settings"
        )
        _raise_if_wrong(source, (problem,))
        raise AssertionError  # not reached: the line above raises
    values = {key: value for key, value in data.items() if value is not None}
    _raise_if_wrong(source, shipped_schema("registry.schema.json", "registry").check(values))
    _raise_if_wrong(source, _pattern_problem(values))
    return _settings(folder, values, source)


def _settings(folder: str, values: Mapping[str, object], source: Source) -> RegistrySettings:
    required = values.get("required_spectra")
    packs = values.get("rules")
    named = enumerate(packs) if isinstance(packs, list) else ()
    return RegistrySettings(
        folder=folder,
        name=source.places.typed("/name") or "",
        description=source.places.typed("/description") or "",
        policy=_policy(folder, str(values.get("policy", "")), source),
        reading=ReadingSettings(str(values.get("id_pattern", "")), _defaults(values.get("defaults"))),
        required_spectra=tuple(required) if isinstance(required, list) else None,
        rule_packs=tuple(_existing(folder, str(path), f"/rules/{n}", source) for n, path in named),
        deviations=_deviations(folder, values.get("deviations"), source),
    )


def _defaults(given: object) -> Defaults:
    if not isinstance(given, dict):
        return Defaults()
    fields = given.get("field_mhz") or {}
    return Defaults(
        solvent=given.get("solvent"),
        temperature_k=given.get("temperature_k"),
        fields=tuple(sorted((nucleus, float(mhz)) for nucleus, mhz in fields.items())),
    )


def _policy(folder: str, policy: str, source: Source) -> str:
    """A policy file beside the registry comes as a path; a bare word is the name of a shipped policy."""
    return _existing(folder, policy, "/policy", source) if policy.endswith(_POLICY_ENDINGS) else policy


def _existing(folder: str, path: str, pointer: str, source: Source) -> str:
    """The path, seen from the registry's folder; raises ConfigurationError where nothing is there."""
    whole = os.path.normpath(os.path.join(folder, path))
    if not os.path.exists(whole):
        message = f'there is no file or folder "{path}"'
        problem = Problem(
            "registry-file-missing", message, Locus(pointer), expected="a path from registry.yaml"
        )
        _raise_if_wrong(source, (problem,))
    return whole


def _deviations(folder: str, given: object, source: Source) -> str:
    if given is not None:
        return _existing(folder, str(given), "/deviations", source)
    path = os.path.normpath(os.path.join(folder, DEVIATIONS_FILE))
    return path if os.path.isfile(path) else ""


def _pattern_problem(values: Mapping[str, object]) -> tuple[Problem, ...]:
    pattern = values.get("id_pattern")
    try:
        re.compile(str(pattern or ""))
    except re.error as error:
        message = f"id_pattern is no regular expression: {error}"
        return (Problem("registry-wrong-value", message, Locus("/id_pattern")),)
    return ()


def _raise_if_wrong(source: Source, problems: tuple[Problem, ...]) -> None:
    """All problems in one message, one a line, so that a settings file is mended in one go."""
    if not problems:
        return
    lines = []
    for problem in problems:
        place = source.places.place(problem.locus)
        expected = f"; expected {problem.expected}" if problem.expected else ""
        lines.append(f"{place.file}:{place.line}:{place.column}: {problem.message}{expected}")
    raise ConfigurationError("\n".join(lines))
