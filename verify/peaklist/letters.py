"""Reads multiplicities as chemists type them: letters, words, "br", "app", and names of second-order systems."""

from __future__ import annotations

import re
from functools import lru_cache

from verify.findings.location import Span
from verify.peaklist.model import Multiplicity

# Line counts (common practice). "h" and "hex" are read as six lines, "hept" as seven.
_LINES = {
    "s": 1, "d": 2, "t": 3, "q": 4, "qd": 4, "qa": 4, "quart": 4, "quar": 4, "qu": 5, "qi": 5, "qn": 5, "quin": 5,
    "quint": 5, "qnt": 5, "qt": 5, "p": 5, "pent": 5, "h": 6, "hex": 6, "sx": 6, "sxt": 6, "sext": 6, "sex": 6, "hp": 7,
    "hept": 7, "hep": 7, "sept": 7, "sep": 7, "spt": 7, "oct": 8, "o": 8, "non": 9, "n": 9, "nonet": 9, "octet": 8,
}  # fmt: skip
_CANONICAL = {1: "s", 2: "d", 3: "t", 4: "q", 5: "quint", 6: "sext", 7: "sept", 8: "oct", 9: "non"}
_WORDS = {
    "singlet": 1, "doublet": 2, "triplet": 3, "quartet": 4, "quadruplet": 4, "quadruple": 4, "quintet": 5, "quintuplet": 5,
    "pentet": 5, "pentuplet": 5, "sextet": 6, "sextuplet": 6, "hextet": 6, "septet": 7, "septuplet": 7, "heptet": 7,
    "heptuplet": 7, "octet": 8, "nonet": 9, "double": 2, "triple": 3,
}  # fmt: skip
_NESTED = "quint|quin|quart|qnt|qn|qi|qu|pent|hept|hep|hex|sext|sxt|sex|sx|sept|sep|spt|oct|non|[sdtqph]"
_WORD = "|".join(sorted(_WORDS, key=len, reverse=True))
_BROAD = r"(?:very\s+)?(?:broad(?:ened)?|br?d?\.?(?=[\s.,-])|br\.?|bd?\.?(?=\s))"
_APPARENT = r"(?:app(?:arent(?:ly)?|ar|\.)?|apt|ap\.?|pseudo|ps\.?|virt(?:ual)?\.?|~)"

_SECOND = re.compile(
    r"(?P<name>(?:[ABMXRKPQYZ]{1,3}\d?'{0,3}){1,4}q?)(?=$|[\s,;)(:-])(?:[- ]*(?:system|quartet|type|pattern|q|m)\b\.?)?|"
    r"(?P<part>part of|1/2|half of|half|½)\s*(?:an?\s*)?(?P<whole>[ABMX\d']{2,8})(?:q|[- ]*system)?"
)
_LETTERS = re.compile(
    rf"(?P<before>(?:(?:{_APPARENT}|{_BROAD}|sharp|strong|sh\.?(?=\s)|dist(?:orted)?\.?|unres(?:olved)?\.?|complex|overlapping|overlapped|partially)\s*[-. ]?\s*)*)"
    rf"(?:(?P<multiplet>multiplets?|mult\.?|mc|[dtq]{{0,2}}m|envelope)(?![A-Za-z])"
    rf"|(?P<words>(?:{_WORD})s?(?:\s*(?:of|-|\s)\s*(?:an?\s+)?(?:{_WORD})s?)*)(?![A-Za-z])"
    rf"|(?P<letters>(?:{_NESTED})(?:(?:\s?of\s?|\s?x\s?|\s|\.)?(?:{_NESTED}))*)(?P<b>(?:br?|app)?)(?![A-Za-z\d'])(?!-[A-Z\d]))"
    rf"(?P<after>\s*(?:\((?:{_BROAD}|{_APPARENT})\s*\.?\)|,?\s*(?:br(?:oad)?\b\.?|app\b\.?)))?",
    re.IGNORECASE,
)
_BROAD_ONLY = re.compile(r"(?:very\s+)?(?:broad|br\.?|b)(?:\s+(?:signal|peak|hump|s\.))?(?![A-Za-z\d'])", re.IGNORECASE)
_GLUED = re.compile(r"(?P<b>br?|app?)(?P<rest>s|d|t|q|m|dd|dt|td|ddd|quint)(?![A-Za-z\d'])", re.IGNORECASE)


def read_letters(text: str, position: int, end: int) -> tuple[Multiplicity, int] | None:
    """The multiplicity that starts at ``position`` of plain text, and where it ends; None if there is none."""
    return (
        _first_order(text, position, end)
        or _glued(text, position, end)
        or _second_order(text, position, end)
        or _only_broad(text, position, end)
    )


def _make(text: str, start: int, stop: int, lines: tuple[int, ...], broad: bool, apparent: bool) -> tuple[Multiplicity, int]:
    letters = "".join(_CANONICAL[n] for n in lines)
    typed = text[start:stop]
    return Multiplicity("first-order", lines, letters, typed, broad, apparent, Span(start, stop)), stop


def _first_order(text: str, position: int, end: int) -> tuple[Multiplicity, int] | None:
    found = _LETTERS.match(text, position, end)
    if found is None:
        return None
    around = f"{found['before']} {found['after'] or ''} {found['b'] or ''}".lower()
    broad, apparent = _is_broad(around), _is_apparent(around)
    stop = found.end() - (len(found.group()) - len(found.group().rstrip()))
    if found["multiplet"]:
        span = Span(position, stop)
        return Multiplicity("multiplet", (), "m", text[position:stop], broad, apparent, span), stop
    if found["letters"] in ("H", "P", "N", "O"):  # an atom, not a multiplicity
        return None
    lines = _words(found["words"].lower()) if found["words"] else _split(found["letters"].lower())
    if not lines:
        return None
    return _make(text, position, stop, lines, broad, apparent)


def _is_broad(around: str) -> bool:
    return bool(re.search(r"\bb(?:r|road|d)?", around))


def _is_apparent(around: str) -> bool:
    return bool(re.search(r"\bap|pseudo|\bps|virt|~", around))


@lru_cache(maxsize=256)
def _split(letters: str) -> tuple[int, ...]:
    found = re.findall(_NESTED, letters.replace("of", " ").replace(" x ", " "))
    lines = tuple(_LINES[name] for name in found)
    return () if 1 in lines and len(lines) > 1 else lines


@lru_cache(maxsize=64)
def _words(words: str) -> tuple[int, ...]:
    lines = tuple(_WORDS[name] for name in re.findall(_WORD, words))
    return () if 1 in lines and len(lines) > 1 else lines


def _glued(text: str, position: int, end: int) -> tuple[Multiplicity, int] | None:
    """"brs", "bs", "bm", "apt": a mark glued to its letters."""
    found = _GLUED.match(text, position, end)
    if found is None:
        return None
    broad, rest = found["b"][0] in "bB", found["rest"].lower()
    if rest == "m":
        span = Span(position, found.end())
        return Multiplicity("multiplet", (), "m", found.group(), broad, not broad, span), found.end()
    return _make(text, position, found.end(), _split(rest), broad, not broad)


def _second_order(text: str, position: int, end: int) -> tuple[Multiplicity, int] | None:
    found = _SECOND.match(text, position, end)
    if found is None:
        return None
    name = found["name"] or found["whole"]
    if "'" not in name and len(name) < 2:
        return None
    span = Span(position, found.end())
    return Multiplicity("second-order", (), name, found.group(), False, False, span), found.end()


def _only_broad(text: str, position: int, end: int) -> tuple[Multiplicity, int] | None:
    """"br" alone is a broad singlet."""
    found = _BROAD_ONLY.match(text, position, end)
    if found is None:
        return None
    return _make(text, position, found.end(), (1,), True, False)
