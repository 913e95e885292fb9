"""Bytes of a YAML (or JSON) file in; plain data out, with the place of every key, value and character."""

from __future__ import annotations

import errno
import os
import stat
from dataclasses import dataclass

from verify.findings.location import Locus, Span
from verify.findings.problem import Problem
from verify.record.decoding import MOST_BYTES, Fault, decode, too_large
from verify.record.loading import RefusedError, load
from verify.record.places import SourceMap

# No link is followed, and opening a pipe does not wait for a writer; both flags exist only on POSIX systems
_FLAGS = (
    os.O_RDONLY | getattr(os, "O_NOFOLLOW", 0) | getattr(os, "O_NONBLOCK", 0) | getattr(os, "O_BINARY", 0)
)


@dataclass(frozen=True, slots=True)
class Source:
    """``data`` is None, and a problem blocks the record, where the file could not be used at all."""

    data: object
    places: SourceMap
    problems: tuple[Problem, ...]

    @property
    def usable(self) -> bool:
        """Whether there is data to go on with."""
        return not any(problem.blocks == "record" for problem in self.problems)


def read_source(data: bytes, file: str) -> Source:
    """Load ``data`` as read from ``file``, safely: bounded in size, depth and expansion, running no code."""
    text, fault = decode(data)
    if fault is not None:
        return refused(fault, file, text)
    try:
        loaded = load(text)
    except RefusedError as refusal:
        return refused(refusal.fault, file, text)
    problems = tuple(_problem(each, blocks="") for each in loaded.faults)
    return Source(loaded.data, SourceMap(text, file, loaded.root), problems)


def read_file(path: str, file: str) -> Source:
    """Load the file at ``path``, at most the permitted size of it; ``file`` is its name in reports.

    Symbolic links, pipes and devices are refused: a record must not make the tool open something else.
    """
    try:
        data = read_bytes(path, MOST_BYTES)
    except UnfitFileError as unfit:
        return refused(unfit.fault, file)
    return read_source(data, file)


class UnfitFileError(Exception):
    """A file that is not opened or not read to its end; carries the fault. Stays in record and sources."""

    def __init__(self, fault: Fault) -> None:
        """``fault`` is what the reader will be told."""
        super().__init__(fault.message)
        self.fault = fault


def read_bytes(path: str, most: int) -> bytes:
    """The content of a regular file of at most ``most`` bytes; raises UnfitFileError."""
    try:
        descriptor = os.open(path, _FLAGS)
    except OSError as error:
        raise UnfitFileError(_unopened(error)) from error
    try:
        return _content(descriptor, most)
    except OSError as error:
        raise UnfitFileError(_unopened(error)) from error
    finally:
        os.close(descriptor)


def _content(descriptor: int, most: int) -> bytes:
    status = os.fstat(descriptor)
    if not stat.S_ISREG(status.st_mode):
        raise UnfitFileError(Fault("record-not-a-file", "this is no ordinary file", expected="a text file"))
    if status.st_size > most:
        raise UnfitFileError(too_large(status.st_size))
    with open(descriptor, "rb", closefd=False) as stream:
        data = stream.read(most + 1)
    if len(data) > most:  # it grew while it was read
        raise UnfitFileError(too_large(len(data)))
    return data


def _unopened(error: OSError) -> Fault:
    if error.errno == errno.ELOOP:
        return Fault(
            "record-path-outside", "this is a symbolic link; links are not followed", expected="a file"
        )
    if error.errno in (errno.ENOENT, errno.ENOTDIR):
        return Fault("record-missing", "there is no such file", expected="a file")
    return Fault(
        "record-not-a-file", f"the file cannot be opened: {error.strerror}", expected="a readable file"
    )


def refused(fault: Fault, file: str, text: str = "") -> Source:
    """A file that gave no data, with the one problem that says why."""
    return Source(None, SourceMap(text, file, None), (_problem(fault, blocks="record"),))


def _problem(fault: Fault, blocks: str) -> Problem:
    """Offsets count in the file's text: a span under the empty pointer (see ``SourceMap``)."""
    return Problem(fault.code, fault.message, Locus("", Span(fault.start, fault.end)), blocks, fault.expected)
