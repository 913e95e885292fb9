"""Plain YAML scalars read by the core schema of YAML 1.2.2, section 10.3, and nothing beyond it.

YAML 1.1 would turn ``on`` and ``yes`` into booleans, ``12:30`` into 750 and ``1_000`` into 1000; a compound id or
a batch typed that way must stay what was typed. ``.inf``, ``.nan`` and numbers beyond a double stay text: no
quantity of a record can be any of them.
"""

from __future__ import annotations

import re

_INTEGER = re.compile(r"[-+]?[0-9]+\Z")
_OCTAL = re.compile(r"0o[0-7]+\Z")
_HEXADECIMAL = re.compile(r"0x[0-9a-fA-F]+\Z")
_DECIMAL = re.compile(r"[-+]?(?:\.[0-9]+|[0-9]+(?:\.[0-9]*)?)(?:[eE][-+]?[0-9]+)?\Z")
_WORDS: dict[str, bool | None] = {
    "": None,
    "~": None,
    "null": None,
    "Null": None,
    "NULL": None,
    "true": True,
    "True": True,
    "TRUE": True,
    "false": False,
    "False": False,
    "FALSE": False,
}
_MAY_BE_NUMBER = frozenset("+-.0123456789")
_LONGEST_NUMBER = 300  # longer digit strings are no measured value, and int() is quadratic in their length


def is_null(text: str) -> bool:
    """Whether a plain scalar stands for "no value" (nothing, ``~`` or ``null``)."""
    return text in _WORDS and _WORDS[text] is None


def resolve_plain(text: str) -> str | int | float | bool | None:
    """The value that an unquoted scalar has in the core schema; text where no other type fits."""
    if text in _WORDS:
        return _WORDS[text]
    if text[0] not in _MAY_BE_NUMBER or len(text) > _LONGEST_NUMBER:
        return text
    if _INTEGER.match(text):
        return int(text)
    if _DECIMAL.match(text):
        number = float(text)
        return number if abs(number) != float("inf") else text
    if _OCTAL.match(text):
        return int(text[2:], 8)
    if _HEXADECIMAL.match(text):
        return int(text[2:], 16)
    return text
