"""Runs records in a pool of processes: order kept, memory bounded, and no record lost when a worker dies."""

from __future__ import annotations

import multiprocessing
import signal
from collections import deque
from collections.abc import Callable, Iterable, Iterator
from concurrent.futures import Future, ProcessPoolExecutor
from concurrent.futures.process import BrokenProcessPool
from dataclasses import dataclass
from itertools import islice
from multiprocessing import forkserver, resource_tracker
from multiprocessing.context import BaseContext

from verify.engine.faults import Named, worker_died
from verify.engine.interrupts import end_at_once, undisturbed
from verify.engine.settings import RunSettings
from verify.engine.work import Bench, judge_task, make_bench
from verify.errors import ToolFault
from verify.findings.result import RecordResult
from verify.sources.model import Task

Chunk = tuple[Task, ...]
Results = tuple[RecordResult, ...]
CHUNK = 8
AHEAD = 3  # chunks handed out for each worker: enough to keep it busy, few enough to keep memory constant
CPU_FACTOR = 3.0  # a record stuck inside a compiled library is ended at this many times its time limit

Judge = Callable[[Task, Bench], RecordResult]


@dataclass(frozen=True, slots=True)
class Pool:
    """``chunk`` records travel together; ``workers`` processes judge them by ``judge``, which must be picklable."""

    settings: RunSettings
    workers: int
    chunk: int = CHUNK
    judge: Judge = judge_task


_prepared: tuple[Bench, Judge] | None = None  # of a worker process; the parent never sets it


def run_in_processes(tasks: Iterable[Task], pool: Pool) -> Iterator[RecordResult]:
    """Results in the order of the tasks; where a worker dies, what it held is tried again one by one."""
    chunks = _cut(tasks, pool.chunk)
    waiting: deque[tuple[Chunk, Future[Results]]] = deque()
    executor = _start(pool, pool.workers)
    with undisturbed():
        greeting = executor.submit(_greet)
    try:
        while True:
            for chunk in islice(chunks, AHEAD * pool.workers - len(waiting)):
                waiting.append((chunk, _submit(executor, chunk)))
            if not waiting:
                return
            chunk, future = waiting[0]
            try:
                done = future.result()
            except BrokenProcessPool:
                _require_greeting(greeting)
                held = list(waiting)
                waiting.clear()
                executor.shutdown(wait=True)
                for chunk, future in held:
                    yield from _rescued(chunk, future, pool)
                executor = _start(pool, pool.workers)
                continue
            waiting.popleft()
            yield from done
    finally:
        executor.shutdown(wait=True, cancel_futures=True)


def _submit(executor: ProcessPoolExecutor, chunk: Chunk) -> Future[Results]:
    """Hand out a chunk; a pool that broke a moment ago gives a future that says so."""
    try:
        with undisturbed():  # a process that is half started would end with a traceback
            return executor.submit(_judge_chunk, chunk)
    except BrokenProcessPool as error:
        failed: Future[Results] = Future()
        failed.set_exception(error)
        return failed


def _rescued(chunk: Chunk, future: Future[Results], pool: Pool) -> Iterator[RecordResult]:
    """What the pool finished before it broke; the rest one by one, each in a process it cannot share."""
    if future.done() and not future.cancelled() and future.exception() is None:
        yield from future.result()
        return
    executor = _start(pool, 1)
    try:
        for task in chunk:
            try:
                yield from _submit(executor, (task,)).result()
            except BrokenProcessPool:
                executor.shutdown(wait=True)
                executor = _start(pool, 1)
                yield worker_died(Named(task.key or task.file, task.file))
    finally:
        executor.shutdown(wait=True, cancel_futures=True)


def _require_greeting(greeting: Future[bool]) -> None:
    """A pool of which no worker ever came up would lose every record; that is a fault of the tool."""
    if greeting.exception() is not None:
        raise ToolFault("worker processes cannot be started here; run again with --workers 1")


def _start(pool: Pool, workers: int) -> ProcessPoolExecutor:
    return ProcessPoolExecutor(
        workers, mp_context=_context(), initializer=_prepare, initargs=(pool.settings, pool.judge)
    )


def _context() -> BaseContext:
    """Processes forked from a server that loaded the chemistry once; started anew where there is no fork.

    Never forked from this process, whose threads (progress bar, numerical libraries) a fork would cut off.
    """
    if "forkserver" not in multiprocessing.get_all_start_methods():
        return multiprocessing.get_context("spawn")
    context = multiprocessing.get_context("forkserver")
    context.set_forkserver_preload(["verify.engine.work"])
    resource_tracker.ensure_running()  # first, because starting it lifts the mask
    with undisturbed():
        forkserver.ensure_running()  # it and its workers inherit the mask, until they can end silently
    return context


def _cut(tasks: Iterable[Task], size: int) -> Iterator[Chunk]:
    stream = iter(tasks)
    while chunk := tuple(islice(stream, size)):
        yield chunk


def _prepare(settings: RunSettings, judge: Judge) -> None:
    """Runs first in each worker: Ctrl-C ends it at once and silently, and the rulebook is loaded."""
    global _prepared
    end_at_once()
    _prepared = make_bench(settings), judge


def _greet() -> bool:
    return _prepared is not None


def _judge_chunk(chunk: Chunk) -> Results:
    assert _prepared is not None, "the worker was not prepared"
    bench, judge = _prepared
    return tuple(_judge(task, bench, judge) for task in chunk)


def _judge(task: Task, bench: Bench, judge: Judge) -> RecordResult:
    """One record under a limit of processor time as well: the system ends the process where Python cannot."""
    if bench.settings.seconds <= 0 or not hasattr(signal, "ITIMER_PROF"):
        return judge(task, bench)
    signal.setitimer(signal.ITIMER_PROF, CPU_FACTOR * bench.settings.seconds)
    try:
        return judge(task, bench)
    finally:
        signal.setitimer(signal.ITIMER_PROF, 0)
