"""Options of commands, with errors that say what was found, what is expected and what to do."""

from __future__ import annotations

import argparse
from difflib import get_close_matches
from typing import NoReturn

from verify.errors import UsageError


class CommandParser(argparse.ArgumentParser):
    """Like its base, but a wrong call is raised as UsageError, in words, with the nearest known option."""

    def __init__(self, name: str, description: str, epilog: str = "") -> None:
        """``name`` follows ``peakwitness`` on the command line; "" is the command itself."""
        super().__init__(
            prog=f"peakwitness {name}".strip(), description=description, epilog=epilog, allow_abbrev=False
        )

    def error(self, message: str) -> NoReturn:
        """Raise UsageError; argparse would print its own text and exit."""
        raise UsageError(f"{message}{self._nearest(message)}\nTry: {self.prog} --help")

    def _nearest(self, message: str) -> str:
        """ "; did you mean --json?" for an unknown option."""
        if not message.startswith("unrecognized arguments: -"):
            return ""
        typed = message.split()[2].split("=")[0]
        close = get_close_matches(typed, list(self._option_string_actions), n=1, cutoff=0.6)
        return f"; did you mean {close[0]}?" if close else ""


def number_of_workers(text: str) -> int:
    """An ``argparse`` type: 0 to 256."""
    if not text.isascii() or not text.isdigit() or int(text) > 256:
        raise argparse.ArgumentTypeError(f"'{text}' is no number of workers; expected 0 to 256 (0 = as fits)")
    return int(text)


def frequency(text: str) -> float:
    """An ``argparse`` type: the 1H frequency of a magnet in MHz."""
    try:
        value = float(text)
    except ValueError:
        value = 0.0
    if not 10.0 <= value <= 2000.0:
        raise argparse.ArgumentTypeError(f"'{text}' is no 1H frequency in MHz; expected a number such as 400")
    return value
