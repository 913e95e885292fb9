"""Names of places and values of a record in the words of messages."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

_ONE_OF = {"spectra": "spectrum", "components": "component", "signals": "signal", "mass": "mass"}
_LONGEST = 60


def label_of(path: Sequence[object]) -> str:
    """A path of keys and positions as a reader says it: ``field_mhz of spectrum 2``; "" for the whole."""
    words: list[str] = []
    for step, parent in zip(path, ("", *path), strict=False):
        if isinstance(step, int):
            singular = _ONE_OF.get(str(parent), f"{parent} item")
            words[-1:] = [f"{singular} {step + 1}"]
        else:
            words.append(str(step))
    return " of ".join(reversed(words))


def shortened(text: str) -> str:
    """A text on one line, cut where it is too long for a sentence."""
    cut = text if len(text) <= _LONGEST else text[: _LONGEST - 1] + "…"
    return " ".join(cut.split())


def shown(value: object) -> str:
    """A value as it may stand in a sentence: short, on one line, with its kind where that is the point."""
    if value is None:
        return "empty"
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, str):
        return f'the text "{shortened(value)}"' if value.strip() else "an empty text"
    if isinstance(value, Mapping):
        return "a group of keys"
    if isinstance(value, list | tuple):
        return "a list"
    if isinstance(value, int | float):
        return f"{value:g}" if abs(value) < 1e15 else "a very large number"
    return f"a value of type {type(value).__name__}"
