"""Reads coupling constants: "J = 8.4, 2.1 Hz", "3J(H,F) = 8", "J1 = 8.0, J2 = 2.0", or bare "8.4 Hz"."""

from __future__ import annotations

import re

from verify.findings.location import Span
from verify.peaklist.model import Coupling

_LABEL = re.compile(
    r"(?:\^?\s?\d{1,2}\s*)?(?<![A-Za-z])J(?![a-z]{3})"
    r"(?P<who>(?:\s*[_^]?\s*\(?\s*(?:\d{0,2}[HFPCNXAB][\w']{0,4}(?:\s*[-,/–~]\s*\d{0,2}[HFPCNXAB][\w']{0,4})?|[a-z]{1,2}(?![a-z])|\d{1,2}[a-z]?'?\s*[,-]\s*\d{1,2}[a-z]?'?(?=\s*\)?\s*=)|\d(?![\d.])|'{1,2}"
    r"|(?:gem|vic|cis|trans|ortho|meta|para|AB|ax|eq)(?:\s*[-,]\s*(?:ax|eq))?)\s*\)?\s*){0,2})"
    r"\s*(?:values?)?\s*(?:\(?\s*Hz\s*\)?)?\s*(?P<eq>=|:|~|of|(?=[-+]?\d))\s*(?:ca\.?|~|about)?\s*",
)
_NUMBER = re.compile(r"[-+]?\s?(\d{1,3}(?:[.,]\d{1,3})?)(?![\d.]\d)(?:\s*\+/-\s*\d*\.?\d+)?")
_HZ = re.compile(r"\s*\(?\s*(?:Hz|HZ|hz|H\s?z|cps)\b\.?\s*\)?|\s*(?=[)])")
_JOIN = re.compile(r"\s*(?:[,;/&]|and|or)?\s*(?:and)?\s*")
_NOT_J = re.compile(r"\s*(?:[x×*]\s*\d{0,2}\s*)?(?:H(?![zZ])|protons?\b|C\b|ppm\b|[x×]\s*(?:C|O|N)?H|-[A-Za-z]|J|['\"])")
_OWN_UNIT = re.compile(r"(?:\s*(?:,|and|or|/)\s*\d{1,3}(?:\.\d+)?)*\s*(?:Hz|HZ|hz)\b")
_HETERO = re.compile(r"[FP]")


def partner_of(label: str) -> str:
    """"H-F", "C-F", "H-P" ... where the label names another nucleus, else ""."""
    nuclei = re.findall(r"[HCFP]", label)
    if len(nuclei) == 1 and nuclei[0] in "FP":
        return f"H-{nuclei[0]}"
    if len(nuclei) < 2 or not (_HETERO.search(label) or "C" in nuclei):
        return ""
    return "-".join(nuclei[:2])


def _value(found: re.Match[str]) -> tuple[float, int] | None:
    text = found.group(1).replace(",", ".")
    value = float(text)
    if found.group().startswith("-"):
        value = -value
    return value, len(text.partition(".")[2])


def _decimal_comma(text: str, found: re.Match[str]) -> bool:
    """True where a comma between digits is more likely a separator ("8,2" of "J = 8,2 Hz" stays a decimal)."""
    return "," in found.group(1) and text[found.end() : found.end() + 1] == "."


def read_couplings(text: str, position: int, end: int) -> tuple[tuple[Coupling, ...], int] | None:
    """A labelled group of J that starts at ``position`` of plain text, and where it ends; None if there is none.

    An empty tuple means that a label stands there without a readable number.
    """
    label = _LABEL.match(text, position, end)
    if label is None:
        return None
    partner = partner_of(label["who"] or "")
    found, stop = _numbers(text, label.end(), end, partner)
    return tuple(found), max(stop, label.end())


def _numbers(text: str, position: int, end: int, partner: str) -> tuple[list[Coupling], int]:
    """Numbers joined by commas, "and" or "/"; a number that counts nuclei ends the row."""
    found: list[Coupling] = []
    stop = position
    closed = False  # "Hz" was written: what follows is a J only if it has its own unit
    while len(found) < 12:
        number = _NUMBER.match(text, position, end)
        if number is None or _NOT_J.match(text, number.end(), end):
            break
        if closed and not _OWN_UNIT.match(text, number.end(), end):
            break
        last = number.end(1)
        if _decimal_comma(text, number):
            last = number.start(1) + number.group(1).index(",")
            number = _NUMBER.match(text, position, last)
            if number is None:
                break
        read = _value(number)
        if read is None:
            break
        found.append(Coupling(read[0], read[1], partner, Span(number.start(1), number.end(1))))
        stop = number.end()
        unit = _HZ.match(text, stop, end)
        stop = unit.end() if unit else stop
        closed = closed or bool(unit and unit.group().strip())
        join = _JOIN.match(text, stop, end)
        if join is None or join.end() == stop:
            break
        position = join.end()
    return found, stop


_BARE = re.compile(r"(?<![\w.])(\d{1,3}(?:[.,]\d{1,2})?)\s*(?:,\s*\d{1,3}(?:\.\d{1,2})?\s*){0,5}Hz\b")


def read_bare_couplings(text: str, position: int, end: int) -> tuple[tuple[Coupling, ...], int] | None:
    """"8.4 Hz" or "8.4, 2.1 Hz" without a label."""
    if _BARE.match(text, position, end) is None:
        return None
    found, stop = _numbers(text, position, end, "")
    return (tuple(found), stop) if found else None
