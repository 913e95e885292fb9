"""How a list was explained, signal by signal, as a table in the terminal."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from rich.console import Console
from rich.table import Table
from rich.text import Text

from verify.findings.finding import Level
from verify.report.words import LEVEL_COLOURS, counted, printable


def print_explanation(console: Console, assignment: Sequence[Mapping[str, Any]]) -> None:
    """One table for each spectrum that was judged; atoms count from 1 in the order of the structure."""
    for spectrum in assignment:
        if not spectrum["signals"]:
            continue
        console.print()
        console.print(Text(f"{spectrum['nucleus']}: {_sum(spectrum)}", style="bold"))
        console.print(_table(spectrum))
        for missing in spectrum["missing"]:
            if not missing["optional"]:
                words = f"no signal for {missing['nuclei']:g} of {missing['window']}"
                console.print(Text(words, style=LEVEL_COLOURS[Level.ERROR]), soft_wrap=True)


def _sum(spectrum: Mapping[str, Any]) -> str:
    low, high = spectrum["allowed_low"], spectrum["allowed_high"]
    allowed = f"{low:g}" if low == high else f"{low:g} to {high:g}"
    if spectrum["nucleus"] == "1H":
        return f"{spectrum['reported']:g} H listed, {allowed} allowed"
    lines = counted(round(spectrum["reported"]), "line")
    return f"{lines} listed, {allowed} {'environment' if allowed == '1' else 'environments'}"


def _table(spectrum: Mapping[str, Any]) -> Table:
    table = Table(box=None, pad_edge=False, header_style="bold")
    for name in ("as typed", "explained by", "atoms", "expected / ppm"):
        table.add_column(name, overflow="fold")
    table.add_column("nats", justify="right")
    for signal in spectrum["signals"]:
        table.add_row(*_row(signal))
    return table


def _row(signal: Mapping[str, Any]) -> tuple[str | Text, ...]:
    """Typed text, what explains it, atoms, windows (centre and two scales) and cost of one signal."""
    shares = signal["environments"]
    typed = printable(signal["text"])
    if not shares:
        words = signal["solvent_line"] or signal["impurity"]
        return typed, Text(words or "nothing", style="" if words else LEVEL_COLOURS[Level.ERROR]), "", "", ""
    atoms = sorted({atom + 1 for share in shares for atom in share["atoms"]})
    words = " + ".join(dict.fromkeys(share["words"] for share in shares))
    windows = ", ".join(dict.fromkeys(f"{s['centre']:.2f} ± {2 * s['scale']:.2f}" for s in shares))
    cost = sum(share["shift_nats"] + share["splitting_nats"] for share in shares)
    return typed, words, ", ".join(map(str, atoms)), windows, f"{cost:.1f}"
