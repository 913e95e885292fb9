"""The console of the commands: plain text in, and a reader that goes away changes no exit status."""

from __future__ import annotations

import os
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from typing import NoReturn

from rich.console import Console


class Terminal(Console):
    """Standard output, where text is text: nothing in a record is markup or highlighted."""

    def __init__(self) -> None:
        super().__init__(file=sys.stdout, highlight=False, markup=False, emoji=False)

    def on_broken_pipe(self) -> NoReturn:
        """Raise it again; the base class would end the process with a status that says "held"."""
        raise BrokenPipeError


@contextmanager
def listened_to() -> Iterator[None]:
    """For output whose reader may go away (``| head``): the work is done, and its exit status stands."""
    try:
        yield
        sys.stdout.flush()
    except BrokenPipeError:
        forget_standard_output()


def forget_standard_output() -> None:
    """Write nothing more to a reader that went away, not even when Python ends."""
    os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
