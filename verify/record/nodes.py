"""The tree of places behind a loaded document: which characters of the file each value and key came from."""

from __future__ import annotations


class Node:
    """One value of the document, as offsets ``[start, end)`` in code points of the file's text.

    ``style`` is "" (plain), "'", '"', "|" or ">" for scalars, "map" or "seq" for collections. ``value`` is
    the loaded text of a scalar. ``keys`` holds the offsets of each key of a mapping; ``children`` the values
    of a mapping by key, or of a sequence by position. ``weight`` counts nodes after aliases are expanded. An
    alias shares the node of its anchor.
    """

    __slots__ = ("children", "end", "keys", "start", "style", "value", "weight")

    def __init__(self, start: int, end: int, style: str, value: str = "") -> None:
        """A node without children; the builder adds them."""
        self.start = start
        self.end = end
        self.style = style
        self.value = value
        self.keys: dict[str, tuple[int, int]] = {}
        self.children: dict[str, Node] = {}
        self.weight = 1

    @property
    def is_scalar(self) -> bool:
        """True for text, numbers, booleans and null."""
        return self.style != "map" and self.style != "seq"


def unescape(token: str) -> str:
    """A reference token of a JSON Pointer as the key it stands for (RFC 6901, section 4)."""
    return token.replace("~1", "/").replace("~0", "~")


def escape(key: object) -> str:
    """A key or position as a reference token of a JSON Pointer (RFC 6901, section 3)."""
    return str(key).replace("~", "~0").replace("/", "~1")


def pointer_of(path: tuple[object, ...]) -> str:
    """The JSON Pointer of a path of keys and positions; "" for the whole document."""
    return "".join("/" + escape(step) for step in path)
