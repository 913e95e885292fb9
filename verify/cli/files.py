"""Reads input and writes reports: to a file all at once, or to standard output for ``-``."""

from __future__ import annotations

import os
import sys
import tempfile
from collections.abc import Iterable
from pathlib import Path

from verify.errors import UsageError

STANDARD_OUTPUT = "-"
LARGEST = 2_000_000  # bytes; a structure typed on the command line is smaller by far


def read_text(path: str) -> str:
    """Text of a small file; raises UsageError where it cannot be read."""
    try:
        with Path(path).open("rb") as file:
            data = file.read(LARGEST + 1)
        if len(data) > LARGEST:
            raise UsageError(f"{path}: holds more than {LARGEST} bytes; expected the text of one structure")
        return data.decode("utf-8-sig")
    except OSError as error:
        raise UsageError(f"{path}: cannot be read: {error.strerror}; give a file that exists") from error
    except UnicodeDecodeError as error:
        raise UsageError(f"{path}: is no UTF-8 text; expected the text of a structure") from error


def require_writable(*targets: str | None) -> None:
    """Raise UsageError before the work where a report could not be written after it."""
    given = [target for target in targets if target]
    if given.count(STANDARD_OUTPUT) > 1:
        raise UsageError("two reports are to go to standard output; give a file for all but one")
    for target in given:
        if target == STANDARD_OUTPUT:
            continue
        folder = Path(target).parent
        if Path(target).is_dir():
            raise UsageError(f"{target}: is a folder; give the name of a file to write")
        if not folder.is_dir():
            raise UsageError(f"{target}: there is no folder {folder}; make it or give another file")
        if not os.access(folder, os.W_OK):
            raise UsageError(f"{target}: the folder {folder} cannot be written to; give another file")


def write_output(target: str, parts: Iterable[str]) -> None:
    """Write a text in parts; a file appears whole or not at all. Raises UsageError where it cannot be written."""
    if target == STANDARD_OUTPUT:
        _to_standard_output(parts)
        return
    path = Path(target)
    try:
        _replace(path, parts)
    except OSError as error:
        raise UsageError(f"{target}: cannot be written: {error.strerror}; give another file") from error


def _to_standard_output(parts: Iterable[str]) -> None:
    """Reports are UTF-8 whatever the terminal is set to."""
    sys.stdout.flush()
    binary = getattr(sys.stdout, "buffer", None)
    for part in parts:
        if binary is None:  # standard output was replaced by a program that embeds the command
            sys.stdout.write(part)
        else:
            binary.write(part.encode("utf-8"))
    if binary is not None:
        binary.flush()


def _replace(path: Path, parts: Iterable[str]) -> None:
    if path.exists() and not path.is_file():  # a pipe or device cannot be replaced, only written to
        with path.open("w", encoding="utf-8", newline="\n") as file:
            file.writelines(parts)
        return
    real = path.resolve()  # a link stays a link
    handle, name = tempfile.mkstemp(dir=real.parent, prefix=f".{real.name}.", suffix=".part")
    try:
        with os.fdopen(handle, "w", encoding="utf-8", newline="\n") as file:
            file.writelines(parts)
        Path(name).chmod(_mode(real))
        Path(name).replace(real)
    except BaseException:
        Path(name).unlink(missing_ok=True)
        raise


def _mode(path: Path) -> int:
    """Permissions of the file that is replaced, else those a new file would get."""
    if path.exists():
        return path.stat().st_mode & 0o777
    mask = os.umask(0)
    os.umask(mask)
    return 0o666 & ~mask
