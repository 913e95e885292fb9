"""From the bytes of a file to its text, or to the place and reason why it is no text."""

from __future__ import annotations

import codecs
import re
from dataclasses import dataclass

MOST_BYTES = 1_000_000  # a record of a thousand signals takes about 50 kB
_FORBIDDEN = re.compile("[^\t\n\r\x20-\x7e\x85\xa0-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")
_FOREIGN_MARKS = {
    codecs.BOM_UTF32_LE: "UTF-32",
    codecs.BOM_UTF32_BE: "UTF-32",
    codecs.BOM_UTF16_LE: "UTF-16",
    codecs.BOM_UTF16_BE: "UTF-16",
}


@dataclass(frozen=True, slots=True)
class Fault:
    """Why a file cannot be used, with the code points ``[start, end)`` of its text that show it."""

    code: str
    message: str
    start: int = 0
    end: int = 0
    expected: str = ""


def decode(data: bytes) -> tuple[str, Fault | None]:
    """The text without its byte order mark, and what is wrong with it.

    A text with a fault is still given as far as it can be shown, so that the fault has a line and a column.
    """
    if len(data) > MOST_BYTES:
        return "", too_large(len(data))
    if data.startswith(codecs.BOM_UTF8):
        data = data[len(codecs.BOM_UTF8) :]
    for mark, name in _FOREIGN_MARKS.items():
        if data.startswith(mark):
            return "", Fault(
                "record-not-text", f"the file is saved as {name}", expected="text saved as UTF-8"
            )
    if b"\0" in data:
        return "", Fault("record-not-text", "the file is binary, not text", expected="text saved as UTF-8")
    try:
        text = data.decode("utf-8")
    except UnicodeDecodeError as error:
        return _undecodable(data, error.start)
    if not text.strip():
        return text, Fault("record-empty", "the file is empty", expected="a record")
    found = _FORBIDDEN.search(text)
    if found:
        message = f"the control character U+{ord(found.group()):04X} is not allowed in a text file"
        return text, Fault("record-not-text", message, found.start(), found.end(), "text saved as UTF-8")
    return text, None


def too_large(size: int) -> Fault:
    """The fault of a file of ``size`` bytes that was not read because of its size."""
    message = f"the file has {size / 1e6:.1f} MB; files above {MOST_BYTES / 1e6:.0f} MB are not read"
    return Fault("record-too-large", message, expected=f"at most {MOST_BYTES / 1e6:.0f} MB")


def _undecodable(data: bytes, position: int) -> tuple[str, Fault]:
    start = len(data[:position].decode("utf-8"))
    guess = data[position : position + 1].decode("cp1252", "replace")
    as_read = (
        f"; in Windows encoding it would be {guess!r}" if guess.isprintable() and guess != "\ufffd" else ""
    )
    message = f"byte 0x{data[position]:02X} is no UTF-8 text{as_read}"
    fault = Fault("record-not-text", message, start, start + 1, "text saved as UTF-8")
    return data.decode("utf-8", "replace"), fault
