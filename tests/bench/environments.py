"""Environments against open 13C lists: does a list show more shifts than the structure has environments?

    python tests/bench/environments.py [--most N] [--workers N] [--show N]

A list with more distinct shifts than environments (permitted doubling counted) means that groups were joined that are
different, or that the list is wrong; fewer mean coincidence, as a rule. Reads carbon_lists.jsonl.gz of the data folder.
"""

from __future__ import annotations

import argparse
import gzip
import json
import statistics
import sys
import time
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from multiprocessing import Pool
from pathlib import Path

sys.path[:0] = [str(Path(__file__).parents[2]), str(Path(__file__).parent)]  # runs from a bare checkout

from published import DATA  # noqa: E402
from rdkit import Chem  # noqa: E402
from statistics_of_counts import share_with_interval  # noqa: E402

from verify.environments.stage import find_environments  # noqa: E402
from verify.record.model import StructureText  # noqa: E402
from verify.structure.stage import read_structure  # noqa: E402

FILE = "carbon_lists.jsonl.gz"


@dataclass(frozen=True, slots=True)
class Compared:
    """One list beside its structure. ``outcome``: "more", "equal", "fewer" or "not read"; ``by_kind``: attached-H
    classes in which the list shows more shifts. ``floor`` and ``seconds``: toolkit alone, and our work."""

    key: str
    smiles: str
    outcome: str
    by_kind: bool
    heavy: int
    floor: float
    seconds: float


def compare(line: str) -> Compared:
    """Count distinct shifts and environments, in all and by number of attached hydrogens."""
    row = json.loads(line)
    start = time.perf_counter()
    floor_mol = Chem.AddHs(Chem.MolFromSmiles(row["smiles"]))
    list(Chem.CanonicalRankAtoms(floor_mol, breakTies=False))
    middle = time.perf_counter()
    structure = read_structure(StructureText("smiles", row["smiles"], ""), ()).structure
    if structure is None:
        return Compared(row["inchikey"], row["smiles"], "not read", False, 0, middle - start, 0.0)
    carbons = find_environments(structure).of("13C")
    end = time.perf_counter()
    allowed: Counter[int] = Counter()
    plain = 0
    for environment in carbons:
        allowed[environment.attached_h] += 2 if environment.may_double else 1
        plain += 1
    shown: Counter[int] = Counter()
    for attached, _ in {(s["attached_h"], s["shift"]) for s in row["signals"]}:
        shown[attached] += 1
    over = {kind: n - allowed[kind] for kind, n in shown.items() if n > allowed[kind]}
    total = sum(shown.values())
    outcome = "more" if total > sum(allowed.values()) else "equal" if total == plain else "fewer"
    if outcome == "fewer" and total > plain:
        outcome = "equal"  # doubled, as permitted
    return Compared(row["inchikey"], row["smiles"], outcome, bool(over), structure.heavy, middle - start, end - middle)


def main(arguments: Sequence[str] | None = None) -> int:
    """Runs the benchmark and prints its figures."""
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("--most", type=int, default=0, metavar="N", help="only the first N lists")
    parser.add_argument("--workers", type=int, default=2)
    parser.add_argument("--show", type=int, default=0, metavar="N", help="print N structures whose lists show more")
    options = parser.parse_args(arguments)
    path = DATA / FILE
    if not path.is_file():
        print(f"skipped: no {FILE} in {DATA.name}/ beside the repository")
        return 0
    with gzip.open(path, "rt", encoding="utf-8") as file:
        lines = [line for line in file if line.strip()]
    lines = lines[: options.most] if options.most else lines
    with Pool(options.workers) as pool:
        found = pool.map(compare, lines, chunksize=64)
    total = len(found)
    for outcome in ("more", "equal", "fewer", "not read"):
        print(f"{outcome:9s} {share_with_interval(sum(c.outcome == outcome for c in found), total)}")
    print(f"more in one class of attached H: {share_with_interval(sum(c.by_kind for c in found), total)}")
    ratios = sorted(c.seconds / c.floor for c in found if c.seconds)
    times = sorted(1000 * c.seconds for c in found)
    print(f"structure and environments: median {statistics.median(times):.2f} ms, largest {times[-1]:.0f} ms")
    print(f"times the toolkit floor (parse, add H, rank): median {statistics.median(ratios):.1f}")
    for compared in [c for c in found if c.by_kind][: options.show]:
        print(f"    {compared.key}  {compared.outcome}  {compared.smiles}")
    return 0


if __name__ == "__main__":
    raise SystemExit(main())
