"""``peakwitness foresee``: what the spectrum of a structure should show, before it is measured."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from rich.table import Table

from verify.api import foresee, structure_text
from verify.cli.files import STANDARD_OUTPUT, require_writable, write_output
from verify.cli.parsing import CommandParser, frequency
from verify.cli.structures import LISTS, add_structure, structure_of
from verify.cli.terminal import Terminal
from verify.expectations.model import Expectation, Splitting
from verify.report.json_report import json_text

MOST_LETTERS = 3
MOST_ATOMS = 6


def options() -> CommandParser:
    """Options of the command."""
    found = CommandParser("foresee", "Show what the spectrum of a structure should show.")
    add_structure(found)
    found.add_argument("--nucleus", choices=tuple(LISTS.values()), default="1H", help="default: 1H")
    found.add_argument("--solvent", metavar="NAME", default="CDCl3", help="default: CDCl3")
    found.add_argument("--mhz", metavar="N", type=frequency, default=400.0, help="1H frequency in MHz, default: 400")
    found.add_argument("--json", metavar="FILE", help="write the expectations as JSON (- for standard output)")
    found.add_argument("--svg", metavar="FILE", help="draw it as SVG (- for standard output)")
    found.add_argument("--trail", action="store_true", help="show base and increments of every window")
    return found


def run(arguments: Sequence[str]) -> int:
    """Run the command; returns the exit status."""
    given = options().parse_args(list(arguments))
    require_writable(given.json)
    require_writable(given.svg)
    structure = structure_text(next(iter(structure_of(given).values()))).text
    expected = foresee(structure, given.nucleus, given.solvent, given.mhz)
    if given.json:
        write_output(given.json, [json_text([entry_of(expectation) for expectation in expected])])
    if given.svg:
        from verify.cli.pictures import foreseen_svg

        write_output(given.svg, [foreseen_svg(structure, given.nucleus, given.solvent, given.mhz)])
    if STANDARD_OUTPUT not in (given.json, given.svg):
        _print(Terminal(), expected, given.trail)
    return 0


def entry_of(expectation: Expectation) -> dict[str, Any]:
    """Plain data of one expectation: ppm, Hz, nats; atoms count from 0 in the order of the structure."""
    environment, window = expectation.environment, expectation.window
    return {
        "words": expectation.words,
        "nuclei": environment.count,
        "atoms": list(environment.carriers),
        "kind": environment.kind,
        "reason": environment.reason,
        "may_double": environment.may_double,
        "may_vanish": environment.may_vanish,
        "second_order": expectation.second_order,
        "window": {
            "judged": window.judged,
            "low": window.low,
            "high": window.high,
            "centre": window.centre,
            "scale": window.scale,
            "trail": [{"label": step.label, "value": step.value, "source": step.source} for step in window.trail],
        },
        "splittings": [_splitting(splitting) for splitting in expectation.splittings],
    }


def _splitting(splitting: Splitting) -> dict[str, Any]:
    windows = [list(window) for window in splitting.j_windows]
    return {"letters": splitting.letters, "couplings_hz": windows, "penalty_nats": splitting.penalty}


def _print(terminal: Terminal, expected: Sequence[Expectation], trail: bool) -> None:
    """A row a group; below the table what may make it look otherwise."""
    table = Table(box=None, pad_edge=False, header_style="bold")
    for name in ("group", "nuclei", "ppm", "letters", "J / Hz", "atoms"):
        table.add_column(name, justify="right" if name == "nuclei" else "left", overflow="fold")
    for expectation in expected:
        table.add_row(*_row(expectation))
        for step in expectation.window.trail if trail else ():
            table.add_row(f"  {step.label}", "", f"{step.value:+.2f}", "", "", "", style="dim")
    terminal.print(table)
    remarks = [remark for expectation in expected for remark in _remarks(expectation)]
    steps = [step for expectation in expected for step in expectation.window.trail if trail]
    remarks += [f"source: {step.source}" for step in steps]
    if remarks:
        terminal.print()
    for remark in dict.fromkeys(remarks):
        terminal.print(remark, soft_wrap=True)


def _row(expectation: Expectation) -> tuple[str, ...]:
    environment, window = expectation.environment, expectation.window
    ppm = f"{window.centre:.2f} ± {2 * window.scale:.2f}" if window.judged else "not estimated"
    shown = [splitting for splitting in expectation.splittings if splitting.lines][:MOST_LETTERS]
    letters = " or ".join(splitting.letters for splitting in shown)
    couplings = ", ".join(f"{low:.0f} to {high:.0f}" for low, high in shown[0].j_windows) if shown else ""
    atoms = ", ".join(str(atom + 1) for atom in environment.carriers[:MOST_ATOMS])
    more = " …" if len(environment.carriers) > MOST_ATOMS else ""
    return expectation.words, f"{environment.count:g}", ppm, letters, couplings, atoms + more


def _remarks(expectation: Expectation) -> list[str]:
    environment = expectation.environment
    pairs = (
        ("may show two sets", environment.may_double),
        ("may not show", environment.may_vanish),
        ("letters may not follow first order", expectation.second_order),
    )
    return [f"{expectation.words} {words}: {why}" for words, why in pairs if why]
