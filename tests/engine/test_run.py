"""A whole run: the same report from one process and from two, settings and overrides, the number of workers."""

from __future__ import annotations

import pickle
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import pytest

from verify.engine.run import FEW, chosen_workers, gate_folder
from verify.engine.settings import Overrides, RunSettings, settings_for, whole_policy
from verify.errors import ConfigurationError, UsageError
from verify.record.registry import load_registry
from verify.report.json_report import write_json

EXAMPLE = Path(__file__).parents[2] / "registry_example"
TODAY = "2026-12-01"


@pytest.mark.parametrize("folder", ["", "incoming"])
def test_serial_and_pool_write_the_same_bytes(folder: str) -> None:
    path = str(EXAMPLE / folder)
    one, two = (gate_folder(path, workers=workers, today=TODAY) for workers in (1, 2))
    assert write_json(replace(one, made_at="")) == write_json(replace(two, made_at=""))


def test_every_record_is_told_once(make_registry: Callable[[int], Path]) -> None:
    told: list[tuple[int, int]] = []
    run = gate_folder(str(make_registry(5)), today=TODAY, tell=lambda done, total: told.append((done, total)))
    assert told == [(n, 5) for n in range(1, 6)]
    assert [record.compound for record in run.records] == [f"C-{n:03d}" for n in range(5)]
    assert (run.registry, run.policy, run.is_clear) == ("small", "registration", False)


def test_results_and_settings_survive_pickling(make_registry: Callable[[int], Path]) -> None:
    run = gate_folder(str(make_registry(3)), today=TODAY)
    assert pickle.loads(pickle.dumps(run)) == run
    settings = RunSettings(TODAY, packs=("/packs",))
    assert pickle.loads(pickle.dumps(settings)) == settings


@pytest.mark.parametrize("error", [UsageError("a"), ConfigurationError("b\nc")])
def test_errors_survive_pickling(error: Exception) -> None:
    again = pickle.loads(pickle.dumps(error))
    assert (type(again), str(again)) == (type(error), str(error))


def test_what_the_caller_says_overrides_the_registry(make_registry: Callable[[int], Path]) -> None:
    root = make_registry(1)
    (root / "registry.yaml").write_text("name: small\npolicy: manuscript\nrequired_spectra: [13C]\n", encoding="utf-8")
    registry = load_registry(str(root))
    assert settings_for(registry, TODAY).policy == "manuscript"
    assert settings_for(registry, TODAY).required == ("13C",)
    assert settings_for(registry, TODAY, Overrides("bench")).policy == "bench"
    packs = settings_for(registry, TODAY, Overrides(packs=("a/b",))).packs
    assert packs == (str(Path.cwd() / "a" / "b"),)


def test_a_policy_file_becomes_a_whole_path_and_a_name_stays() -> None:
    assert whole_policy("bench") == "bench"
    assert whole_policy("own.yaml") == str(Path.cwd() / "own.yaml")


def test_configuration_is_refused_before_any_record(make_registry: Callable[[int], Path], tmp_path: Path) -> None:
    path = str(make_registry(1))
    with pytest.raises(ConfigurationError, match="registration"):
        gate_folder(path, Overrides("registratoin"))
    with pytest.raises(ConfigurationError, match="deviations"):
        gate_folder(path, Overrides(deviations=str(tmp_path / "no-deviations.yaml")))
    with pytest.raises(UsageError):
        gate_folder(str(tmp_path / "nowhere"))


def test_few_records_need_no_pool() -> None:
    assert chosen_workers(0, FEW - 1) == 1
    assert chosen_workers(3, 2) == 2
    assert chosen_workers(3, 0) == 1
    assert chosen_workers(0, FEW) >= 1
