"""``peakwitness drill``: plant errors in a registry's own records and show how many the gate would hold."""

from __future__ import annotations

import argparse
import sys
from collections.abc import Sequence
from dataclasses import asdict
from datetime import date

from rich.table import Table
from rich.text import Text

from verify.cli.files import STANDARD_OUTPUT, require_writable, write_output
from verify.cli.parsing import CommandParser
from verify.cli.terminal import Terminal
from verify.engine.drill import Drill, run_drill
from verify.engine.settings import Overrides, settings_for
from verify.engine.shares import share_with_interval
from verify.engine.work import make_bench
from verify.errors import UsageError
from verify.pipeline.planting import KINDS
from verify.report.json_report import json_text
from verify.sources.folder import FolderSource, read_task

SECONDS = 20.0


def options() -> CommandParser:
    """Options of the command."""
    found = CommandParser("drill", "Plant errors in a registry's own consistent records and count those held.")
    found.add_argument("path", metavar="REGISTRY", help="folder with registry.yaml and compounds/<id>/record.yaml")
    found.add_argument("--policy", metavar="NAME", default="", help="registration, manuscript, bench, or a file")
    found.add_argument("--kind", metavar="KIND", action="append", default=[], help="one kind of error (default: all)")
    found.add_argument("--seed", metavar="N", type=int, default=1, help="the same number plants the same errors")
    found.add_argument("--json", metavar="FILE", help="write the counts as JSON (- for standard output)")
    return found


def run(arguments: Sequence[str]) -> int:
    """Run the command; 0 unless the call is wrong."""
    given = options().parse_args(list(arguments))
    require_writable(given.json)
    drill = _drilled(given)
    if given.json:
        write_output(given.json, [json_text({"seed": given.seed, **asdict(drill)})])
    if given.json != STANDARD_OUTPUT:
        _print(Terminal(), drill)
    return 0


def _drilled(given: argparse.Namespace) -> Drill:
    unknown = [kind for kind in given.kind if kind not in KINDS]
    if unknown:
        raise UsageError(f"--kind: there is no '{unknown[0]}'; expected one of {', '.join(KINDS)}")
    source = FolderSource(given.path)
    overrides = Overrides(policy=given.policy)
    bench = make_bench(settings_for(source.registry, date.today().isoformat(), overrides, SECONDS))
    readings = (read_task(task) for task in source.tasks())
    try:
        return run_drill(readings, bench, tuple(given.kind) or tuple(KINDS), given.seed, _tell)
    finally:
        _tell("", 0, 0)


def _tell(kind: str, number: int, total: int) -> None:
    """The kind at work, on a terminal only."""
    if sys.stderr.isatty():
        sys.stderr.write(f"\r{f'{number + 1} of {total}: {kind}' if total else ''}\x1b[K")
        sys.stderr.flush()


def _print(terminal: Terminal, drill: Drill) -> None:
    table = Table(box=None, pad_edge=False, header_style="bold")
    table.add_column("planted error", no_wrap=True)
    for name in ("n", "held", "contradicted"):
        table.add_column(name, justify="right", no_wrap=True)
    for kind in drill.kinds:
        held, contradicted = (share_with_interval(n, kind.planted) for n in (kind.held, kind.contradicted))
        table.add_row(kind.kind, str(kind.planted), held, contradicted)
    terminal.print(Text(f"{drill.used} of {drill.records} records are consistent and carry the errors."))
    terminal.print(table)
    terminal.print(Text("Held: contradicted, queried or unassessed. In brackets: 95 % intervals.", style="dim"))
    terminal.print(Text("--json names the records in which an error was not seen.", style="dim"))
