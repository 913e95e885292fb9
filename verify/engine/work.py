"""The work on one record: read it, judge it, and lose it never."""

from __future__ import annotations

import hashlib
from collections.abc import Callable
from dataclasses import dataclass, replace

from verify.engine.faults import Named, broken, out_of_time
from verify.engine.settings import RunSettings
from verify.engine.time_limit import OutOfTimeError, time_limit
from verify.findings.result import RecordResult
from verify.pipeline.one_record import examine_record
from verify.record.model import RecordReading
from verify.rulebook.model import Rulebook
from verify.rulebook.source import load_rulebook
from verify.sources.folder import read_task
from verify.sources.model import Task


@dataclass(frozen=True, slots=True)
class Bench:
    """Everything a worker loads once and uses for every record."""

    settings: RunSettings
    rulebook: Rulebook


def make_bench(settings: RunSettings) -> Bench:
    """Load the rulebook of the settings; raises ConfigurationError that names file and key."""
    rulebook = load_rulebook(settings.policy, settings.packs, settings.folder or None)
    if settings.required is None or settings.required == rulebook.policy.required:
        return Bench(settings, rulebook)
    policy = replace(rulebook.policy, required=settings.required)
    digest = hashlib.sha256(f"{rulebook.digest} required {settings.required}".encode()).hexdigest()
    return Bench(settings, replace(rulebook, policy=policy, digest=digest))


def judge_task(task: Task, bench: Bench) -> RecordResult:
    """Result of one task; whatever happens on the way becomes a result too."""
    return _guarded(Named(task.key or task.file, task.file), lambda: read_task(task), bench)


def judge_reading(reading: RecordReading, bench: Bench) -> RecordResult:
    """Result of a record that was read already, guarded in the same way."""
    return _guarded(Named(reading.compound, reading.file), lambda: reading, bench)


def _guarded(named: Named, read: Callable[[], RecordReading], bench: Bench) -> RecordResult:
    """The record runner: one of the three places where every exception is caught."""
    settings = bench.settings
    try:
        with time_limit(settings.seconds):
            reading = read()
            named = Named(reading.compound, reading.file)
            return examine_record(reading, bench.rulebook, settings.deviations, settings.today)
    except OutOfTimeError:
        return out_of_time(named, settings.seconds)
    except Exception as error:
        return broken(named, error)
