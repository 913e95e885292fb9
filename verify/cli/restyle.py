"""``peakwitness restyle``: the same list in the order of a journal, or a refusal where a value would change."""

from __future__ import annotations

import sys
from collections.abc import Sequence

from verify.cli.files import read_text, require_writable, write_output
from verify.cli.parsing import CommandParser
from verify.cli.structures import LISTS
from verify.errors import UsageError
from verify.peaklist.stage import read_peak_list
from verify.peaklist.styles import STYLES, differences, render

LONGEST = 200_000


def options() -> CommandParser:
    """Options of the command."""
    found = CommandParser("restyle", "Write a peak list in the order of a journal; values stay as they are.")
    found.add_argument("text", metavar="TEXT", help="the list, a file that holds it, or - for standard input")
    found.add_argument("--style", choices=tuple(STYLES), default="acs", help="default: acs")
    found.add_argument("--nucleus", choices=tuple(LISTS.values()), help="default: what the head of the list says")
    found.add_argument("--ascending", action="store_true", help="lowest shift first")
    found.add_argument("--output", metavar="FILE", default="-", help="where to write it (default: standard output)")
    return found


def run(arguments: Sequence[str]) -> int:
    """Run the command; 1 where the list could not be rewritten without changing or losing something."""
    given = options().parse_args(list(arguments))
    require_writable(given.output)
    text = _text(given.text)
    before = read_peak_list(text, given.nucleus)
    for problem in before.problems:
        place = f"column {problem.locus.span.start + 1}: " if problem.locus.span else ""
        print(f"peakwitness: {place}{problem.message}", file=sys.stderr)
    if not before.signals:
        raise UsageError("no signal could be read; give a list such as 7.26 (s, 1H), 2.31 (s, 3H)")
    written = render(before, given.style, given.ascending)
    changed = differences(before, read_peak_list(written, before.nucleus))
    if changed or before.problems:
        why = f"{changed} signals would change" if changed else "part of the list could not be read"
        print(f"peakwitness: not rewritten: {why}", file=sys.stderr)
        return 1
    write_output(given.output, [written, "\n"])
    return 0


def _text(given: str) -> str:
    if given == "-":
        return sys.stdin.read(LONGEST)
    looks_like_a_file = len(given) < 200 and "(" not in given and "." in given and " " not in given.strip()
    return read_text(given) if looks_like_a_file else given
