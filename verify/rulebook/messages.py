"""Fills the facts into the words of a rule: ``{signal.shift:.2f}``, ``{spectrum.over:g}``, ``{signal.words}``."""

from __future__ import annotations

import re
from collections.abc import Mapping
from typing import Any

_PLACEHOLDER = re.compile(r"\{([a-z]+)\.([a-z_0-9]+)(?::([^{}]*))?\}")
_FORMAT = re.compile(r"\.\d[fg]|g|\.\d%|")


def placeholders(template: str) -> tuple[tuple[str, str], ...]:
    """The (group, fact) pairs a template names."""
    return tuple((group, name) for group, name, _ in _PLACEHOLDER.findall(template))


def fill(template: str, facts: Mapping[str, Mapping[str, Any]]) -> str:
    """The template with its facts; numbers without a format are written as short as they are exact."""

    def one(found: re.Match[str]) -> str:
        value = facts[found[1]][found[2]]
        if isinstance(value, float):
            form = found[3] or "g"
            return format(value, form if _FORMAT.fullmatch(form) else "g")
        return str(value)

    return _PLACEHOLDER.sub(one, template)
