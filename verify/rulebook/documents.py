"""Reads the YAML files of rules, policies and deviations against their schemas; every fault names file and key."""

from __future__ import annotations

import json
from collections.abc import Mapping
from difflib import get_close_matches
from functools import lru_cache
from importlib.resources import files
from importlib.resources.abc import Traversable
from pathlib import Path
from typing import Any

import jsonschema
import yaml

from verify.errors import ConfigurationError

# The loader in C is ten times as fast; a build of the YAML library without it reads the same.
_LOADER = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
LARGEST = 2_000_000


@lru_cache(maxsize=4)
def _validator(schema: str) -> jsonschema.Draft202012Validator:
    text = files("verify.rulebook").joinpath(f"{schema}.schema.json").read_text(encoding="utf-8")
    return jsonschema.Draft202012Validator(json.loads(text))


def nearest(word: str, known: list[str]) -> str:
    """"; did you mean 'x'?" for a word close to a known one, else ""."""
    close = get_close_matches(word, known, n=1, cutoff=0.5)
    return f"; did you mean '{close[0]}'?" if close else ""


def read_document(path: Path | Traversable, schema: str, *, trusted: bool = False) -> Mapping[str, Any]:
    """The mapping of one YAML file; raises ConfigurationError. ``trusted`` (shipped) files were checked by tests."""
    name = str(path)
    try:
        text = path.read_text(encoding="utf-8")
    except OSError as error:
        raise ConfigurationError(f"{name}: cannot be read: {error.strerror}") from error
    except UnicodeDecodeError as error:
        raise ConfigurationError(f"{name}: is no UTF-8 text") from error
    if len(text) > LARGEST:
        raise ConfigurationError(f"{name}: holds more than {LARGEST} characters")
    try:
        found = yaml.load(text, Loader=_LOADER)  # both loaders are safe ones
    except yaml.MarkedYAMLError as error:
        mark = error.problem_mark
        place = f":{mark.line + 1}:{mark.column + 1}" if mark else ""
        raise ConfigurationError(f"{name}{place}: {error.problem}") from error
    except yaml.YAMLError as error:
        raise ConfigurationError(f"{name}: {error}") from error
    if not isinstance(found, dict):
        raise ConfigurationError(f"{name}: expected keys and values, found {type(found).__name__}")
    if not trusted:
        _check(found, schema, name)
    return found


def _check(found: Mapping[str, Any], schema: str, name: str) -> None:
    error = jsonschema.exceptions.best_match(_validator(schema).iter_errors(found))
    if error is None:
        return
    place = "/".join(str(part) for part in error.absolute_path) or "the file"
    hint = ""
    if error.validator == "additionalProperties" and isinstance(error.instance, dict):
        known = list(error.schema.get("properties", {}))
        unknown = [key for key in error.instance if key not in known]
        hint = nearest(str(unknown[0]), known) if unknown else ""
    raise ConfigurationError(f"{name}: {place}: {error.message}{hint}")
