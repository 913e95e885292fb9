"""How often the check stops a right published list, and how often it lets a planted error through.

    python tests/bench/accuracy.py [--planted] [--show A] [--json FILE] [--seed N] [--workers N]

Reads the data folder (``PEAKWITNESS_DATA`` or ``../shared/data``); says so and ends 0 where it is absent.
"""

from __future__ import annotations

import argparse
import json
import statistics
import sys
import time
from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import asdict, dataclass
from multiprocessing import Pool
from pathlib import Path

sys.path[:0] = [str(Path(__file__).parents[2]), str(Path(__file__).parent)]  # runs from a bare checkout

import planted as planting  # noqa: E402
from published import DATA, Published, available, load  # noqa: E402
from statistics_of_counts import share_with_interval, table  # noqa: E402

import verify  # noqa: E402

VERDICTS = ("contradicted", "queried", "unassessed", "consistent")


@dataclass(frozen=True, slots=True)
class Outcome:
    """Verdict on one record and what led to it; ``seconds`` is wall time of the call."""

    id: str
    verdict: str
    errors: tuple[str, ...]
    warnings: tuple[str, ...]
    because: str
    seconds: float


def judge(published: Published) -> Outcome:
    """One record through the public interface."""
    start = time.perf_counter()
    result = verify.examine(published.record(), policy="registration")
    seconds = time.perf_counter() - start
    said = {
        level: tuple(f"{f.rule}: {f.message}" for f in result.findings if f.stands and f.level == level)
        for level in ("error", "warning")
    }
    verdict = str(result.verdict)
    return Outcome(published.id, verdict, said["error"], said["warning"], result.unassessed_because, seconds)


def judge_all(rows: Sequence[Published], workers: int) -> list[Outcome]:
    """All records, in order."""
    if workers <= 1:
        return [judge(row) for row in rows]
    with Pool(workers) as pool:
        return pool.map(judge, rows, chunksize=8)


def _verdict_row(name: str, pairs: Iterable[tuple[Published, Outcome]]) -> list[str]:
    counts = Counter(outcome.verdict for _, outcome in pairs)
    total = sum(counts.values())
    return [name, str(total), *(share_with_interval(counts[v], total) for v in VERDICTS)]


def verdict_table(rows: Sequence[Published], outcomes: Sequence[Outcome]) -> str:
    """Verdict counts by bounds, half and referee."""
    pairs = list(zip(rows, outcomes, strict=True))
    parts = [
        ("in bounds", [p for p in pairs if p[0].in_bounds]),
        ("  half A", [p for p in pairs if p[0].in_bounds and p[0].half == "A"]),
        ("  half B", [p for p in pairs if p[0].in_bounds and p[0].half == "B"]),
        ("  referee passes", [p for p in pairs if p[0].in_bounds and p[0].referee == "passes"]),
        ("  referee returns", [p for p in pairs if p[0].in_bounds and p[0].referee == "returns"]),
        ("out of bounds", [p for p in pairs if not p[0].in_bounds]),
        ("  referee passes", [p for p in pairs if not p[0].in_bounds and p[0].referee == "passes"]),
        ("  referee returns", [p for p in pairs if not p[0].in_bounds and p[0].referee == "returns"]),
    ]
    return table(["published lists", "n", *VERDICTS], [_verdict_row(*part) for part in parts])


def rule_table(rows: Sequence[Published], outcomes: Sequence[Outcome]) -> str:
    """Records in bounds that each rule speaks about."""
    counts: Counter[tuple[str, str]] = Counter()
    for row, outcome in zip(rows, outcomes, strict=True):
        if row.in_bounds:
            counts.update({(m.split(":")[0], "error") for m in outcome.errors})
            counts.update({(m.split(":")[0], "warning") for m in outcome.warnings})
    ranked = sorted(counts.items(), key=lambda item: (-item[1], item[0]))
    body = [[rule, level, str(n)] for (rule, level), n in ranked]
    return table(["rule (records in bounds)", "level", "n"], body)


def planted_table(rows: Sequence[Published], before: dict[str, Outcome], seed: int, workers: int) -> str:
    """Planted errors on lists in bounds: held = contradicted, or queried where it was consistent before."""
    body = []
    right = [row for row in rows if row.in_bounds]
    for kind in planting.KINDS:
        made = [p.record for row in right if (p := planting.plant(kind, row, rows, seed)) is not None]
        after = judge_all(made, workers)
        clean = [o for o in after if before[o.id].verdict == "consistent"]
        held = [o for o in after if _held(before[o.id], o)]
        contradicted = sum(o.verdict == "contradicted" for o in after)
        clean_held = sum(_held(before[o.id], o) for o in clean)
        figures = ((len(held), len(after)), (contradicted, len(after)), (clean_held, len(clean)))
        body.append([kind, str(len(after)), *(share_with_interval(*figure) for figure in figures)])
    return table(["planted error", "n", "held", "contradicted", "held, if consistent before"], body)


def _held(before: Outcome, after: Outcome) -> bool:
    if after.verdict == "contradicted":
        return True
    return after.verdict == "queried" and before.verdict == "consistent"


def show(rows: Sequence[Published], outcomes: Sequence[Outcome]) -> str:
    """Reasons of each contradiction of half A; half B stays unread."""
    lines = []
    for row, outcome in zip(rows, outcomes, strict=True):
        if row.half == "A" and row.in_bounds and outcome.verdict == "contradicted":
            lines.append(f"{row.id} (referee: {row.referee or 'not read'} {row.cause})")
            lines.extend(f"    {message}" for message in outcome.errors)
    return "\n".join(lines)


def timing(outcomes: Sequence[Outcome]) -> str:
    """Milliseconds per record: median, 90th and 99th percentile, largest."""
    times = sorted(1000 * o.seconds for o in outcomes)
    cut = statistics.quantiles(times, n=100)
    marks = {"median": cut[49], "p90": cut[89], "p99": cut[98], "largest": times[-1]}
    return "ms per record: " + ", ".join(f"{name} {value:.1f}" for name, value in marks.items())


def main(arguments: Sequence[str] | None = None) -> int:
    """Runs the benchmark and prints its tables."""
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("--planted", action="store_true", help="plant errors as well")
    parser.add_argument("--show", choices=["A"], help="print the reasons of each contradiction of half A")
    parser.add_argument("--json", type=Path, metavar="FILE", help="write the outcomes")
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--workers", type=int, default=2)
    options = parser.parse_args(arguments)
    if not available():
        print(f"skipped: no published_lists.jsonl in {DATA.name}/ beside the repository")
        return 0
    rows = load()
    outcomes = judge_all(rows, options.workers)
    print(verdict_table(rows, outcomes), rule_table(rows, outcomes), timing(outcomes), sep="\n\n")
    if options.show:
        print("", show(rows, outcomes), sep="\n")
    if options.planted:
        before = {outcome.id: outcome for outcome in outcomes}
        print("", planted_table(rows, before, options.seed, options.workers), sep="\n")
    if options.json:
        _write(options.json, rows, outcomes)
    return 0


def _write(path: Path, rows: Sequence[Published], outcomes: Sequence[Outcome]) -> None:
    entries = []
    for row, outcome in zip(rows, outcomes, strict=True):
        entry = asdict(outcome) | {"half": row.half, "in_bounds": row.in_bounds, "referee": row.referee}
        if row.half == "B":
            entry |= {"errors": [], "warnings": [], "because": ""}
        entries.append(entry)
    path.write_text(json.dumps(entries, ensure_ascii=False, indent=1) + "\n", encoding="utf-8")


if __name__ == "__main__":
    raise SystemExit(main())
