"""YAML events to plain data and, beside it, the tree of places; no text can make it run code or grow.

Types follow the core schema of YAML 1.2.2 (section 10.3). Keys stay text as typed. Anchors may be used again,
but what the document holds after they are expanded is bounded.
"""

from __future__ import annotations

from dataclasses import dataclass, field

import yaml
from yaml.events import (
    AliasEvent,
    DocumentStartEvent,
    Event,
    MappingEndEvent,
    MappingStartEvent,
    ScalarEvent,
    SequenceEndEvent,
    SequenceStartEvent,
)

from verify.record.characters import skip_properties
from verify.record.complaints import explain
from verify.record.decoding import Fault
from verify.record.nodes import Node
from verify.record.scalars import resolve_plain

DEEPEST = 20
HEAVIEST = 100_000  # values of a document after its aliases are expanded; long texts weigh more
_CHARACTERS_PER_WEIGHT = 64
_TAG = "tag:yaml.org,2002:"
_TYPED_TAGS: dict[str, tuple[type, ...]] = {
    _TAG + "int": (int,),
    _TAG + "float": (int, float),
    _TAG + "bool": (bool,),
    _TAG + "null": (type(None),),
}
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

    __slots__ = ("anchor", "before", "height", "key", "list", "map", "node", "skip")

    def __init__(self, node: Node, anchor: str | None, before: int) -> None:
        self.node = node
        self.anchor = anchor
        self.before = before
        self.height = 1
        self.map: dict[str, object] | None = {} if node.style == "map" else None
        self.list: list[object] = []
        self.key: str | None = None
        self.skip = False

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
        kind = type(event)
        if kind is ScalarEvent:
            self._scalar(event)
        elif kind is MappingStartEvent or kind is SequenceStartEvent:
            self._open(event, "map" if kind is MappingStartEvent else "seq")
        elif kind is MappingEndEvent or kind is SequenceEndEvent:
            self._close(event)
        elif kind is AliasEvent:
            self._alias(event)
        elif kind is DocumentStartEvent:
            self.documents += 1
            if self.documents > 1:
                self._refuse(
                    event, "record-many-documents", 'a second document begins here ("---")', "one record"
                )

    def _scalar(self, event: ScalarEvent) -> None:
        text, style = event.value, event.style or ""
        node = Node(event.start_mark.index, event.end_mark.index, style, text)
        self._grow(event, 1 + len(text) // _CHARACTERS_PER_WEIGHT)
        value: object = text if style else resolve_plain(text)
        if event.tag is not None:
            value = self._tagged(event, style)
        if event.anchor:
            self.anchors[event.anchor] = (value, node, 0)
        self._attach(value, node, 0)

    def _tagged(self, event: ScalarEvent, style: str) -> object:
        """A scalar with an explicit tag of the core schema; any other tag is refused."""
        if event.tag in (_TAG + "str", "!"):
            return event.value
        allowed = _TYPED_TAGS.get(event.tag)
        value = resolve_plain(event.value)
        if allowed is None:
            self._refuse(
                event, "record-tag", f"the tag {event.tag!r} is not allowed", "a plain value without a tag"
            )
        elif type(value) not in allowed or (style and value == ""):
            self._refuse(
                event, "record-tag", f"the value does not fit its tag {event.tag!r}", "a value without a tag"
            )
        return value

    def _open(self, event: MappingStartEvent | SequenceStartEvent, style: str) -> None:
        if event.tag not in (None, "!", f"{_TAG}{style}"):
            self._refuse(
                event, "record-tag", f"the tag {event.tag!r} is not allowed", "a plain value without a tag"
            )
        if len(self.stack) >= DEEPEST:
            self._refuse_depth(event)
        if self.stack and self.stack[-1].map is not None and self.stack[-1].key is None:
            self._refuse(event, "record-syntax", "a key is a list or a group", "a word as key")
        node = Node(event.start_mark.index, event.end_mark.index, style)
        frame = _Frame(node, event.anchor, self.weight)
        self._grow(event, 1)
        self.stack.append(frame)
        if not event.flow_style:
            node.end = -1

    def _close(self, event: MappingEndEvent | SequenceEndEvent) -> None:
        frame = self.stack.pop()
        node = frame.node
        if node.end >= 0 or not node.children:
            node.end = event.end_mark.index
        else:  # the end of a block would reach to the next token, over blank lines and comments
            node.end = max(next(reversed(node.children.values())).end, node.start)
        node.weight = self.weight - frame.before
        if frame.anchor:
            self.anchors[frame.anchor] = (frame.data, node, frame.height)
        self._attach(frame.data, node, frame.height)

    def _alias(self, event: AliasEvent) -> None:
        known = self.anchors.get(event.anchor)
        if known is None:
            inside = any(frame.anchor == event.anchor for frame in self.stack)
            why = "stands inside the value it repeats" if inside else "was not defined above"
            self._refuse(
                event,
                "record-alias-unknown",
                f"*{event.anchor} {why}",
                "an anchor defined above, or no alias",
            )
        else:
            value, node, height = known
            self.aliases += 1
            if len(self.stack) + height > DEEPEST:
                self._refuse_depth(event)
            self._grow(event, node.weight)
            self._attach(value, node, height, event)

    def _attach(self, value: object, node: Node, height: int, alias: AliasEvent | None = None) -> None:
        """Hand a finished value to the collection it stands in."""
        if not self.stack:
            self.loaded.data, self.loaded.root = value, node
            return
        frame = self.stack[-1]
        if height >= frame.height:
            frame.height = height + 1
        if frame.map is None:
            frame.node.children[str(len(frame.list))] = node
            frame.list.append(value)
        elif frame.key is None:
            self._key(frame, node, alias)
        else:
            if not frame.skip:
                frame.map[frame.key] = value
                frame.node.children[frame.key] = node
            frame.key = None

    def _key(self, frame: _Frame, node: Node, alias: AliasEvent | None) -> None:
        if not node.is_scalar:
            self._refuse(alias, "record-syntax", "a key is a list or a group", "a word as key")
        start, end = (
            (node.start, node.end) if alias is None else (alias.start_mark.index, alias.end_mark.index)
        )
        if alias is None:
            start = skip_properties(self.text, start) if start < end and self.text[start] in "&!" else start
            if node.style in ("'", '"'):
                start, end = start + 1, end - 1
        key = node.value
        frame.key = key
        frame.skip = key in frame.node.keys
        if not frame.skip:
            frame.node.keys[key] = (start, end)
            return
        message = f'the key "{key}" stands twice here; only the first is read'
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

    def _refuse(self, event: Event | None, code: str, message: str, expected: str) -> None:
        start = event.start_mark.index if event is not None else 0
        end = event.end_mark.index if event is not None else 0
        raise RefusedError(Fault(code, message, start, max(end, start + 1), expected))
