"""The id of a compound: what the record says, what its folder says, and what the registry allows."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import lru_cache

from verify.findings.location import Locus
from verify.findings.problem import Problem

NAMELESS = "unnamed"


@dataclass(frozen=True, slots=True)
class Identity:
    """The id a record goes by, never empty, and what is wrong with it."""

    compound: str
    problems: tuple[Problem, ...]


def identify(given: str | None, folder: str, id_pattern: str) -> Identity:
    """The id typed in the record, else its folder's name, held against each other and the pattern."""
    compound = given or folder or NAMELESS
    problems: list[Problem] = []
    locus = Locus("/compound") if given else Locus()
    if given and folder and given != folder:
        message = f'the record says compound "{given}", but its folder is called "{folder}"'
        problems.append(Problem("compound-id-mismatch", message, locus, expected=folder))
    if id_pattern and not _compiled(id_pattern).fullmatch(compound):
        message = f'the id "{compound}" does not follow the registry\'s pattern {id_pattern}'
        problems.append(Problem("compound-id-pattern", message, locus, expected=f"an id like {id_pattern}"))
    return Identity(compound, tuple(problems))


@lru_cache(maxsize=16)
def _compiled(pattern: str) -> re.Pattern[str]:
    return re.compile(pattern)
