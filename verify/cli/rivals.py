"""``peakwitness rivals``: isomers that explain the same lists as well or better."""

from __future__ import annotations

from collections.abc import Sequence

from rich.table import Table
from rich.text import Text

from verify.cli.parsing import CommandParser
from verify.cli.structures import add_lists, add_structure, record_of
from verify.cli.terminal import Terminal
from verify.errors import UsageError
from verify.pipeline.one_record import build_case
from verify.pipeline.rival_test import rival_fits
from verify.record.stage import record_from_mapping
from verify.structure.isomers import MOVES

UNDECIDED = 3.0  # nats


def options() -> CommandParser:
    """Options of the command."""
    found = CommandParser("rivals", "Hold near isomers of a structure against the same lists.")
    add_structure(found)
    add_lists(found)
    found.add_argument("--families", default=",".join(MOVES), metavar="LIST", help=f"of {', '.join(MOVES)}")
    found.add_argument("--most", type=int, default=20, metavar="N", help="isomers tried in each family")
    return found


def run(arguments: Sequence[str]) -> int:
    """Run the command; 0 always but for a call that cannot be carried out."""
    given = options().parse_args(list(arguments))
    families = tuple(name.strip() for name in given.families.split(","))
    unknown = [name for name in families if name not in MOVES]
    if unknown:
        raise UsageError(f"--families: there is no '{unknown[0]}'; known are {', '.join(MOVES)}")
    case = build_case(record_from_mapping(record_of(given)))
    if case.structure is None:
        raise UsageError(f"the structure cannot be read: {case.problems[0].message}")
    fits = rival_fits(case, families, given.most)
    console = Terminal()
    if not fits:
        console.print("No isomer of these families could be held against the lists.")
        return 0
    table = Table(box=None, pad_edge=False, header_style="bold")
    for name in ("isomer", "made by", "against the structure", ""):
        table.add_column(name, overflow="fold")
    for fit in fits:
        word = "better" if fit.gain > UNDECIDED else "not told apart" if fit.gain > -UNDECIDED else "excluded"
        table.add_row(fit.smiles, fit.words, f"{fit.gain:+.1f} nats", word)
    console.print(table)
    console.print(Text("The lists do not decide between structures that are not told apart.", style="dim"))
    return 0
