"""YAML events to plain data and, beside it, the tree of places; no text can make it run code or grow.

Types follow the core schema of YAML 1.2.2 (section 10.3). Keys stay text as typed. Anchors may be used again,
but what the document holds after they are expanded is bounded.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field

import yaml
from yaml.events import (
    AliasEvent,
    CollectionEndEvent,
    CollectionStartEvent,
    DocumentStartEvent,
    Event,
    MappingStartEvent,
    ScalarEvent,
)

from verify.record.characters import skip_properties
from verify.record.complaints import explain
from verify.record.decoding import Fault
from verify.record.nodes import Node
from verify.record.scalars import is_collection_tag, resolve_plain, resolve_tagged
from verify.record.wording import shortened

DEEPEST = 20
HEAVIEST = 50_000  # values of a document after its aliases are expanded; long texts weigh more
MOST_FAULTS = 100
_CHARACTERS_PER_WEIGHT = 64
_SURROGATE = re.compile("[\ud800-\udfff]")
_NO_KEY = "a list or a group of keys stands where a key is expected"
_Parser = getattr(yaml, "CBaseLoader", yaml.BaseLoader)  # libyaml where PyYAML was built with it


@dataclass(slots=True)
class Loaded:
    """``data`` is dict, list, str, int, float, bool or None; ``faults`` did not stop the reading."""

    data: object = None
    root: Node | None = None
    faults: list[Fault] = field(default_factory=list)


class RefusedError(Exception):
    """The document cannot be used; carries the one fault that says why. Never leaves this room."""

    def __init__(self, fault: Fault) -> None:
        """``fault`` is what the reader will be told."""
        super().__init__(fault.message)
        self.fault = fault


class _Frame:
    """A collection that is still open: its data, its node, and the key that waits for a value."""

    __slots__ = ("anchor", "before", "flow", "height", "key", "list", "map", "node", "skip")

    def __init__(self, node: Node, anchor: str | None, before: int, flow: bool) -> None:
        self.node = node
        self.anchor = anchor
        self.before = before
        self.flow = flow
        self.height = 1
        self.map: dict[str, object] | None = {} if node.style == "map" else None
        self.list: list[object] = []
        self.key: str | None = None
        self.skip = False

    @property
    def waits_for_key(self) -> bool:
        return self.map is not None and self.key is None

    @property
    def data(self) -> object:
        return self.list if self.map is None else self.map


def load(text: str) -> Loaded:
    """Load the one document of ``text``; raises RefusedError with the fault where it cannot be used."""
    loader = _Loader(text)
    parser = _Parser(text)
    try:
        event = parser.get_event()
        while event is not None:
            loader.take(event)
            event = parser.get_event()
    except yaml.MarkedYAMLError as error:
        raise RefusedError(explain(error, text)) from error
    except yaml.YAMLError as error:
        raise RefusedError(Fault("record-syntax", f"not valid YAML: {error}", 0, 1, "YAML")) from error
    finally:
        parser.dispose()
    if loader.loaded.root is None:
        raise RefusedError(Fault("record-empty", "the file holds no value", 0, 0, "a record"))
    return loader.loaded


class _Loader:
    def __init__(self, text: str) -> None:
        self.text = text
        self.loaded = Loaded()
        self.stack: list[_Frame] = []
        self.anchors: dict[str, tuple[object, Node, int]] = {}
        self.weight = 0
        self.documents = 0
        self.aliases = 0

    def take(self, event: Event) -> None:
        """Work one event into the document."""
        if isinstance(event, ScalarEvent):
            self._scalar(event)
        elif isinstance(event, CollectionStartEvent):
            self._open(event, "map" if isinstance(event, MappingStartEvent) else "seq")
        elif isinstance(event, CollectionEndEvent):
            self._close(event)
        elif isinstance(event, AliasEvent):
            self._alias(event)
        elif isinstance(event, DocumentStartEvent):
            self.documents += 1
            if self.documents > 1:
                self._refuse(
                    event, "record-many-documents", 'a second record begins here ("---")', "one record"
                )

    def _scalar(self, event: ScalarEvent) -> None:
        text, style = event.value, event.style or ""
        start, end = _offsets(event)
        if style == '"' and not text.isascii() and _SURROGATE.search(text):  # libyaml refuses it itself
            self._refuse(
                event, "record-syntax", "half of a character (\\ud800 to \\udfff)", "the whole character"
            )
        node = Node(start, end, style, text)
        self._grow(event, 1 + len(text) // _CHARACTERS_PER_WEIGHT)
        value: object = text if style else resolve_plain(text)
        if event.tag is not None:
            try:
                value = resolve_tagged(event.tag, text)
            except ValueError as error:
                self._refuse(event, "record-tag", str(error), "a plain value without a tag")
        if event.anchor:
            self.anchors[event.anchor] = (value, node, 0)
        self._attach(value, node, 0, (start, end))

    def _open(self, event: CollectionStartEvent, style: str) -> None:
        if not is_collection_tag(event.tag, style):
            self._refuse(event, "record-tag", f"the tag {event.tag!r} is not allowed", "no tag")
        if len(self.stack) >= DEEPEST:
            self._refuse_depth(event)
        if self.stack and self.stack[-1].waits_for_key:
            self._refuse(event, "record-syntax", _NO_KEY, "a word as key")
        start, _ = _offsets(event)
        frame = _Frame(Node(start, start, style), event.anchor, self.weight, bool(event.flow_style))
        self._grow(event, 1)
        self.stack.append(frame)

    def _close(self, event: CollectionEndEvent) -> None:
        frame = self.stack.pop()
        node = frame.node
        if frame.flow or not node.children:
            node.end = _offsets(event)[1]
        else:  # the event ends at the next token, behind blank lines and comments
            node.end = max(next(reversed(node.children.values())).end, node.start)
        node.weight = self.weight - frame.before
        if frame.anchor:
            self.anchors[frame.anchor] = (frame.data, node, frame.height)
        self._attach(frame.data, node, frame.height, (node.start, node.end))

    def _alias(self, event: AliasEvent) -> None:
        known = self.anchors.get(event.anchor or "")
        if known is None:
            inside = any(frame.anchor == event.anchor for frame in self.stack)
            why = "stands inside the value it repeats" if inside else "was not defined above"
            self._refuse(event, "record-alias-unknown", f"*{event.anchor} {why}", "an anchor defined above")
            return
        value, node, height = known
        self.aliases += 1
        if len(self.stack) + height > DEEPEST:
            self._refuse_depth(event)
        self._grow(event, node.weight)
        self._attach(value, node, height, _offsets(event))

    def _attach(self, value: object, node: Node, height: int, typed: tuple[int, int]) -> None:
        """Hand a finished value to the collection it stands in; ``typed`` is where it was typed there."""
        if not self.stack:
            self.loaded.data, self.loaded.root = value, node
            return
        frame = self.stack[-1]
        frame.height = max(frame.height, height + 1)
        if frame.map is None:
            frame.node.children[str(len(frame.list))] = node
            frame.list.append(value)
        elif frame.key is None:
            self._key(frame, node, typed)
        else:
            if not frame.skip:
                frame.map[frame.key] = value
                frame.node.children[frame.key] = node
            frame.key = None

    def _key(self, frame: _Frame, node: Node, typed: tuple[int, int]) -> None:
        start, end = typed
        if not node.is_scalar:
            raise RefusedError(Fault("record-syntax", _NO_KEY, start, end, "a word as key"))
        if start == node.start < end:  # else an alias
            start = skip_properties(self.text, start) if self.text[start] in "&!" else start
            quote = 1 if node.style in ("'", '"') else 0
            start, end = start + quote, end - quote
        key = node.value
        frame.key = key
        frame.skip = key in frame.node.keys
        if not frame.skip:
            frame.node.keys[key] = (start, end)
            return
        if len(self.loaded.faults) >= MOST_FAULTS:
            message = f"more than {MOST_FAULTS} keys stand twice"
            raise RefusedError(Fault("record-many-faults", message, start, end, "each key once"))
        message = f'the key "{shortened(key)}" stands twice here; only the first is read'
        self.loaded.faults.append(Fault("record-duplicate-key", message, start, end, "each key once"))

    def _grow(self, event: Event, weight: int) -> None:
        self.weight += weight
        if self.weight <= HEAVIEST:
            return
        if self.aliases:
            message = f"aliases (*name) blow the file up to more than {HEAVIEST} values"
            self._refuse(event, "record-alias-bomb", message, "values typed out")
        self._refuse(event, "record-too-large", f"the file holds more than {HEAVIEST} values", "one record")

    def _refuse_depth(self, event: Event) -> None:
        message = f"values are nested deeper than {DEEPEST} levels"
        self._refuse(event, "record-too-deep", message, f"at most {DEEPEST} levels")

    def _refuse(self, event: Event, code: str, message: str, expected: str) -> None:
        start, end = _offsets(event)
        raise RefusedError(Fault(code, message, start, max(end, start + 1), expected))


def _offsets(event: Event) -> tuple[int, int]:
    start, end = event.start_mark, event.end_mark
    return (start.index if start else 0), (end.index if end else 0)
