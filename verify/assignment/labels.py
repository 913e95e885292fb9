"""Reads what an author's assignment label claims about a signal, as far as it can cost an explanation anything."""

from __future__ import annotations

import re
from functools import lru_cache

# Common practice: labels stand on about one signal in four and are nearly always right.
_EXCHANGING = re.compile(r"(?<![A-Za-z])(?:CO)?(?:NH[23]?|OH|CO2H|COOH|SH|HCl|NH\+)(?![a-z])")
_ON_CARBON = re.compile(r"CH|C-?H|Ar|[Pp]h|OMe|NMe|tBu|H[αβγ]|H-?C")
_AROMATIC = re.compile(r"(?<![A-Za-z])(?:Ar-?H?|H-?[Aa]r|[Pp]h(?:enyl)?|[Aa]rom(?:atic)?\.?|C6H[45]|H[Aa]r)(?![a-z])")
_METHYL = re.compile(r"CH3|(?<![A-Za-z])Me(?![a-z])|OMe|NMe")
_METHYLENE = re.compile(r"CH2")


@lru_cache(maxsize=4096)
def claims(annotation: str) -> frozenset[str]:
    """Claims of a label: subset of "exchangeable", "aromatic", "methyl", "methylene"; empty if it says none.

    A label that names several kinds of hydrogen (``NH and ArH``) claims nothing.
    """
    if not annotation:
        return frozenset()
    found = set()
    if _EXCHANGING.search(annotation) and not _ON_CARBON.search(annotation):
        found.add("exchangeable")
    if _AROMATIC.search(annotation) and "CH" not in annotation:
        found.add("aromatic")
    if _METHYL.search(annotation) and not _METHYLENE.search(annotation):
        found.add("methyl")
    elif _METHYLENE.search(annotation) and not _METHYL.search(annotation):
        found.add("methylene")
    return frozenset(found) if len(found) == 1 else frozenset()


def label_cost(annotation: str, site: str, exchangeable: bool, hydrogens_on_carrier: int) -> float:
    """Price in nats of reading a signal with this label as such an environment.

    ``site`` is ``Expectation.site``; ``hydrogens_on_carrier`` the number of H on the carrier atom.
    """
    said = claims(annotation)
    if not said:
        return 0.0
    if "exchangeable" in said:
        return 0.0 if exchangeable else 1.5
    if "aromatic" in said:
        return 0.0 if site in ("aryl", "heteroaryl", "exchangeable") else 1.5
    wanted = 3 if "methyl" in said else 2
    return 0.0 if hydrogens_on_carrier == wanted and not exchangeable else 2.0
