"""From a character of a loaded YAML string back to the characters of the file it was written with.

The rules of line folding, indentation and escapes are those of YAML 1.2.2, chapters 6.5, 7.3 and 8.1. Each
function rebuilds the text beside its offsets, so that the caller can check the map against the value loaded.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field

_PROPERTIES = re.compile(
    "(?:[ \t\r\n\x85\u2028\u2029]+|#[^\r\n\x85\u2028\u2029]*|[&!][^ \t\r\n\x85\u2028\u2029]*)*"
)
_BREAK = re.compile("\r\n|[\r\n\x85\u2028\u2029]")
_LINE = re.compile("([^\r\n\x85\u2028\u2029]*)(\r\n|[\r\n\x85\u2028\u2029]|\\Z)")
_HEADER = re.compile("[|>]([-+1-9]*)[^\r\n\x85\u2028\u2029]*(?:\r\n|[\r\n\x85\u2028\u2029]|\\Z)")
_ESCAPE = re.compile(r"\\(?:x[0-9a-fA-F]{2}|u[0-9a-fA-F]{4}|U[0-9a-fA-F]{8}|[^\r\n])")
_SHORT = {
    "0": "\0", "a": "\a", "b": "\b", "t": "\t", "\t": "\t", "n": "\n", "v": "\v", "f": "\f", "r": "\r",
    "e": "\x1b", " ": " ", '"': '"', "/": "/", "\\": "\\",
    "N": "\x85", "_": "\xa0", "L": "\u2028", "P": "\u2029",
}  # fmt: skip


@dataclass(slots=True)
class CharacterMap:
    """Character ``i`` of the loaded string was written as ``[starts[i], ends[i])`` of the file's text."""

    characters: list[str] = field(default_factory=list)
    starts: list[int] = field(default_factory=list)
    ends: list[int] = field(default_factory=list)

    def add(self, character: str, start: int, end: int) -> None:
        """Append one loaded character and the offsets that wrote it."""
        self.characters.append(character)
        self.starts.append(start)
        self.ends.append(end)

    def add_run(self, text: str, start: int, end: int) -> None:
        """Append ``text[start:end]``, written as itself."""
        self.characters.extend(text[start:end])
        self.starts.extend(range(start, end))
        self.ends.extend(range(start + 1, end + 1))

    def add_breaks(self, breaks: list[tuple[int, int, str]]) -> None:
        """Append line breaks (start, end, as typed)."""
        for start, end, typed in breaks:
            self.add(_normal(typed), start, end)


def skip_properties(text: str, start: int) -> int:
    """Offset of the scalar itself behind its anchor and tag, if it has any."""
    found = _PROPERTIES.match(text, start)
    return found.end() if found else start


def map_characters(text: str, start: int, end: int, style: str, value: str) -> CharacterMap | None:
    """The map of one scalar that stands in ``text[start:end]``; None where it cannot be rebuilt exactly."""
    begin = skip_properties(text, start) if start < end else start
    if style in ("|", ">"):
        return _map_block(text[:end], begin, style, value)
    quote = 0 if style == "" else 1
    found = _map_flow(text, begin + quote, end - quote, style)
    return found if "".join(found.characters) == value else None


def _normal(typed: str) -> str:
    return typed if typed in ("\u2028", "\u2029") else "\n"


def _map_flow(text: str, start: int, end: int, style: str) -> CharacterMap:
    """Plain and quoted scalars: breaks fold, blanks around them vanish."""
    out = CharacterMap()
    position = start
    while position < end:
        stop = position
        found = _BREAK.search(text, position, end)
        line_end = found.start() if found else end
        kept_blank = _copy_line(out, text, position, line_end, style, last=found is None)
        if found is None:
            break
        breaks: list[tuple[int, int, str]] = []
        stop = line_end
        while found is not None and found.start() == stop:
            breaks.append((found.start(), found.end(), found.group()))
            stop = found.end()
            while stop < end and text[stop] in " \t":
                stop += 1
            found = _BREAK.match(text, stop, end)
        _fold(out, breaks, escaped=kept_blank)
        position = stop
    return out


def _copy_line(out: CharacterMap, text: str, start: int, end: int, style: str, *, last: bool) -> bool:
    """Copy one line without the blanks before its break; True where a backslash escapes the break itself."""
    position = start
    solid = len(out.characters)  # blanks behind an escape or letter only vanish if a break follows
    while position < end:
        character = text[position]
        if style == '"' and character == "\\":
            found = _ESCAPE.match(text, position, end)
            if found is None:
                return True
            out.add(_escaped(found.group()), position, found.end())
            position = found.end()
            solid = len(out.characters)
            continue
        width = 2 if style == "'" and character == "'" else 1
        out.add(character, position, position + width)
        position += width
        if character not in " \t":
            solid = len(out.characters)
    if not last:
        del out.characters[solid:], out.starts[solid:], out.ends[solid:]
    return False


def _escaped(escape: str) -> str:
    if escape[1] in "xuU" and len(escape) > 2:
        return chr(int(escape[2:], 16))
    return _SHORT.get(escape[1], escape[1])


def _fold(out: CharacterMap, breaks: list[tuple[int, int, str]], *, escaped: bool) -> None:
    """One break reads as a space, n breaks as n - 1; an escaped first break reads as nothing."""
    start, end, typed = breaks[0]
    if _normal(typed) != "\n":
        out.add_breaks(breaks)
    elif len(breaks) == 1 and not escaped:
        out.add(" ", start, end)
    else:
        out.add_breaks(breaks[1:])


def _map_block(text: str, start: int, style: str, value: str) -> CharacterMap | None:
    """Literal and folded blocks."""
    header = _HEADER.match(text, start)
    if header is None:
        return None
    chomping = next((c for c in header.group(1) if c in "+-"), "")
    indent = _indentation(text, header.end(), value)
    found = _map_block_lines(text, header.end(), style, indent, chomping)
    return found if "".join(found.characters) == value else None


def _indentation(text: str, start: int, value: str) -> int:
    """The blanks that each line of a block was indented by, which the parser does not tell.

    The value begins with one break for each blank line; its first other line keeps
    the blanks beyond the indentation.
    """
    body = value.lstrip("\n\u2028\u2029")
    blank_lines = len(value) - len(body)
    widest = 0
    for number, line in enumerate(_LINE.finditer(text, start)):
        blanks = len(line.group(1)) - len(line.group(1).lstrip(" "))
        if body and number == blank_lines:
            return blanks - (len(body) - len(body.lstrip(" ")))
        widest = max(widest, blanks)
        if line.end() == len(text):
            break
    return widest


def _map_block_lines(text: str, start: int, style: str, indent: int, chomping: str) -> CharacterMap:
    out = CharacterMap()
    leading: tuple[int, int, str] | None = None
    trailing: list[tuple[int, int, str]] = []
    position, after_blank = start, False
    while position < len(text):
        line = _LINE.match(text, position)
        if line is None:
            break
        content = position + min(indent, len(line.group(1)) - len(line.group(1).lstrip(" ")))
        line_end, ending = line.end(1), (line.start(2), line.end(2), line.group(2))
        position = line.end()
        if content == line_end and ending[2]:
            trailing.append(ending)
            continue
        if content < line.start() + indent or content == line_end:
            break
        blank = text[content] in " \t"
        folds = (
            style == ">"
            and leading is not None
            and _normal(leading[2]) == "\n"
            and not (after_blank or blank)
        )
        if leading is not None and not (folds and trailing):
            out.add(" " if folds else _normal(leading[2]), leading[0], leading[1])
        out.add_breaks(trailing)
        out.add_run(text, content, line_end)
        leading, trailing, after_blank = (ending if ending[2] else None), [], blank
    if chomping != "-" and leading is not None:
        out.add_breaks([leading])
    if chomping == "+":
        out.add_breaks(trailing)
    return out
