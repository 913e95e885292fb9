"""``peakwitness foresee``: what the spectrum of a structure must show, before it is measured."""

from __future__ import annotations

import json
import sys
from collections.abc import Sequence

from rich.console import Console
from rich.table import Table

from verify.api import foresee, structure_text
from verify.cli.files import require_writable, write_output
from verify.cli.parsing import CommandParser, frequency
from verify.cli.structures import add_structure, structure_of
from verify.expectations.model import Expectation

NUCLEI = ("1H", "13C", "19F", "31P")


def options() -> CommandParser:
    """Options of the command."""
    found = CommandParser("foresee", "Show what the spectrum of a structure should show.")
    add_structure(found)
    found.add_argument("--nucleus", choices=NUCLEI, default="1H")
    found.add_argument("--solvent", metavar="NAME", default="CDCl3")
    found.add_argument("--mhz", metavar="N", type=frequency, default=400.0, help="1H frequency of the magnet in MHz")
    found.add_argument("--json", metavar="FILE", help="write the expectations as JSON (- for standard output)")
    found.add_argument("--trail", action="store_true", help="show base and increments of every window")
    return found


def run(arguments: Sequence[str]) -> int:
    """Run the command; returns the exit status."""
    given = options().parse_args(list(arguments))
    require_writable(given.json)
    structure = next(iter(structure_of(given).values()))
    expected = foresee(structure_text(structure).text, given.nucleus, given.solvent, given.mhz)
    if given.json:
        write_output(given.json, json.dumps([expectation_data(e) for e in expected], ensure_ascii=False, indent=1) + "\n")
    if given.json != "-":
        _print(Console(file=sys.stdout, highlight=False), expected, given.trail)
    return 0


def expectation_data(expectation: Expectation) -> dict[str, object]:
    """Plain data of one expectation: ppm, Hz, nats."""
    environment, window = expectation.environment, expectation.window
    return {
        "words": expectation.words, "nuclei": environment.count, "atoms": [a + 1 for a in environment.carriers],
        "kind": environment.kind, "reason": environment.reason, "may_double": environment.may_double,
        "window": {"low": window.low, "high": window.high, "centre": window.centre, "scale": window.scale, "judged": window.judged},
        "trail": [{"label": i.label, "value": i.value, "source": i.source} for i in window.trail],
        "splittings": [
            {"letters": s.letters, "couplings_hz": [list(w) for w in s.j_windows], "penalty": s.penalty} for s in expectation.splittings
        ],
        "second_order": expectation.second_order,
    }  # fmt: skip


def _print(console: Console, expected: Sequence[Expectation], trail: bool) -> None:
    table = Table(box=None, pad_edge=False, header_style="bold")
    table.add_column("group", no_wrap=True)
    table.add_column("nuclei", justify="right")
    table.add_column("ppm", no_wrap=True)
    table.add_column("letters")
    table.add_column("J / Hz")
    table.add_column("atoms")
    table.add_column("why")
    for expectation in expected:
        environment, window = expectation.environment, expectation.window
        letters = [s for s in expectation.splittings if s.letters != "m"][:3]
        js = ", ".join(f"{low:.0f}-{high:.0f}" for low, high in letters[0].j_windows) if letters else ""
        ppm = f"{window.centre:.2f} ± {2 * window.scale:.2f}" if window.judged else "not estimated"
        why = "; ".join(filter(None, (environment.reason, environment.may_double, environment.may_vanish, expectation.second_order)))
        atoms = ", ".join(str(a + 1) for a in environment.carriers)
        table.add_row(expectation.words, f"{environment.count:g}", ppm, " or ".join(s.letters for s in letters), js, atoms, why)
        if trail:
            for step in window.trail:
                table.add_row(f"  {step.label}", "", f"{step.value:+.2f}", "", "", "", step.source)
    console.print(table)
