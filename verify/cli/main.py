"""The command ``peakwitness``: calls one command and turns what goes wrong into words and an exit status."""

from __future__ import annotations

import os
import sys
import traceback
from collections.abc import Sequence
from difflib import get_close_matches
from importlib import import_module

from verify.cli.parsing import CommandParser
from verify.engine.interrupts import undisturbed
from verify.errors import PeakwitnessError, UsageError
from verify.version import VERSION

# Each is a module of this folder, imported when its command is called, so that --help answers at once.
COMMANDS = {
    "gate": "judge every record of a registry folder",
    "examine": "judge one structure with its peak lists",
    "foresee": "show what the spectrum of a structure should show",
    "rivals": "show which isomers the same lists fit as well",
    "drill": "plant errors in a registry's own records and count those held",
    "restyle": "write a peak list in the order of a journal",
    "rulebook": "list the rules, explain one, or check a pack of rules",
}
DESCRIPTION = "Checks whether a structure could have given the NMR peak lists reported for it."
STATUSES = "exit status: 0 clear, 1 held, 2 wrong call, configuration or input, 3 fault inside the tool"
REPORT_IT = "Please report it with the command and, if you may share it, the input; --traceback shows where it broke."
TRACEBACK = "--traceback"
INTERRUPTED = 130  # what a shell gives a command that Ctrl-C ended


def main(arguments: Sequence[str] | None = None) -> int:
    """Run the command line; returns the exit status and raises nothing."""
    given = list(sys.argv[1:] if arguments is None else arguments)
    shows_trace = TRACEBACK in given
    try:
        status = _run([argument for argument in given if argument != TRACEBACK])
        sys.stdout.flush()
        return status
    except PeakwitnessError as error:
        print(f"peakwitness: {error}", file=sys.stderr)
        return error.exit_status
    except KeyboardInterrupt:
        print("peakwitness: stopped; no report was written", file=sys.stderr)
        return INTERRUPTED
    except BrokenPipeError:  # whoever read the output went away, and the command had no verdict to tell
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return 0
    except Exception as error:
        if shows_trace:
            traceback.print_exc()
        said = " ".join(str(error).split())[:300]
        print(f"peakwitness: fault inside the tool: {type(error).__name__}: {said}", file=sys.stderr)
        print(REPORT_IT, file=sys.stderr)
        return PeakwitnessError.exit_status


def top_parser() -> CommandParser:
    """The command line without the options of its commands."""
    found = CommandParser("", DESCRIPTION, STATUSES)
    found.add_argument("--version", action="version", version=f"peakwitness {VERSION}")
    found.add_argument(TRACEBACK, action="store_true", help="show where a fault inside the tool broke")
    commands = found.add_subparsers(metavar="COMMAND", title="commands", parser_class=_Listed)
    for name, words in COMMANDS.items():
        commands.add_parser(name, help=words)
    return found


class _Listed(CommandParser):
    """A command as a line of ``--help`` only; its module brings the parser that reads its options."""

    def __init__(self, **named: object) -> None:
        super().__init__(str(named["prog"]), "")


def _run(given: list[str]) -> int:
    if not given:
        top_parser().print_help()
        return UsageError.exit_status
    name = given[0]
    if name in COMMANDS:
        with undisturbed():  # libraries half loaded fail in ways that look like faults of the tool
            command = import_module(f"verify.cli.{name}")
        return int(command.run(given[1:]))
    if not name.startswith("-"):
        close = get_close_matches(name, COMMANDS, n=1, cutoff=0.5)
        hint = f"; did you mean {close[0]}?" if close else ""
        known = ", ".join(COMMANDS)
        raise UsageError(f'there is no command "{name}"{hint} (expected {known})\nTry: peakwitness --help')
    top_parser().parse_args(given)
    raise UsageError(f"no command is given; expected one of {', '.join(COMMANDS)}\nTry: peakwitness --help")


if __name__ == "__main__":
    raise SystemExit(main())
