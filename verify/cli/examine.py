"""``peakwitness examine``: judge one structure with its lists, from options or from a record file."""

from __future__ import annotations

import argparse
import os
from collections.abc import Sequence
from datetime import date

from verify.cli.files import STANDARD_OUTPUT, require_writable, write_output
from verify.cli.parsing import CommandParser
from verify.cli.structures import add_lists, add_structure, lists_given, record_of
from verify.cli.terminal import Terminal, listened_to
from verify.engine.settings import Overrides, RunSettings, settings_for, whole_paths, whole_policy
from verify.engine.work import judge_reading, make_bench
from verify.errors import UsageError
from verify.findings.result import Verdict
from verify.record.model import RecordReading
from verify.record.registry import REGISTRY_FILE, load_registry
from verify.record.stage import record_from_mapping
from verify.report.exit_status import status_of_record
from verify.report.json_report import json_text
from verify.report.record import print_record
from verify.sources.folder import COMPOUNDS, read_task
from verify.sources.model import Task

POLICY = "bench"


def options() -> CommandParser:
    """Options of the command."""
    found = CommandParser(
        "examine", "Judge one structure with its peak lists, given as options or as a record."
    )
    found.add_argument(
        "record", metavar="RECORD", nargs="?", help="a record.yaml, instead of the options below"
    )
    add_structure(found)
    add_lists(found)
    found.add_argument(
        "--policy", metavar="NAME", default="", help=f"default: {POLICY}, or that of the record's registry"
    )
    found.add_argument(
        "--rules", metavar="PACK", action="append", default=[], help="a folder of further rules"
    )
    found.add_argument("--json", metavar="FILE", help="write the result as JSON (- for standard output)")
    return found


def run(arguments: Sequence[str]) -> int:
    """Run the command; 1 where the policy holds the record or it could not be judged."""
    given = options().parse_args(list(arguments))
    require_writable(given.json)
    reading, settings = _from_file(given) if given.record else _from_options(given)
    bench = make_bench(settings)
    result = judge_reading(reading, bench)
    with listened_to():
        if given.json:
            write_output(given.json, [json_text(result.as_dict())])
        if given.json != STANDARD_OUTPUT:
            print_record(Terminal(), result, reading.record)
    return status_of_record(result, (*bench.rulebook.policy.holds, Verdict.UNASSESSED))


def _from_options(given: argparse.Namespace) -> tuple[RecordReading, RunSettings]:
    policy, packs = whole_policy(given.policy or POLICY), whole_paths(tuple(given.rules))
    return record_from_mapping(record_of(given)), RunSettings(date.today().isoformat(), policy, packs)


def _from_file(given: argparse.Namespace) -> tuple[RecordReading, RunSettings]:
    """The record as its registry would read it, where it stands in one; else on its own."""
    unused = lists_given(given)
    if unused:
        raise UsageError(f"{given.record} holds structure and lists; leave out {', '.join(unused)}")
    if not os.path.isfile(given.record):
        raise UsageError(f'there is no file "{given.record}"; expected a record.yaml')
    folder = os.path.dirname(os.path.abspath(given.record))
    root = os.path.dirname(os.path.dirname(folder))
    today, overrides = date.today().isoformat(), Overrides(given.policy, tuple(given.rules))
    if os.path.basename(os.path.dirname(folder)) != COMPOUNDS or not os.path.isfile(
        f"{root}/{REGISTRY_FILE}"
    ):
        task = Task("file", "", given.record, given.record, folder)
        policy = whole_policy(given.policy or POLICY)
        return read_task(task), RunSettings(today, policy, whole_paths(overrides.packs))
    registry = load_registry(root)
    task = Task("folder", os.path.basename(folder), given.record, given.record, root, registry.reading)
    return read_task(task), settings_for(registry, today, overrides)
