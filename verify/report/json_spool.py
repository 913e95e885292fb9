"""The JSON report of a run too large to hold: records are laid aside as they come, the head is written last."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from tempfile import SpooledTemporaryFile
from textwrap import indent
from types import TracebackType

from verify.findings.result import RecordResult
from verify.findings.run import RunResult
from verify.report.json_report import json_text, write_json

IN_MEMORY = 8_000_000  # characters kept before they go to a temporary file
PIECE = 1_000_000
_NO_RECORDS = '"records": []\n}\n'


class JsonSpool:
    """Takes every record once; ``parts`` then gives the same text as ``write_json`` of the whole run."""

    def __init__(self) -> None:
        self._file = SpooledTemporaryFile(IN_MEMORY, "w+", encoding="utf-8", newline="\n")  # noqa: SIM115
        self.count = 0

    def __enter__(self) -> JsonSpool:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        """Forget what was laid aside."""
        self._file.close()

    def add(self, record: RecordResult) -> None:
        """Lay a record aside, in the order of the report."""
        text = indent(json_text(record.as_dict()).rstrip("\n"), "    ")
        self._file.write(f",\n{text}" if self.count else text)
        self.count += 1

    def parts(self, run: RunResult) -> Iterator[str]:
        """The report piece by piece; ``run`` must hold the records that were laid aside, be it without assignments."""
        head = write_json(run, with_records=False)
        if not self.count:
            yield head
            return
        yield head.removesuffix(_NO_RECORDS) + '"records": [\n'
        self._file.seek(0)
        while piece := self._file.read(PIECE):
            yield piece
        yield "\n  ]\n}\n"


def without_assignment(record: RecordResult) -> RecordResult:
    """What tables and summaries need of a record; its assignment is most of its size."""
    return replace(record, assignment=())
