"""Results of records that the tool itself could not finish: nothing is lost, and the reason is named.

These findings stand outside the rulebook: no policy turns them off and no deviation accepts them.
"""

from __future__ import annotations

import traceback
from dataclasses import dataclass
from pathlib import PurePath

from verify.findings.finding import Finding, Level
from verify.findings.location import Locus, Place
from verify.findings.result import RecordResult, Verdict
from verify.rulebook.deviations import fingerprint

TOOL_FAULT = "tool-fault"
TIME_LIMIT = "time-limit"
EXPLAINED = {
    TOOL_FAULT: "The tool broke on this record; all others were judged as usual.",
    TIME_LIMIT: "Judging this record took longer than one record may take.",
}
_REPORT = "Report this with the record, if you may share it, and have the record checked by hand until then."
_BY_HAND = "Have the record checked by hand, or shorten the list to the signals of this compound."


@dataclass(frozen=True, slots=True)
class Named:
    """A record as far as it is known when something breaks: id or folder name, and file."""

    compound: str
    file: str


def broken(named: Named, error: BaseException) -> RecordResult:
    """Unassessed because an exception stopped the work on it."""
    words = str(error).strip().splitlines()
    said = f": {words[0][:200]}" if words else ""
    message = f"the tool broke on this record: {type(error).__name__} at {where(error)}{said}"
    subject = f"{type(error).__name__} {where(error, lines=False)}"
    return _unassessed(named, TOOL_FAULT, message, _REPORT, subject)


def worker_died(named: Named) -> RecordResult:
    """Unassessed because the process that judged it ended without a word."""
    message = "the tool broke on this record: its process ended (no memory, a crash or an endless step of a library)"
    return _unassessed(named, TOOL_FAULT, message, _REPORT, "process ended")


def out_of_time(named: Named, seconds: float) -> RecordResult:
    """Unassessed because it took longer than allowed."""
    message = f"judging this record took longer than the {seconds:g} s that one record may take"
    return _unassessed(named, TIME_LIMIT, message, _BY_HAND, "time")


def where(error: BaseException, *, lines: bool = True) -> str:
    """Module, line and function of the innermost frame inside this package, else of the innermost frame."""
    frames = traceback.extract_tb(error.__traceback__)
    own = [frame for frame in frames if "verify" in PurePath(frame.filename).parts]
    if not frames:
        return "an unknown place"
    frame = (own or list(frames))[-1]
    parts = PurePath(frame.filename).parts
    start = len(parts) - 1 - parts[::-1].index("verify") if "verify" in parts else len(parts) - 1
    number = f":{frame.lineno}" if lines else ""
    return f"{'/'.join(parts[start:])}{number} ({frame.name})"


def _unassessed(named: Named, rule: str, message: str, remedy: str, subject: str) -> RecordResult:
    finding = Finding(
        rule=rule,
        level=Level.WARNING,  # an error would say that the record is contradicted
        message=message,
        locus=Locus(),
        place=Place(named.file, 1, 1, 1, 1),
        remedy=remedy,
        subject=subject,
        fingerprint=fingerprint(named.compound, rule, "", subject),
    )
    return RecordResult(named.compound, named.file, Verdict.UNASSESSED, (finding,), (), message)
