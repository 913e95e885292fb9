"""A record handed in by a program, as plain data: what a YAML file of the same content would have given."""

from __future__ import annotations

import math
from collections.abc import Mapping
from numbers import Integral, Real

from verify.findings.location import Locus
from verify.findings.problem import Problem
from verify.record.loading import DEEPEST, HEAVIEST


class UnfitRecordError(Exception):
    """The mapping cannot be a record; carries the problem. Never leaves this room."""

    def __init__(self, problem: Problem) -> None:
        """``problem`` blocks the record."""
        super().__init__(problem.message)
        self.problem = problem


class _Copy:
    """Copies once; ``left`` is how many values may still come, so that a mapping that holds itself ends."""

    def __init__(self) -> None:
        self.left = HEAVIEST

    def plain(self, value: object, depth: int) -> object:
        self.left -= 1
        if depth > DEEPEST or self.left < 0:
            _refuse(depth)
        if isinstance(value, str):
            return value if value.isascii() else _writable(value)
        if value is None or isinstance(value, bool):
            return value
        if isinstance(value, Mapping):
            return {str(key): self.plain(held, depth + 1) for key, held in value.items()}
        if isinstance(value, list | tuple):
            return [self.plain(held, depth + 1) for held in value]
        listed = getattr(value, "tolist", None)  # arrays and numbers of numerical libraries
        if listed is not None and not isinstance(value, int | float):
            return self.plain(listed(), depth + 1)
        return _number(value)


def plain_record(mapping: Mapping[str, object]) -> dict[str, object]:
    """A copy of dicts, lists, texts and numbers; raises UnfitRecordError where it is too deep or too large.

    Arrays of numbers become lists; a value that is not a number (NaN) counts as not given.
    """
    if not isinstance(mapping, Mapping):
        message = f"a record is a mapping, not a value of type {type(mapping).__name__}"
        raise UnfitRecordError(Problem("record-not-a-record", message, Locus(), "record", "a mapping"))
    copied = _Copy().plain(mapping, 1)
    assert isinstance(copied, dict)
    return copied


def _writable(text: str) -> str:
    """The text with halves of characters joined, or replaced by U+FFFD: no report could hold them."""
    try:
        text.encode("utf-8")
    except UnicodeEncodeError:
        return text.encode("utf-16", "surrogatepass").decode("utf-16", "replace")
    return text


def _number(value: object) -> object:
    """Numbers of any library as int or float; other objects stay, and the schema check tells of them."""
    if isinstance(value, Integral):
        return int(value)
    if isinstance(value, Real):
        number = float(value)
        return None if math.isnan(number) else number
    return value


def _refuse(depth: int) -> None:
    deep = depth > DEEPEST
    message = f"values are nested deeper than {DEEPEST} levels" if deep else f"more than {HEAVIEST} values"
    code = "record-too-deep" if deep else "record-too-large"
    raise UnfitRecordError(Problem(code, message, Locus(), "record", "one record"))
