"""Words of a list that change how it is judged, and whether a text is a list at all."""

from __future__ import annotations

import re

_REMARKS = (
    ("rotamers", r"\brotamer\w*|\brotational isomers?|\bconformers?\b"),
    ("mixture", r"\bmixture\b|\bdiastereo(?:mer|isomer)\w*|\bisomers?\b|\banomers?\b|\batropisomers?\b|\btautomer\w*|\bd\.?r\.?\s*[=~]|\bE/Z\b|\bZ/E\b|\bcis/trans\b"),
    ("major", r"\bmajor\b|\bmaj\.?(?=[\s,;)])"),
    ("minor", r"\bminor\b|\bmin\.?(?=[\s,;)](?!\w))"),
    ("selected", r"\bselected\b|\bdiagnostic\b|\bcharacteristic (?:signals|peaks|data)|\bpartial\b"),
    ("overlapped", r"\boverlap\w*|\bobscured\b|\bhidden\b|\bburied\b|\bmasked\b|\bunder (?:the )?(?:solvent|water|DMSO|H2O)"),
    ("exchange", r"\bexchange\w*|\bD2O\b.{0,20}\bdisappear\w*|\bnot observed\b|\bnot detected\b|\bn\.o\."),
)  # fmt: skip
_COMPILED = tuple((name, re.compile(pattern, re.IGNORECASE)) for name, pattern in _REMARKS)
_WORD = re.compile(r"\b[a-z]{3,}\b")
_ORDINARY = frozenset(
    {"ppm", "quint", "sext", "sept", "hept", "pent", "app", "and", "overlap", "rotamers", "major", "minor", "isomer",
     "phenyl", "pyridine", "thiophene", "indole", "aromatic", "exchangeable", "broad", "ortho", "meta", "para"}
)  # fmt: skip


def read_remarks(text: str) -> tuple[str, ...]:
    """Remarks in their canonical words, sorted."""
    return tuple(sorted(name for name, pattern in _COMPILED if pattern.search(text)))


def _small_words(body: str) -> int:
    return sum(1 for word in _WORD.findall(body[:20000]) if word not in _ORDINARY)


def is_told(body: str, signals: int) -> bool:
    """True where a text tells about some signals in sentences, so that it need not name all of them."""
    return _small_words(body) > 10 + 1.5 * signals


def is_prose(body: str, signals: int) -> bool:
    """True where sentences tell about signals: many small words for each signal found."""
    words = _small_words(body)
    return words >= 12 and words > 3 * signals
