"""Plain YAML scalars read by the core schema of YAML 1.2.2, section 10.3, and nothing beyond it.

YAML 1.1 would turn ``on`` and ``yes`` into booleans, ``12:30`` into 750 and ``1_000`` into 1000; an id or a
batch typed that way must stay what was typed. ``.inf``, ``.nan`` and numbers beyond a double stay text: no
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
_TAG = "tag:yaml.org,2002:"
_TYPES_OF_TAG: dict[str, tuple[type, ...]] = {
    _TAG + "int": (int,),
    _TAG + "float": (int, float),
    _TAG + "bool": (bool,),
    _TAG + "null": (type(None),),
}
_MAY_BE_NUMBER = frozenset("+-.0123456789")
_LONGEST_NUMBER = 300  # longer digit strings are no measured value, and int() is quadratic in their length


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


def resolve_tagged(tag: str, text: str) -> str | int | float | bool | None:
    """The value of a scalar with an explicit tag of the core schema; raises ValueError, its text says why."""
    if tag in (_TAG + "str", "!"):
        return text
    types = _TYPES_OF_TAG.get(tag)
    if types is None:
        raise ValueError(f"the tag {tag!r} is not allowed")
    value = resolve_plain(text)
    if type(value) not in types:
        raise ValueError(f"the value does not fit its tag {tag!r}")
    return value


def is_collection_tag(tag: str | None, style: str) -> bool:
    """Whether a list ("seq") or group ("map") may carry this tag."""
    return tag is None or tag == "!" or tag == _TAG + style
