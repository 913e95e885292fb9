"""The drill: same seed, same errors; what is planted is really there; a blind gate is shown to be blind."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from verify.engine.drill import run_drill, specimen_of
from verify.engine.settings import RunSettings
from verify.engine.shares import share_with_interval, wilson
from verify.engine.work import Bench, make_bench
from verify.pipeline.planting import KINDS, plant
from verify.record.model import RecordReading
from verify.sources.folder import FolderSource, read_task

EXAMPLE = Path(__file__).parents[2] / "registry_example"


@pytest.fixture(scope="module")
def readings() -> list[RecordReading]:
    return [read_task(task) for task in FolderSource(EXAMPLE).tasks()][:14]


@pytest.fixture(scope="module")
def bench() -> Bench:
    return make_bench(RunSettings(today="2026-12-01"))


def test_the_same_seed_gives_the_same_counts(readings: list[RecordReading], bench: Bench) -> None:
    kinds = ("signal added", "coupling mistyped")
    first = run_drill(readings, bench, kinds, seed=3)
    assert first == run_drill(readings, bench, kinds, seed=3)
    assert first.used > 10
    assert all(0 < kind.held <= kind.planted for kind in first.kinds)


def test_a_gate_without_rules_sees_nothing(readings: list[RecordReading], bench: Bench) -> None:
    blind = replace(bench, rulebook=replace(bench.rulebook, rules=()))
    caught = run_drill(readings, blind, ("signal added",)).kinds[0]
    assert caught.planted > 0
    assert caught.held == 0
    assert len(caught.missed) == caught.planted


@pytest.mark.parametrize("kind", KINDS)
def test_every_kind_changes_one_thing(kind: str, readings: list[RecordReading]) -> None:
    specimens = [s for r in readings if r.record is not None and (s := specimen_of(r.record)) is not None]
    made = [(s, m) for s in specimens if (m := plant(kind, s, specimens, 1)) is not None]
    assert made
    for before, after in made:
        changed = [after.smiles != before.smiles, *(after.texts[n] != before.texts[n] for n in before.texts)]
        assert changed.count(True) == 1


def test_interval_of_a_share() -> None:
    # source: Wilson 1927; the interval of 0 of 10 ends at z2/(n + z2)
    assert wilson(0, 10)[1] == pytest.approx(3.8415 / 13.8415, abs=1e-3)
    assert share_with_interval(0, 0) == "-"
