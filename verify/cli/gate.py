"""``peakwitness gate``: judge a registry; ends 1 where a record is held."""

from __future__ import annotations

import argparse
from collections.abc import Sequence
from datetime import date

from rich.console import Console

from verify.cli.files import STANDARD_OUTPUT, require_writable, write_output
from verify.cli.parsing import CommandParser, number_of_workers
from verify.cli.progress import Bar
from verify.cli.terminal import Terminal, listened_to
from verify.engine.run import gate_folder
from verify.engine.settings import Overrides, settings_for
from verify.engine.work import make_bench
from verify.findings.result import RecordResult
from verify.findings.run import RunResult
from verify.record.registry import load_registry
from verify.report.exit_status import status_of_run
from verify.report.json_report import json_text
from verify.report.json_spool import JsonSpool, without_assignment
from verify.report.junit import write_junit
from verify.report.markdown import write_markdown
from verify.report.sarif import sarif_of
from verify.report.terminal import print_run
from verify.rulebook.model import Rule

SECONDS = 20.0  # what one record may take; the usual is some milliseconds


def options() -> CommandParser:
    """Options of the command."""
    found = CommandParser("gate", "Judge every record of a registry folder; ends 1 where a record is held.")
    found.add_argument("path", metavar="REGISTRY", help="folder with registry.yaml and compounds/<id>/record.yaml")
    found.add_argument("--policy", metavar="NAME", default="", help="registration, manuscript, bench, or a file")
    found.add_argument("--rules", metavar="PACK", action="append", default=[], help="a folder of further rules")
    found.add_argument("--deviations", metavar="FILE", default="", help="accepted deviations")
    found.add_argument("--json", metavar="FILE", help="write the report as JSON (- for standard output)")
    found.add_argument("--markdown", metavar="FILE", help="write a summary in Markdown (- for standard output)")
    found.add_argument("--sarif", metavar="FILE", help="write the findings as SARIF 2.1.0 (- for standard output)")
    found.add_argument("--junit", metavar="FILE", help="write JUnit XML, one case a record (- for standard output)")
    found.add_argument("--workers", metavar="N", type=number_of_workers, default=0, help="processes (default: as fits)")
    found.add_argument("--notes", action="store_true", help="show notes as well as errors and warnings")
    found.add_argument("--quiet", action="store_true", help="print nothing but the reports asked for")
    return found


def run(arguments: Sequence[str]) -> int:
    """Run the command; returns the exit status."""
    given = options().parse_args(list(arguments))
    require_writable(given.json, given.markdown, given.sarif, given.junit)
    with JsonSpool() as spool:
        result = _judged(given, spool)
        with listened_to():
            if given.json:
                write_output(given.json, spool.parts(result))
            if given.markdown:
                write_output(given.markdown, [write_markdown(result)])
            if given.sarif:
                write_output(given.sarif, [json_text(sarif_of(result, _rules(given)))])
            if given.junit:
                write_output(given.junit, [write_junit(result)])
            if not given.quiet and STANDARD_OUTPUT not in (given.json, given.markdown, given.sarif, given.junit):
                print_run(Terminal(), result, notes=given.notes)
    return status_of_run(result)


def _rules(given: argparse.Namespace) -> tuple[Rule, ...]:
    """The rules that judged, for their texts in SARIF."""
    overrides = Overrides(given.policy, tuple(given.rules), given.deviations)
    settings = settings_for(load_registry(given.path), date.today().isoformat(), overrides)
    return make_bench(settings).rulebook.rules


def _judged(given: argparse.Namespace, spool: JsonSpool) -> RunResult:
    """The run without its assignments, which only the JSON report shows; they go to the spool as they come."""

    def keep(record: RecordResult) -> RecordResult:
        if given.json:
            spool.add(record)
        return without_assignment(record)

    overrides = Overrides(given.policy, tuple(given.rules), given.deviations)
    with Bar(Console(stderr=True, quiet=given.quiet)) as bar:
        return gate_folder(given.path, overrides, workers=given.workers, seconds=SECONDS, tell=bar.tell, keep=keep)
