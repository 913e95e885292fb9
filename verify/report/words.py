"""Words, shapes and colours of verdicts and levels: no state is told by colour alone."""

from __future__ import annotations

from verify.findings.finding import Finding, Level
from verify.findings.location import Place
from verify.findings.result import RecordResult, Verdict

# source: M. Okabe, K. Ito, Color Universal Design (2008), a set that colour-blind readers tell apart
COLOURS = {
    Verdict.CONSISTENT: "#009E73",
    Verdict.QUERIED: "#E69F00",
    Verdict.CONTRADICTED: "#D55E00",
    Verdict.UNASSESSED: "#56B4E9",
}
LEVEL_COLOURS = {Level.ERROR: "#D55E00", Level.WARNING: "#E69F00", Level.NOTE: "#56B4E9"}
MARKS = {
    Verdict.CONSISTENT: "○",
    Verdict.QUERIED: "◆",
    Verdict.CONTRADICTED: "■",
    Verdict.UNASSESSED: "△",
}
PLAIN_MARKS = {
    Verdict.CONSISTENT: "o",
    Verdict.QUERIED: "?",
    Verdict.CONTRADICTED: "#",
    Verdict.UNASSESSED: "-",
}
CAUTION = "Consistent means that nothing in the lists speaks against the structure; it proves no identity or purity."


def place_words(place: Place | None) -> str:
    """``file:line:column`` as editors jump to it, "" without a file."""
    if place is None or not place.file:
        return ""
    return f"{printable(place.file)}:{place.line}:{place.column}"


def short_place(place: Place | None, source: str, room: int) -> str:
    """The same seen from the registry's folder; leading folders give way where the room is short."""
    words = place_words(place)
    inside = source.rstrip("/") + "/"
    words = words.removeprefix(inside) if inside != "/" else words
    while len(words) > room and "/" in words.removeprefix("…/"):
        words = "…/" + words.removeprefix("…/").split("/", 1)[1]
    return words if len(words) <= room or place is None else f"…:{place.line}:{place.column}"


def printable(text: str) -> str:
    """One line of text that cannot move the cursor, ring or recolour: control characters become U+FFFD."""
    return "".join(c if c.isprintable() else " " if c in "\t\r\n" else "\ufffd" for c in text)


def gravest(record: RecordResult) -> Finding | None:
    """The first standing error, else the first standing warning; notes are no reason to look."""
    for level in (Level.ERROR, Level.WARNING):
        standing = record.standing(level)
        if standing:
            return standing[0]
    return None


def counted(number: int, one: str, many: str = "") -> str:
    """``1 record``, ``2 records``."""
    return f"{number} {one if number == 1 else many or one + 's'}"
