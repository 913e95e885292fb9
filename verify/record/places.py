"""Where a value of a record stands in its file, to the character; a string's map is made when asked for."""

from __future__ import annotations

import re
from bisect import bisect_right
from collections.abc import Mapping, Sequence

from verify.findings.location import Locus, Place, Span
from verify.record.characters import CharacterMap, map_characters, skip_properties
from verify.record.nodes import Node, unescape

_LINE_END = re.compile(r"\r\n|\r|\n")


class SourceMap:
    """Places of the values of one document.

    A span under the empty pointer counts in the text of the whole file: it is how a fault of a file that
    could not be loaded is placed. Lines end at LF, CRLF or CR; a byte order mark is no column.
    """

    def __init__(self, text: str, file: str, root: Node | None) -> None:
        """``text`` is the decoded file without a byte order mark; ``root`` is None where it did not load."""
        self.text = text
        self.file = file
        self.root = root
        self._line_starts: list[int] | None = None
        self._maps: dict[tuple[int, int], CharacterMap | None] = {}

    def place(self, locus: Locus) -> Place:
        """The characters that ``locus`` speaks of; its nearest parent where the pointer leads nowhere."""
        if locus.on_key:
            return self.key_place(locus.pointer)
        if locus.pointer == "" and locus.span is not None:
            return self.between(locus.span.start, locus.span.end, "")
        node, complete = self._find(locus.pointer)
        if node is None:
            return self.between(0, 0, locus.pointer)
        start, end = self._extent(node, locus.span if complete else None)
        return self.between(start, end, locus.pointer)

    def key_place(self, pointer: str) -> Place:
        """The key that ends ``pointer``; for an item of a list, or where there is no such key, its value."""
        parent, _, token = pointer.rpartition("/")
        node, complete = self._find(parent)
        span = node.keys.get(unescape(token)) if node is not None and complete and pointer else None
        if span is None:
            return self.place(Locus(pointer))
        return self.between(span[0], span[1], pointer)

    def typed(self, pointer: str) -> str | None:
        """The text of a scalar as it was typed, before it became a number; None where no scalar stands."""
        node, complete = self._find(pointer)
        return node.value if node is not None and complete and node.is_scalar else None

    def line_of(self, offset: int) -> int:
        """Line (from 1) of an offset in the file's text."""
        return bisect_right(self._starts(), offset)

    def _find(self, pointer: str) -> tuple[Node | None, bool]:
        node = self.root
        if node is None:
            return None, False
        for token in pointer.split("/")[1:]:
            child = node.children.get(unescape(token))
            if child is None:
                return node, False
            node = child
        return node, True

    def _extent(self, node: Node, span: Span | None) -> tuple[int, int]:
        if not node.is_scalar:
            return skip_properties(self.text, node.start), len(self.text[: node.end].rstrip())
        if not node.value:
            return skip_properties(self.text, node.start) if node.start < node.end else node.start, node.end
        characters = self._characters(node)
        if characters is None:
            return skip_properties(self.text, node.start), node.end
        last = len(characters.starts)
        first = 0 if span is None else min(max(span.start, 0), last)
        behind = last if span is None else min(max(span.end, first), last)
        if span is None:
            behind = max(len(node.value.rstrip("\n")), 1)
        start = characters.starts[first] if first < last else characters.ends[last - 1]
        return start, characters.ends[behind - 1] if behind > first else start

    def _characters(self, node: Node) -> CharacterMap | None:
        key = (node.start, node.end)
        if key not in self._maps:
            self._maps[key] = map_characters(self.text, node.start, node.end, node.style, node.value)
        return self._maps[key]

    def _starts(self) -> list[int]:
        if self._line_starts is None:
            self._line_starts = [0, *(found.end() for found in _LINE_END.finditer(self.text))]
        return self._line_starts

    def between(self, start: int, end: int, pointer: str) -> Place:
        """The place of the file's characters ``[start, end)``; offsets beyond its end are drawn to it."""
        limit = len(self.text)
        start = min(max(start, 0), limit)
        end = min(max(end, start), limit)
        starts = self._starts()
        line, last = bisect_right(starts, start), bisect_right(starts, end)
        if end > start and end == starts[last - 1]:  # just behind a line break: stay on the line that it ends
            last -= 1
        return Place(self.file, line, start - starts[line - 1] + 1, last, end - starts[last - 1] + 1, pointer)


class ValuePlaces:
    """Places of a record handed in by a program: lines and columns count inside the text value itself."""

    def __init__(self, data: object) -> None:
        """``data`` is the record's mapping as plain values."""
        self._data = data

    def place(self, locus: Locus) -> Place | None:
        """Line and column inside the text at the pointer, with an empty file; None where no text stands."""
        value = self._data
        for token in locus.pointer.split("/")[1:]:
            value = _child(value, unescape(token))
        if not isinstance(value, str) or locus.on_key:
            return None
        return _inside(value, locus)


class TextPlaces:
    """Places of a record whose texts are known by their pointers only; lines count inside each text."""

    def __init__(self, texts: Mapping[str, str]) -> None:
        """``texts`` by JSON Pointer."""
        self._texts = texts

    def place(self, locus: Locus) -> Place | None:
        """Line and column inside the text at the pointer, with an empty file; None where no text stands."""
        text = self._texts.get(locus.pointer)
        return None if text is None or locus.on_key else _inside(text, locus)


def _inside(text: str, locus: Locus) -> Place:
    span = locus.span or Span(0, len(text))
    return SourceMap(text, "", None).between(span.start, span.end, locus.pointer)


def _child(value: object, key: str) -> object:
    if isinstance(value, Mapping):
        return value.get(key)
    if isinstance(value, Sequence) and not isinstance(value, str) and key.isdigit() and int(key) < len(value):
        return value[int(key)]
    return None
