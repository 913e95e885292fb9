"""A report laid aside record by record is the report written at once, and holds little of it in memory."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from verify.engine.run import gate_folder
from verify.report import json_spool
from verify.report.json_report import write_json
from verify.report.json_spool import JsonSpool, without_assignment

INCOMING = Path(__file__).parents[2] / "registry_example" / "incoming"
Make = Callable[..., Any]


@pytest.mark.parametrize("in_memory", [json_spool.IN_MEMORY, 10])
def test_both_ways_write_the_same_text(in_memory: int, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(json_spool, "IN_MEMORY", in_memory)
    monkeypatch.setattr(json_spool, "PIECE", 1000)
    run = gate_folder(str(INCOMING), today="2026-12-01")
    with JsonSpool() as spool:
        for record in run.records:
            spool.add(record)
        assert "".join(spool.parts(run)) == write_json(run)


def test_a_run_without_records_is_a_report_too(make_run: Make) -> None:
    run = make_run()
    with JsonSpool() as spool:
        assert "".join(spool.parts(run)) == write_json(run)


def test_counts_do_not_need_the_assignments(make_finding: Make, make_record: Make, make_run: Make) -> None:
    record = make_record("C-1", make_finding())
    with JsonSpool() as spool:
        spool.add(record)
        assert "".join(spool.parts(make_run(without_assignment(record)))) == write_json(make_run(record))
