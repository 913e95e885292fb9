"""A registry folder: each compound gives exactly one reading, in a fixed order, whatever is wrong with it."""

from __future__ import annotations

import os
import pickle
from collections.abc import Iterator
from pathlib import Path

import pytest

from verify.errors import ConfigurationError, UsageError
from verify.findings.location import Place
from verify.record.model import RecordReading
from verify.sources.folder import FolderSource, read_task
from verify.sources.model import Source, Task

EXAMPLE = Path(__file__).parents[2] / "registry_example"
RECORD = 'compound: {id}\nstructure: {{smiles: "CCO"}}\nspectra: [{{nucleus: 1H, report: "1.2 (t, 3H)"}}]\n'


def _compound(registry: Path, name: str, text: str | None = None) -> Path:
    folder = registry / "compounds" / name
    folder.mkdir(parents=True)
    (folder / "record.yaml").write_text(RECORD.format(id=name) if text is None else text, encoding="utf-8")
    return folder


@pytest.fixture
def registry(tmp_path: Path) -> Path:
    """A registry of two good records."""
    root = tmp_path / "registry"
    for name in ("ARO-0002", "ARO-0001"):
        _compound(root, name)
    (root / "registry.yaml").write_text('id_pattern: "ARO-[0-9]{4}"\n', encoding="utf-8")
    return root


def _readings(registry: Path) -> dict[str, RecordReading]:
    return {task.key: read_task(task) for task in FolderSource(registry).tasks()}


def _codes(reading: RecordReading) -> list[str]:
    return [problem.code for problem in reading.problems]


def _place(reading: RecordReading) -> Place:
    place = reading.places.place(reading.problems[0].locus)
    assert place is not None
    return place


@pytest.mark.parametrize(("path", "least"), [(EXAMPLE, 30), (EXAMPLE / "incoming", 14)])
def test_example_registries_are_read_whole(path: Path, least: int) -> None:
    readings = _readings(path)
    assert set(readings) == {file.parent.name for file in path.glob("compounds/*/record.yaml")}
    assert len(readings) >= least
    assert all(reading.record is not None and reading.compound == key for key, reading in readings.items())
    told = {key: _codes(reading) for key, reading in readings.items() if reading.problems}
    assert told == ({} if path == EXAMPLE else {"INC-18": ["record-unknown-key"]})


def test_unknown_key_of_the_example_is_told_where_it_stands() -> None:
    reading = _readings(EXAMPLE / "incoming")["INC-18"]
    line = (
        (EXAMPLE / "incoming/compounds/INC-18/record.yaml")
        .read_text(encoding="utf-8")
        .splitlines()[_place(reading).line - 1]
    )
    assert line[_place(reading).column - 1 :].startswith("solvant")
    assert _place(reading).length == len("solvant")


def test_tasks_are_sorted_named_and_small(registry: Path) -> None:
    source: Source = FolderSource(registry)
    tasks = source.tasks()
    assert isinstance(tasks, Iterator)
    first, second = tasks
    assert (first.key, second.key) == ("ARO-0001", "ARO-0002")
    assert first.file == (registry / "compounds/ARO-0001/record.yaml").as_posix()
    assert len(pickle.dumps(first)) < 1000
    assert pickle.loads(pickle.dumps(first)) == first


def test_files_are_named_as_the_registry_was_given(registry: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(registry.parent)
    (first, _) = FolderSource("registry").tasks()
    assert first.file == "registry/compounds/ARO-0001/record.yaml"
    assert read_task(first).file == first.file
    monkeypatch.chdir(registry)
    assert next(FolderSource(".").tasks()).file == "compounds/ARO-0001/record.yaml"


def test_folder_without_a_record_is_told_and_not_lost(registry: Path) -> None:
    (registry / "compounds" / "ARO-0003").mkdir()
    named_otherwise = registry / "compounds" / "ARO-0004"
    named_otherwise.mkdir()
    (named_otherwise / "Record.yml").write_text(RECORD.format(id="ARO-0004"), encoding="utf-8")
    readings = _readings(registry)
    for key in ("ARO-0003", "ARO-0004"):
        assert _codes(readings[key]) == ["record-missing"]
        assert readings[key].problems[0].blocks == "record"
        assert (readings[key].compound, readings[key].record) == (key, None)
        assert _place(readings[key]).file.endswith(f"{key}/record.yaml")
    assert '"Record.yml"' in readings["ARO-0004"].problems[0].message


def test_record_outside_a_folder_is_told_and_not_lost(registry: Path) -> None:
    (registry / "compounds" / "ARO-0005.yaml").write_text(RECORD.format(id="ARO-0005"), encoding="utf-8")
    (registry / "compounds" / "README.md").write_text("words", encoding="utf-8")
    (registry / "compounds" / ".cache").mkdir()
    readings = _readings(registry)
    assert sorted(readings) == ["ARO-0001", "ARO-0002", "ARO-0005"]
    assert _codes(readings["ARO-0005"]) == ["record-misplaced"]
    assert "compounds/ARO-0005/record.yaml" in readings["ARO-0005"].problems[0].expected


@pytest.mark.skipif(os.name != "posix", reason="file names are bytes only there")
def test_folder_whose_name_is_no_text_is_read_and_can_be_shown(registry: Path) -> None:
    os.mkdir(os.fsencode(registry / "compounds") + b"/ARO-\xff\n1")
    readings = _readings(registry)
    assert _codes(readings["ARO-\ufffd\ufffd1"]) == ["record-missing"]
    assert readings["ARO-\ufffd\ufffd1"].file.encode("utf-8")


def test_ids_are_held_against_folder_and_pattern(registry: Path) -> None:
    _compound(registry, "ARO-0006", RECORD.format(id="ARO-0001"))
    _compound(registry, "misc")
    readings = _readings(registry)
    assert _codes(readings["ARO-0006"]) == ["compound-id-mismatch"]
    assert readings["ARO-0006"].compound == "ARO-0001"
    assert _codes(readings["misc"]) == ["compound-id-pattern"]
    assert (_place(readings["misc"]).line, _place(readings["misc"]).column) == (1, 11)


@pytest.mark.skipif(not hasattr(os, "symlink"), reason="the system has no symbolic links")
def test_links_that_leave_the_registry_are_not_followed(registry: Path) -> None:
    outside = registry.parent / "outside"
    _compound(outside, "ARO-0007")
    (registry / "compounds" / "ARO-0007").symlink_to(outside / "compounds" / "ARO-0007")
    (registry / "compounds" / "ARO-0008").mkdir()
    record = registry / "compounds" / "ARO-0008" / "record.yaml"
    record.symlink_to(outside / "compounds" / "ARO-0007" / "record.yaml")
    (registry / "compounds" / "ARO-0009").symlink_to(registry.parent / "nowhere")
    readings = _readings(registry)
    for key in ("ARO-0007", "ARO-0008", "ARO-0009"):
        assert _codes(readings[key]) == ["record-path-outside"]
        assert readings[key].record is None


def test_record_that_vanishes_after_it_was_listed_is_told(registry: Path) -> None:
    first, _ = FolderSource(registry).tasks()
    (registry / "compounds/ARO-0001/record.yaml").unlink()
    assert _codes(read_task(first)) == ["record-missing"]
    (registry / "compounds/ARO-0001").rmdir()
    assert _codes(read_task(first)) == ["record-missing"]


@pytest.mark.skipif(not hasattr(os, "geteuid") or os.geteuid() == 0, reason="needs a user whom modes bind")
def test_record_that_may_not_be_opened_is_told(registry: Path) -> None:
    (registry / "compounds/ARO-0001/record.yaml").chmod(0)
    assert _codes(_readings(registry)["ARO-0001"]) == ["record-not-a-file"]


@pytest.mark.parametrize(
    ("given", "words"),
    [
        ("none", "there is no"),
        ("registry/registry.yaml", "is a file"),
        ("registry/compounds/ARO-0001", "holds no registry.yaml"),
        ("bare", "holds no compounds"),
        ("hollow", "holds no compounds"),
    ],
)
def test_path_that_is_no_registry(registry: Path, given: str, words: str) -> None:
    for name in ("bare", "hollow"):
        (registry.parent / name).mkdir()
        (registry.parent / name / "registry.yaml").write_text("name: x\n", encoding="utf-8")
    (registry.parent / "hollow" / "compounds").mkdir()
    (registry.parent / "hollow" / "compounds" / ".gitkeep").touch()
    with pytest.raises(UsageError) as caught:
        FolderSource(registry.parent / given)
    assert words in str(caught.value)
    assert "compounds/<id>/record.yaml" in str(caught.value)


def test_wrong_settings_stop_before_any_record(registry: Path) -> None:
    (registry / "registry.yaml").write_text("polizy: x\n", encoding="utf-8")
    with pytest.raises(ConfigurationError, match=r"registry.yaml:1:1: .*policy"):
        FolderSource(registry)


def test_task_is_all_that_a_worker_needs(registry: Path) -> None:
    path = str(registry / "compounds/ARO-0001/record.yaml")
    reading = read_task(Task("folder", "ARO-0001", "shown.yaml", path, str(registry)))
    assert reading.problems == ()
    assert reading.file == "shown.yaml"
