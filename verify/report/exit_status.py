"""From a result to the exit status of the command: 0 clear, 1 held, 3 fault inside the tool."""

from __future__ import annotations

from verify.findings.result import RecordResult
from verify.findings.run import RunResult

CLEAR = 0
HELD = 1
MISUSED = 2  # usage, configuration or input that cannot be read; raised as an exception, never found here
BROKEN = 3
TOOL_FAULT = "tool-fault"


def status_of_run(run: RunResult) -> int:
    """A fault inside the tool outranks what it found, for then the gate has not been kept."""
    if any(finding.rule == TOOL_FAULT for finding in run.findings()):
        return BROKEN
    return CLEAR if run.is_clear else HELD


def status_of_record(result: RecordResult, holds: tuple[str, ...]) -> int:
    """The same for one record under a policy that holds these verdicts."""
    if any(finding.rule == TOOL_FAULT for finding in result.findings):
        return BROKEN
    return HELD if result.verdict in holds else CLEAR
