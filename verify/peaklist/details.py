"""Reads what stands behind a shift, in any order: multiplicity, J, number of nuclei, assignment in words."""

from __future__ import annotations

import re
from dataclasses import dataclass, field

from verify.findings.location import Locus, Span
from verify.findings.problem import Problem
from verify.peaklist.couplings import read_bare_couplings, read_couplings
from verify.peaklist.letters import read_letters
from verify.peaklist.model import Coupling, Multiplicity

MOST_NUCLEI = 500.0
_NUCLEI = re.compile(
    r"(?:~|ca\.?|approx\.?)?\s*(?:(?P<times>\d{1,2})\s*[x×*]\s*)?(?P<count>\d{1,12}(?:[.,]\d{1,3})?|(?P<cyr>\d))?\s*(?P<h>H|protons?\b)"
    r"(?P<back>\s*[x×]\s*\d{1,2}(?![\d.]))?(?![A-Za-z\d_'])(?!\s*-\s*[A-Za-z\d('])"
)
_NO_NUMBER = re.compile(r"(?<![A-Za-z\d-])(?P<word>[xXnyz?]|\?+|\d+(?:\.\d+)?[eE][-+]?\d+)\s*H(?![A-Za-z\d'-])")
_OF_CARBON = re.compile(
    r"(?:(?P<n>\d{1,2})\s*[x×*]?\s*(?:Ar-?|aryl\s*)?(?P<kind>CH3|CH2|CH|Cq|C)|[x×]\s*(?P<m>\d{1,2})(?P<none>)|(?P<k2>CH3|CH2|CH|Cq|C)\s*[x×]\s*(?P<m2>\d{1,2}))"
    r"(?![A-Za-z\d=≡])"
)
_ATTACHED = re.compile(r"(?:(?:Ar-?|aryl\s*)(?=CH))?(?P<kind>CH3|CH2|CH|Cq|C_?q|C quat\.?|quat\.?|C)(?![A-Za-z\d(=≡'-])(?!\s*[=≡])")
_LONE_H = re.compile(r"H(?=\s*(?:[,;)]|$))")
_KINDS = {"CH3": 3, "CH2": 2, "CH": 1}
_SEPARATOR = re.compile(r"[\s,;:/]+")
_HIDDEN = re.compile(r"\b(?:overlap\w*|under|hidden|obscured|buried|masked|partially? covered|ovl)\b", re.IGNORECASE)


@dataclass(slots=True)
class Details:
    """What was read; ``words`` collects the rest of the text."""

    multiplicity: Multiplicity | None = None
    couplings: list[Coupling] = field(default_factory=list)
    nuclei: float | None = None
    nuclei_span: Span | None = None
    attached_h: int | None = None
    words: list[str] = field(default_factory=list)
    problems: list[Problem] = field(default_factory=list)

    @property
    def annotation(self) -> str:
        """Assignment and remarks, as typed, joined by blanks."""
        return " ".join(word for word in self.words if word).strip(" ,;")

    @property
    def hidden(self) -> bool:
        """True where the words say that the signal lies under another one."""
        return bool(_HIDDEN.search(self.annotation))

    @property
    def empty(self) -> bool:
        """True where nothing but words was read."""
        return self.multiplicity is None and self.nuclei is None and not self.couplings


def read_details(text: str, start: int, end: int, nucleus: str) -> Details:
    """Read ``text[start:end]`` of plain text; offsets of spans count in ``text``."""
    found = Details()
    position = start
    fresh = True  # a separator, or the start, stands before this position
    while position < end:
        gap = _SEPARATOR.match(text, position, end)
        if gap is not None:
            position, fresh = gap.end(), True
            continue
        after = _step(text, position, end, nucleus, found) if fresh else None
        if after is None:
            after = _word_end(text, position, end)
            found.words.append(text[position:after])
        fresh = after > position and (after >= end or not (text[after - 1].isalnum() and text[after : after + 1].isalnum()))
        position = after
    return found


def _word_end(text: str, position: int, end: int) -> int:
    """End of one word; a bracket inside it, such as "C(CH3)2", belongs to it."""
    depth, here = 0, position
    while here < end:
        character = text[here]
        if character == "(":
            depth += 1
        elif character == ")":
            depth = max(0, depth - 1)
        elif depth == 0 and character in " ,;:/":
            break
        here += 1
    return max(here, position + 1)


def _step(text: str, position: int, end: int, nucleus: str, found: Details) -> int | None:
    """Read one piece of information at ``position``; the offset behind it, or None if there is none."""
    read = read_couplings(text, position, end)
    if read is not None:
        values, stop = read
        found.couplings.extend(values)
        if not values and text[stop : stop + 1] != "J":
            found.problems.append(_no_coupling(text, position, stop))
        return stop
    counted = (_carbon if nucleus == "13C" else _nuclei)(text, position, end, found)
    if counted is not None:
        return counted
    bare = read_bare_couplings(text, position, end)
    if bare is not None:
        found.couplings.extend(bare[0])
        return bare[1]
    if found.multiplicity is None and (nucleus != "13C" or text[position].islower()):
        letters = read_letters(text, position, end)
        if letters is not None:
            found.multiplicity = letters[0]
            return letters[1]
    return None


def _no_coupling(text: str, start: int, stop: int) -> Problem:
    words = f"no number follows '{text[start:stop].strip()}'"
    return Problem("coupling-unreadable", words, Locus(span=Span(start, stop)), expected="J = 7.1 Hz")


def _nuclei(text: str, position: int, end: int, found: Details) -> int | None:
    unknown = _NO_NUMBER.match(text, position, end)
    if unknown is not None and found.nuclei is None:
        span = Span(position, unknown.end())
        message = f"'{text[position : unknown.end()]}' is no number of nuclei"
        found.problems.append(Problem("nuclei-unreadable", message, Locus(span=span), "signal", "a number such as 2H"))
        return unknown.end()
    match = _NUCLEI.match(text, position, end)
    if match is None or match["count"] is None:
        lone = _LONE_H.match(text, position, end) if found.nuclei is None else None
        if lone is None:
            return None
        found.nuclei, found.nuclei_span = 1.0, Span(position, lone.end())  # "(s, H, NH)" says one
        return lone.end()
    value = float(match["count"].replace(",", ".")) * float(match["times"] or 1)
    if match["back"]:
        value *= float(match["back"].strip(" x×"))
    span = Span(position, match.end())
    if not 0.0 < value <= MOST_NUCLEI:
        message = f"'{text[position : match.end()]}' is no possible number of nuclei"
        expected = f"more than 0 and at most {MOST_NUCLEI:.0f}"
        found.problems.append(Problem("nuclei-impossible", message, Locus(span=span), "signal", expected))
    elif found.nuclei is None:
        found.nuclei, found.nuclei_span = value, span
    else:
        found.words.append(text[position : match.end()])
    return match.end()


def _carbon(text: str, position: int, end: int, found: Details) -> int | None:
    """Counts ("2C", "x2", "2 x CH") and attached hydrogen ("CH2", "Cq") of a carbon line."""
    several = _OF_CARBON.match(text, position, end)
    if several is not None:
        count = float(several["n"] or several["m"] or several["m2"])
        if found.nuclei is None and 0.0 < count <= 60.0:
            found.nuclei, found.nuclei_span = count, Span(position, several.end())
        kind = several["kind"] or several["k2"]
        if kind in _KINDS and found.attached_h is None:
            found.attached_h = _KINDS[kind]
        found.words.append(text[position : several.end()])
        return several.end()
    attached = _ATTACHED.match(text, position, end)
    if attached is not None and found.attached_h is None:
        found.attached_h = _KINDS.get(attached["kind"], 0)
        found.words.append(attached.group())
        return attached.end()
    return None
