"""A run from a registry folder to its result: serial or in processes, the same result."""

from __future__ import annotations

import os
from collections.abc import Callable, Iterable, Iterator
from datetime import UTC, date, datetime

from verify.engine.processes import CHUNK, Pool, run_in_processes
from verify.engine.serial import run_serially
from verify.engine.settings import NO_OVERRIDES, Overrides, settings_for
from verify.engine.work import Bench, make_bench
from verify.findings.result import RecordResult
from verify.findings.run import RunResult
from verify.pipeline.whole_registry import Watch
from verify.sources.folder import FolderSource
from verify.sources.model import Task
from verify.version import VERSION

FEW = 100  # fewer records than this are done before a pool of processes has come up
Tell = Callable[[int, int], None]
Keep = Callable[[RecordResult], RecordResult]


def gate_folder(
    path: str,
    overrides: Overrides = NO_OVERRIDES,
    *,
    workers: int = 0,
    today: str = "",
    seconds: float = 0.0,
    tell: Tell | None = None,
    keep: Keep | None = None,
) -> RunResult:
    """Judge every record of a registry folder.

    ``workers`` 0 chooses by the number of records and processors. ``tell(done, total)`` is called after each
    record. ``keep`` sees each record in order and gives back what the result shall hold of it.
    Raises UsageError where ``path`` is no registry, ConfigurationError where its settings fail.
    """
    source = FolderSource(path)
    bench = make_bench(settings_for(source.registry, today or date.today().isoformat(), overrides, seconds))
    total = sum(1 for _ in source.tasks())
    watch = Watch(bench.rulebook, bench.settings.deviations, bench.settings.today)
    results = watch.see(run_tasks(source.tasks(), bench, chosen_workers(workers, total), total))
    kept = results if keep is None else map(keep, results)
    records = tuple(_told(kept, total, tell))
    return RunResult(
        source=os.fsencode(path).decode("utf-8", "replace"),
        registry=source.registry.name,
        policy=bench.rulebook.policy.name,
        rulebook=bench.rulebook.digest,
        version=VERSION,
        holds=bench.rulebook.policy.holds,
        records=records,
        notices=watch.close(),
        made_at=datetime.now(UTC).isoformat(timespec="seconds"),
    )


def run_tasks(tasks: Iterable[Task], bench: Bench, workers: int, total: int) -> Iterator[RecordResult]:
    """Results in the order of the tasks; ``total`` only decides how many travel together."""
    if workers <= 1:
        return run_serially(tasks, bench)
    chunk = max(1, min(CHUNK, total // (4 * workers)))
    return run_in_processes(tasks, Pool(bench.settings, workers, chunk))


def chosen_workers(asked: int, total: int) -> int:
    """Processes to use: as asked, else one for each processor this process may use, or this process alone."""
    if asked > 0:
        return min(asked, max(total, 1))
    return 1 if total < FEW else processors()


def processors() -> int:
    """Processors this process may use."""
    if hasattr(os, "sched_getaffinity"):
        return len(os.sched_getaffinity(0))
    return os.cpu_count() or 1


def _told(results: Iterator[RecordResult], total: int, tell: Tell | None) -> Iterator[RecordResult]:
    for done, result in enumerate(results, 1):
        if tell is not None:
            tell(done, total)
        yield result
