"""What a source of records is: it names the tasks; a worker reads each of them on its own."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Protocol

from verify.record.settings import NO_SETTINGS, ReadingSettings


@dataclass(frozen=True, slots=True)
class Task:
    """One record to be read; small and picklable, so that it crosses to a worker instead of the record.

    ``key`` names the record within its source, before it is read (a folder's name); ``file`` is the file as
    reports show it; ``path`` is the file to open; nothing outside ``root`` is opened for it. ``wrong`` says
    why the file is not to be opened: "" (it is) or "misplaced".
    """

    source: str
    key: str
    file: str
    path: str
    root: str
    settings: ReadingSettings = NO_SETTINGS
    wrong: str = ""


class Source(Protocol):
    """A place where records come from."""

    def tasks(self) -> Iterator[Task]:
        """One task for each record, in a fixed order; each record of the source is named exactly once."""
