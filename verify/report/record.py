"""One record in the terminal: verdict, findings at the typed text, and how each signal is explained."""

from __future__ import annotations

from rich.console import Console
from rich.text import Text

from verify.findings.finding import Finding, Level
from verify.findings.location import Span
from verify.findings.result import RecordResult
from verify.record.model import Record
from verify.report.excerpt import excerpt
from verify.report.explained import print_explanation
from verify.report.terminal import print_finding, verdict_text
from verify.report.words import CAUTION, LEVEL_COLOURS, printable

INDENT = 4


def print_record(console: Console, result: RecordResult, record: Record | None) -> None:
    """Everything about one record, gravest findings first; ``record`` lends the texts that are underlined."""
    head = verdict_text(console, result.verdict)
    if result.unassessed_because:
        head.append(f": {printable(result.unassessed_because)}", style="default")
    console.print(head, soft_wrap=True)
    print_explanation(console, result.assignment)
    texts = _texts(record)
    for finding in sorted(result.findings, key=lambda found: list(Level).index(found.level)):
        console.print()
        print_finding(console, finding)
        _print_excerpt(console, finding, texts)
        if finding.deviation is not None:
            console.print(f"    accepted until {finding.deviation.expires_on}: {finding.deviation.reason}")
    console.print()
    console.print(CAUTION, style="dim", soft_wrap=True)


def _texts(record: Record | None) -> dict[str, str]:
    """Typed texts by JSON Pointer; a MOL file is no line to underline."""
    if record is None:
        return {}
    texts = {f"{each.pointer}/report": each.report for each in record.spectra if each.report is not None}
    if record.structure.format != "molblock":
        texts[record.structure.pointer] = record.structure.text
    return texts


def _print_excerpt(console: Console, finding: Finding, texts: dict[str, str]) -> None:
    """The typed text with marks under the characters spoken of; nothing where the whole text is meant."""
    text, span = texts.get(finding.locus.pointer), finding.locus.span
    if text is None or span is None or _is_whole(span, text):
        return
    line, marks = excerpt(text, span, max(console.width - INDENT, 20))
    pad = " " * INDENT
    console.print(Text(f"{pad}{line}"), soft_wrap=True)
    console.print(Text(f"{pad}{marks}", style=LEVEL_COLOURS[finding.level]), soft_wrap=True)


def _is_whole(span: Span, text: str) -> bool:
    return span.start <= 0 and span.end >= len(text.rstrip())
