"""Checks plain data against a shipped JSON Schema and says what is wrong in the words of who typed it.

Each part of a schema carries the keyword ``expected``: what the value has to be, in plain words. JSON Schema
2020-12 (core, section 6.5) treats such a keyword as an annotation.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Iterator, Mapping
from difflib import get_close_matches
from functools import cache
from importlib.resources import files
from itertools import islice
from typing import Any

from jsonschema import Draft202012Validator
from jsonschema.exceptions import ValidationError

from verify.findings.location import Locus
from verify.findings.problem import Problem
from verify.record.nodes import escape, pointer_of
from verify.record.scalars import resolve_plain
from verify.record.wording import label_of, shortened, shown

MOST_TOLD = 100
_LONGEST_KEY = 60  # the likeness of longer keys is dear to compute and nobody mistypes a known key as one
_CODES = {
    "type": "wrong-type",
    "required": "key-missing",
    "oneOf": "key-choice",
    "maxItems": "too-many",
    "propertyNames": "unknown-key",
}


class Schema:
    """A compiled schema; ``prefix`` begins the codes of its problems ("record", "registry")."""

    def __init__(self, document: Mapping[str, Any], prefix: str) -> None:
        """``document`` is the schema as parsed JSON; local references in it are resolved once, here."""
        self.document = _inlined(document, document.get("$defs", {}))
        self.prefix = prefix
        self.keys = _parents(self.document)
        self._validator = Draft202012Validator(self.document)

    def check(self, data: object) -> tuple[Problem, ...]:
        """The breaches, none of which blocks anything yet; beyond ``MOST_TOLD`` one blocks the record."""
        problems = (each for error in self._validator.iter_errors(data) for each in self._problems(error))
        told = tuple(islice(problems, MOST_TOLD + 1))
        if len(told) <= MOST_TOLD:
            return told
        message = f"the file has more than {MOST_TOLD} faults; the others are not told, and it is not read"
        fault = Problem(f"{self.prefix}-many-faults", message, Locus(), "record", f"a {self.prefix}")
        return (*told[:MOST_TOLD], fault)

    def _problems(self, error: ValidationError) -> Iterator[Problem]:
        path = tuple(error.absolute_path)
        if error.validator == "additionalProperties":
            yield from self._unknown_keys(error, path)
        elif error.validator == "required":
            for key in _missing(error):
                yield self._missing_key(error, path, key)
        elif "propertyNames" in error.absolute_schema_path:
            yield self._unknown_key(path, str(error.instance), (), _expected(error))
        elif error.validator == "oneOf":
            if isinstance(error.instance, Mapping):  # else its wrong type is told already
                yield self._choice(error, path)
        else:
            yield self._wrong_value(error, path)

    def _wrong_value(self, error: ValidationError, path: tuple[object, ...]) -> Problem:
        expected = _expected(error)
        code = f"{self.prefix}-{_CODES.get(str(error.validator), 'wrong-value')}"
        instance: Any = error.instance
        if error.validator == "maxItems":
            message = f"{label_of(path)} has {len(instance)} items, more than are read"
            expected = f"at most {error.validator_value}"
        else:
            advice = "; write it without quotes" if _quoted_number(error) else ""
            message = f"{self._label(path)} cannot be {shown(instance)}{advice}"
        return Problem(code, message, Locus(pointer_of(path)), expected=expected)

    def _missing_key(self, error: ValidationError, path: tuple[object, ...], key: str) -> Problem:
        part = error.schema.get("properties", {}).get(key, {}) if isinstance(error.schema, Mapping) else {}
        message = f'the key "{key}" is missing in {self._label(path)}'
        locus = Locus(pointer_of((*path, key)))
        return Problem(f"{self.prefix}-key-missing", message, locus, expected=str(part.get("expected", key)))

    def _choice(self, error: ValidationError, path: tuple[object, ...]) -> Problem:
        """Exactly one of several keys is wanted; none or too many are there."""
        parts: Any = error.validator_value
        instance: Any = error.instance
        choices = [key for part in parts for key in part.get("required", ())]
        given = [key for key in choices if key in instance]
        wanted = f"one of {', '.join(choices)}"
        if given:
            message = f"{label_of(path)} has {' and '.join(given)}, but only one of them may stand"
            locus = Locus(pointer_of((*path, given[1])), on_key=True)
        else:
            message = f"{label_of(path)} has none of {', '.join(choices)}"
            locus = Locus(pointer_of(path))
        return Problem(f"{self.prefix}-key-choice", message, locus, expected=wanted)

    def _unknown_keys(self, error: ValidationError, path: tuple[object, ...]) -> Iterator[Problem]:
        assert isinstance(error.schema, Mapping)
        known = tuple(error.schema.get("properties", {}))
        free = tuple(error.schema.get("patternProperties", {}))
        instance: Any = error.instance
        for key in instance:
            if key not in known and not any(key.startswith(pattern.lstrip("^")) for pattern in free):
                yield self._unknown_key(path, str(key), known, f"one of {', '.join(known)}")

    def _unknown_key(
        self, path: tuple[object, ...], key: str, known: tuple[str, ...], expected: str
    ) -> Problem:
        nearest = nearest_key(key, known)
        advice = f'; did you mean "{nearest}"?' if nearest else self._elsewhere(key)
        message = f'unknown key "{shortened(key)}" in {self._label(path)}{advice}'
        locus = Locus(f"{pointer_of(path)}/{escape(key)}", on_key=True)
        evidence = {"key": shortened(key), "nearest": nearest}
        return Problem(f"{self.prefix}-unknown-key", message, locus, expected=expected, evidence=evidence)

    def _label(self, path: tuple[object, ...]) -> str:
        return label_of(path) or f"the {self.prefix}"

    def _elsewhere(self, key: str) -> str:
        parents = [parent for parent in self.keys.get(key, ()) if parent]
        return f'; it belongs under "{parents[0]}"' if parents else ""


def nearest_key(key: str, known: Iterable[str]) -> str:
    """The known key that was most likely meant, "" if none is near."""
    if len(key) > _LONGEST_KEY:
        return ""
    plain = {_plain(each): each for each in known}
    found = get_close_matches(_plain(key), plain, n=1, cutoff=0.6)
    return plain[found[0]] if found else ""


def _plain(key: str) -> str:
    return key.casefold().replace("-", "_").replace(" ", "_")


@cache
def shipped_schema(name: str, prefix: str) -> Schema:
    """The schema file ``name`` of this package, compiled once per process."""
    text = files("verify.record").joinpath(name).read_text(encoding="utf-8")
    return Schema(json.loads(text), prefix)


def _quoted_number(error: ValidationError) -> bool:
    """Whether a text stands where a number is wanted and would be one without its quotes."""
    if error.validator != "type" or not isinstance(error.instance, str):
        return False
    return type(resolve_plain(error.instance.strip())) in (int, float)


def _expected(error: ValidationError) -> str:
    return (
        str(error.schema.get("expected", "another value"))
        if isinstance(error.schema, Mapping)
        else "no value"
    )


def _missing(error: ValidationError) -> list[str]:
    """The key one ``required`` error speaks of (the validator reports each missing key on its own)."""
    keys: Any = error.validator_value
    return [key for key in keys if error.message.startswith(f"{key!r} is a required")]


def _inlined(part: Any, definitions: Mapping[str, Any]) -> Any:
    """``part`` with local references replaced by what they name: a lookup per value is the dearest step."""
    if isinstance(part, list):
        return [_inlined(each, definitions) for each in part]
    if not isinstance(part, dict):
        return part
    reference = part.get("$ref")
    if isinstance(reference, str):
        return _inlined(definitions[reference.rpartition("/")[2]], definitions)
    return {key: _inlined(value, definitions) for key, value in part.items() if key != "$defs"}


def _parents(part: Mapping[str, Any], name: str = "") -> dict[str, list[str]]:
    """Every key that the schema knows, with the keys under which it may stand ("" = at the top)."""
    found: dict[str, list[str]] = {}
    for key, value in part.get("properties", {}).items():
        found.setdefault(key, []).append(name)
        for deeper, parents in _parents(value, key).items():
            found.setdefault(deeper, []).extend(parents)
    if isinstance(part.get("items"), Mapping):
        for deeper, parents in _parents(part["items"], name).items():
            found.setdefault(deeper, []).extend(parents)
    return found
