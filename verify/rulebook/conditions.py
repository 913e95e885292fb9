"""Conditions of rules in the Common Expression Language (CEL): compiled once, asked with the few facts they name."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from functools import lru_cache
from importlib import import_module
from typing import Any

from verify.compiled import compiled_module
from verify.errors import ConfigurationError

# CEL's own words, and nothing else: an expression cannot reach files, attributes or code.
_NAME = re.compile(r"(?<![\w.\"'])([a-z]+)\.([a-z_0-9]+)(?!\s*\()")
_TEXT = re.compile(r"\"(?:[^\"\\]|\\.)*\"|'(?:[^'\\]|\\.)*'")
_BEYOND = re.compile(r"\s*(?:\[|\.\s*[A-Za-z_]\w*(?!\w*\s*\())")  # a path that goes on behind a fact
COMPARISONS = frozenset(("_>_", "_<_", "_>=_", "_<=_", "_==_", "_!=_", "@in"))
OPERATORS = COMPARISONS | {"_&&_", "_||_", "!_", "_?_:_", "_+_", "_-_", "_*_", "_/_", "-_"}
FUNCTIONS = frozenset(("startsWith", "endsWith", "contains", "matches", "size"))
LONGEST = 600
MOST_REMEMBERED = 20_000
Facts = Mapping[str, Mapping[str, Any]]


@lru_cache(maxsize=1)
def _cel() -> Any:
    """The compiled language alone: importing the package brings its own command line, 0.25 s at every start."""
    return compiled_module("cel", "cel") or import_module("cel")


class Condition:
    """``names``: the (group, fact) pairs the expression uses, in order of appearance."""

    __slots__ = ("_program", "_remembered", "names", "source")

    def __init__(self, source: str) -> None:
        """Compile; raises ConfigurationError if it is no expression of the language or too long."""
        if len(source) > LONGEST:
            raise ConfigurationError(f"a condition may hold {LONGEST} characters, this one holds {len(source)}")
        if re.search(r"\.(?:map|filter|exists|exists_one|all)\s*\(", _TEXT.sub("", source)):
            raise ConfigurationError("a condition may not loop over lists (map, filter, exists, all)")
        try:
            self._program = _cel().compile(source)
        except ValueError as error:
            raise ConfigurationError(f"the condition is no CEL expression: {error}") from error
        self.source = source
        bare = _TEXT.sub(lambda m: " " * len(m.group()), source)
        self.names = tuple(dict.fromkeys(_NAME.findall(bare)))
        _check_form(bare, self._program.variables(), self._program.functions())
        self._remembered: dict[tuple[object, ...], bool] = {}

    def __reduce__(self) -> tuple[type[Condition], tuple[str]]:
        return Condition, (self.source,)

    def holds(self, facts: Facts) -> bool:
        """True where the expression is true of the facts. Raises KeyError for a fact that is not there, ValueError
        or TypeError where the expression gives no true or false."""
        values = tuple(facts[group][name] for group, name in self.names)
        known = self._remembered.get(values)
        if known is not None:
            return known
        given: dict[str, dict[str, Any]] = {}
        for (group, name), value in zip(self.names, values, strict=True):
            given.setdefault(group, {})[name] = value
        try:
            answer = self._program.execute(given)
        except RuntimeError as error:
            raise ValueError(str(error)) from error
        if not isinstance(answer, bool):
            raise TypeError(f"the condition gives {answer!r}, not true or false")
        if len(self._remembered) < MOST_REMEMBERED:
            self._remembered[values] = answer
        return answer


def _check_form(bare: str, variables: Sequence[str], functions: Sequence[str]) -> None:
    """Refuse what would only break when asked: names that are no ``group.fact``, and functions beyond the few."""
    for name in sorted(functions):
        if name not in OPERATORS | FUNCTIONS:
            known = ", ".join(sorted(FUNCTIONS))
            raise ConfigurationError(f"a condition may not use '{name}' (beside operators it may use {known})")
    for found in _NAME.finditer(bare):
        if _BEYOND.match(bare, found.end()):
            raise ConfigurationError(f"'{found[0]}' is one value and has no parts")
    rest = _NAME.sub(lambda m: " " * len(m.group()), bare)
    for name in sorted(variables):
        if re.search(rf"(?<![\w.]){re.escape(name)}\b", rest):
            raise ConfigurationError(f"'{name}' alone is no fact; facts are written group.name, such as signal.shift")
