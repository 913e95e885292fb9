"""Milliseconds per record on the example registry, against what RDKit alone needs for the same structures.

    python tests/bench/speed.py [REGISTRY] [--rounds N] [--workers 1 2]

The floor is the least that any check of a structure has to do: parse, add hydrogens, rank the atoms. It is
measured in the same run, so that the ratio holds on a busy or a slow machine.
"""

from __future__ import annotations

import argparse
import statistics
import subprocess
import sys
import time
from collections.abc import Callable, Sequence
from itertools import chain, repeat
from pathlib import Path

ROOT = Path(__file__).parents[2]
sys.path[:0] = [str(ROOT), str(Path(__file__).parent)]  # runs from a bare checkout

from rdkit import Chem  # noqa: E402
from statistics_of_counts import table  # noqa: E402

from verify.engine.run import run_tasks  # noqa: E402
from verify.engine.settings import settings_for  # noqa: E402
from verify.engine.work import Bench, judge_task, make_bench  # noqa: E402
from verify.sources.folder import FolderSource, read_task  # noqa: E402
from verify.sources.model import Task  # noqa: E402
from verify.structure.stage import read_structure  # noqa: E402

STARTS = 5


def floor_ms(smiles: Sequence[str], rounds: int) -> float:
    """Milliseconds RDKit needs per structure: parse, explicit hydrogens, canonical ranks."""

    def once() -> None:
        for text in smiles:
            Chem.CanonicalRankAtoms(Chem.AddHs(Chem.MolFromSmiles(text)), breakTies=False)

    return _median_ms(once, len(smiles), rounds)


def record_ms(tasks: Sequence[Task], bench: Bench, rounds: int) -> tuple[float, float, list[float]]:
    """Per record in this process: the first pass after the tables are loaded, the median pass, each record's best."""
    judge_task(tasks[0], bench)
    passes, best = [], [float("inf")] * len(tasks)
    for _ in range(rounds + 1):
        start = time.perf_counter()
        for number, task in enumerate(tasks):
            began = time.perf_counter()
            judge_task(task, bench)
            best[number] = min(best[number], 1000 * (time.perf_counter() - began))
        passes.append(1000 * (time.perf_counter() - start) / len(tasks))
    return passes[0], statistics.median(passes[1:]), best


def pool_ms(tasks: Sequence[Task], bench: Bench, workers: int, rounds: int) -> tuple[float, float]:
    """Per record through the pool once it runs, and the seconds until its first result."""
    many = chain.from_iterable(repeat(tasks, rounds))
    start = time.perf_counter()
    results = run_tasks(many, bench, workers, rounds * len(tasks))
    next(results)
    first = time.perf_counter()
    count = sum(1 for _ in results)
    return 1000 * (time.perf_counter() - first) / count, first - start


def startup_ms(*arguments: str) -> float:
    """Milliseconds of a whole command, median of several starts."""
    command = [sys.executable, "-m", "verify", *arguments]

    def once() -> None:
        subprocess.run(command, cwd=ROOT, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL, check=False)

    return _median_ms(once, 1, STARTS)


def structures_of(tasks: Sequence[Task]) -> list[str]:
    """SMILES of every record whose structure can be read."""
    found = []
    for task in tasks:
        record = read_task(task).record
        read = read_structure(record.structure).structure if record else None
        if read is not None:
            found.append(read.smiles)
    return found


def _median_ms(once: Callable[[], None], items: int, rounds: int) -> float:
    times = []
    for _ in range(rounds):
        start = time.perf_counter()
        once()
        times.append(1000 * (time.perf_counter() - start) / items)
    return statistics.median(times)


def main(arguments: Sequence[str] | None = None) -> int:
    """Measure and print."""
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("registry", nargs="?", default=str(ROOT / "registry_example"))
    parser.add_argument("--rounds", type=int, default=4, help="passes over the registry")
    parser.add_argument("--workers", type=int, nargs="+", default=[1, 2], help="sizes of pool to measure")
    given = parser.parse_args(arguments)
    source = FolderSource(given.registry)
    bench = make_bench(settings_for(source.registry, "2026-12-01"))
    tasks = list(source.tasks())
    smiles = structures_of(tasks)
    floor = floor_ms(smiles, 10 * given.rounds)
    first, steady, best = record_ms(tasks, bench, given.rounds)
    rows = [["RDKit floor", f"{floor:.3f}", "1"]]
    rows.append(["in this process, first pass", f"{first:.1f}", f"{first / floor:.0f}"])
    rows.append(["in this process, later passes", f"{steady:.1f}", f"{steady / floor:.0f}"])
    alone = 0.0
    for workers in given.workers:
        each, wait = pool_ms(tasks, bench, max(workers, 1), 2 * given.rounds)
        alone = alone or each
        name = f"{workers} worker{'s' if workers != 1 else ''}, first result after {wait:.1f} s"
        rows.append([name, f"{each:.1f}", f"{each / floor:.0f}"])
        rows.append(["  throughput against the first size", f"x {alone / each:.2f}", ""])
    print(table([f"{len(tasks)} records of {Path(given.registry).name}", "ms per record", "times the floor"], rows))
    marks = statistics.quantiles(best, n=10)
    slow = max(range(len(tasks)), key=best.__getitem__)
    print(f"\nrecords, best of all passes: median {marks[4]:.1f} ms, 90th percentile {marks[8]:.1f} ms, "
          f"largest {best[slow]:.1f} ms ({tasks[slow].key})")  # fmt: skip
    print(f"start-up: --help {startup_ms('--help'):.0f} ms, rulebook {startup_ms('rulebook'):.0f} ms")
    return 0


if __name__ == "__main__":  # worker processes import this module again
    raise SystemExit(main())
