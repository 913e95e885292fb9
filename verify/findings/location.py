"""A place in a file, exact to the character."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True, order=True)
class Place:
    """Lines and columns count from 1 in Unicode code points; ``length`` counts characters on the first line.

    ``end_line``/``end_column`` point just behind the last character. ``pointer`` is the JSON Pointer
    (RFC 6901) of the value inside its record. A place without a file (text handed in by a
    program) has ``file == ""``.
    """

    file: str
    line: int
    column: int
    end_line: int
    end_column: int
    pointer: str = ""

    @property
    def length(self) -> int:
        """Characters on the first line; 0 where the place spans several lines."""
        return self.end_column - self.column if self.end_line == self.line else 0


@dataclass(frozen=True, slots=True, order=True)
class Span:
    """Half-open range of characters ``[start, end)`` in the text a stage was given."""

    start: int
    end: int


@dataclass(frozen=True, slots=True)
class Locus:
    """What a finding speaks of, in the record's own terms, before it is turned into a place.

    ``pointer`` names the value (RFC 6901), ``span`` the characters inside that value if it is text;
    ``spectrum`` and ``signal`` count from 0. ``on_key`` means the key that ends the pointer, not its value.
    """

    pointer: str = ""
    span: Span | None = None
    spectrum: int | None = None
    signal: int | None = None
    on_key: bool = False
