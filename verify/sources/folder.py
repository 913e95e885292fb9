"""A registry as a folder: ``registry.yaml`` and ``compounds/<id>/record.yaml``, with MOL files beside it."""

from __future__ import annotations

import os
from collections.abc import Iterator
from pathlib import Path

from verify.errors import UsageError
from verify.record.decoding import Fault
from verify.record.model import RecordReading
from verify.record.molfile import MolfileFolder
from verify.record.registry import REGISTRY_FILE, RegistrySettings, load_registry
from verify.record.source import read_file, refused
from verify.record.stage import Surroundings, read_loaded
from verify.sources.model import Task

COMPOUNDS = "compounds"
RECORD_FILE = "record.yaml"
_YAML_ENDINGS = (".yaml", ".yml", ".json")
_LAYOUT = f"a registry is a folder with {REGISTRY_FILE} and {COMPOUNDS}/<id>/{RECORD_FILE}"


class FolderSource:
    """The records of a registry folder, one task for each folder in ``compounds/``, sorted by its name."""

    def __init__(self, path: str | os.PathLike[str]) -> None:
        """Raises UsageError where ``path`` is no registry, ConfigurationError where its settings fail."""
        self.path = os.fspath(path)
        _require_registry(self.path)
        self.registry: RegistrySettings = load_registry(self.path)

    def tasks(self) -> Iterator[Task]:
        """A task for each compound; folders without a record and records outside a folder come too."""
        compounds = os.path.join(self.path, COMPOUNDS)
        with os.scandir(compounds) as entries:
            found = sorted(
                (e.name, e.is_dir() or e.is_symlink()) for e in entries if not e.name.startswith(".")
            )
        for name, is_folder in found:
            place = os.path.join(compounds, name)
            if is_folder:
                yield self._task(name, os.path.join(place, RECORD_FILE), "")
            elif name.lower().endswith(_YAML_ENDINGS):
                yield self._task(os.path.splitext(name)[0], place, "misplaced")

    def _task(self, key: str, path: str, wrong: str) -> Task:
        return Task(
            "folder",
            _printable(key),
            _printable(Path(path).as_posix()),
            path,
            self.path,
            self.registry.reading,
            wrong,
        )


def read_task(task: Task) -> RecordReading:
    """Read the record of one task; whatever is wrong with it is told in the reading, which is never lost."""
    folder = os.path.dirname(task.path)
    fault = _unfit(task, folder)
    source = refused(fault, task.file) if fault else read_file(task.path, task.file)
    if not fault and source.problems and source.problems[0].code == "record-missing":
        source = refused(_missing(folder), task.file)
    return read_loaded(source, Surroundings(task.settings, task.key, MolfileFolder(folder, task.root)))


def _unfit(task: Task, folder: str) -> Fault | None:
    """Why the file of a task must not be read at all."""
    if task.wrong == "misplaced":
        wanted = f"{COMPOUNDS}/{task.key}/{RECORD_FILE}"
        message = f"a record stands in a folder of its own; move this file to {wanted}"
        return Fault("record-misplaced", message, expected=wanted)
    if os.path.islink(folder) and not _inside(folder, task.root):
        message = "this folder is a link that leads out of the registry; it is not read"
        return Fault("record-path-outside", message, expected="a folder in the registry")
    return None


def _printable(name: str) -> str:
    """A file name that can be shown: bytes that are no text, and control characters, become U+FFFD."""
    text = name.encode("utf-8", "surrogateescape").decode("utf-8", "replace")
    return "".join(c if c.isprintable() or c == " " else "\ufffd" for c in text)


def _inside(path: str, root: str) -> bool:
    return Path(os.path.realpath(path)).is_relative_to(os.path.realpath(root))


def _missing(folder: str) -> Fault:
    """A compound's folder without its record; names a file that may be meant."""
    try:
        others = sorted(name for name in os.listdir(folder) if name.lower().endswith(_YAML_ENDINGS))
    except OSError:
        others = []
    advice = f'; rename "{others[0]}" to {RECORD_FILE}?' if others else ""
    return Fault("record-missing", f"the folder holds no {RECORD_FILE}{advice}", expected=RECORD_FILE)


def _require_registry(path: str) -> None:
    if not os.path.exists(path):
        raise UsageError(f'there is no "{path}"; give the folder of a registry ({_LAYOUT})')
    if not os.path.isdir(path):
        raise UsageError(f'"{path}" is a file; give the folder of a registry ({_LAYOUT})')
    if not os.path.lexists(os.path.join(path, REGISTRY_FILE)):
        raise UsageError(f'"{path}" holds no {REGISTRY_FILE}; {_LAYOUT}. An empty one will do: "name: ..."')
    compounds = os.path.join(path, COMPOUNDS)
    if not os.path.isdir(compounds) or not any(not n.startswith(".") for n in os.listdir(compounds)):
        raise UsageError(f'"{path}" holds no compounds; {_LAYOUT}')
