"""Fits the shift increments and window widths to the open shift lists and writes ``rules/tables/shift_increments_*``.

Run from the repository root: ``python tests/bench/fit_shifts.py [1H|13C ...]``. One list in five (by a hash of the
InChIKey's first block) is never used for fitting; coverage on it is printed by ``tests/bench/shift_windows.py``.
"""

from __future__ import annotations

import gzip
import hashlib
import json
import os
import sys
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import numpy as np
from rdkit import Chem, RDLogger

from verify.expectations.fit_shifts import Design, Group, Vector, build_design, fit, match
from verify.expectations.shift_estimate import depth_key
from verify.expectations.surroundings import Surroundings, survey, terms

ROOT = Path(__file__).resolve().parents[2]
DATA = Path(os.environ.get("PEAKWITNESS_DATA", ROOT.parent / "shared" / "data"))
FILES = {"1H": "proton_shifts.jsonl.gz", "13C": "carbon_lists.jsonl.gz"}
LEAST = {"1H": 3, "13C": 10}
PENALTY = {"1H": 4.0, "13C": 4.0}
HUBER = {"1H": 0.5, "13C": 6.0}
BASE = {"1H": 3.0, "13C": 70.0}
FOLDS = 5
ROUNDS = 6
SOURCE = "nmrshiftdb2 (open data; Kuhn and Schloerer, Magn. Reson. Chem. 2015, 53, 582), fitted 2026-12-01"


@dataclass(frozen=True)
class Shifts:
    """One list: ``found``, and per matching class the atoms, how many shifts each takes, and the shifts."""

    part: int
    found: Surroundings
    groups: tuple[tuple[tuple[int, ...], tuple[int, ...], tuple[float, ...]], ...]


def part_of(inchikey: str) -> int:
    """Part of the data, 0 to 4; part 0 is held out."""
    return int(hashlib.sha256(inchikey[:14].encode()).hexdigest(), 16) % FOLDS


def read_lists(nucleus: str) -> Iterator[Shifts]:
    """Usable lists: readable structure, and as many shifts as nuclei."""
    RDLogger.DisableLog("rdApp.*")
    with gzip.open(DATA / FILES[nucleus], "rt", encoding="utf-8") as lines:
        for line in lines:
            record = json.loads(line)
            mol = Chem.MolFromSmiles(record["smiles"])
            if mol is None or any(a.GetAtomicNum() == 1 for a in mol.GetAtoms()):
                continue
            found = survey(mol)
            groups = carbon_groups(found, record) if nucleus == "13C" else proton_groups(found, record)
            if groups:
                yield Shifts(part_of(record["inchikey"]), found, groups)


def carbon_groups(found: Surroundings, record: dict[str, object]) -> tuple:  # type: ignore[type-arg]
    """One matching class for each number of attached hydrogens."""
    atoms: dict[int, list[int]] = {}
    for atom in range(found.view.heavy):
        if found.view.element[atom] == "C":
            atoms.setdefault(found.view.hydrogens[atom], []).append(atom)
    shifts: dict[int, list[float]] = {}
    for signal in record["signals"]:  # type: ignore[attr-defined]
        shifts.setdefault(signal["attached_h"], []).extend([signal["shift"]] * signal["carbons"])
    return tuple(
        (tuple(held), (1,) * len(held), tuple(shifts[h]))
        for h, held in sorted(atoms.items())
        if len(shifts.get(h, ())) == len(held)
    )


def proton_groups(found: Surroundings, record: dict[str, object]) -> tuple:  # type: ignore[type-arg]
    """All C-H of a list in one class; lists that count exchanging hydrogen do not add up and are left out."""
    view = found.view
    atoms = tuple(a for a in range(view.heavy) if view.element[a] == "C" and view.hydrogens[a])
    one_each = record["one_shift_per"] == "hydrogen_bearing_carbon"
    counts = tuple(1 if one_each else view.hydrogens[a] for a in atoms)
    shifts = tuple(record["shifts"])  # type: ignore[arg-type]
    return ((atoms, counts, shifts),) if atoms and sum(counts) == len(shifts) else ()


def first_guess(found: Surroundings, atom: int, nucleus: str) -> float:
    """Rough shift to match with in the first round."""
    view, kind = found.view, found.coarse[atom]
    around = [view.element[b] for b in view.around[atom]]
    oxygen, nitrogen = around.count("O"), around.count("N")
    if nucleus == "13C":
        if kind in "af":
            return 128.0 + 25.0 * (oxygen > 0) + 20.0 * (nitrogen > 0)
        rough = {"D": 128.0 + 20.0 * oxygen + 10.0 * nitrogen, "M": 155.0, "T": 118.0 if nitrogen else 80.0,
                 "K": 168.0 if oxygen > 1 or nitrogen else 198.0}
        return rough.get(kind, 12.0 + 8.0 * len(around) + 38.0 * oxygen + 20.0 * nitrogen)
    if kind in "af":
        return 7.4 + 0.8 * any(found.coarse[b] == "n" for b in view.around[atom])
    rough = {"D": 5.6, "M": 8.2, "T": 2.4, "K": 8.1 if nitrogen or oxygen > 1 else 9.8}
    pull = {"O": 2.4, "N": 1.5, "F": 3.0, "Cl": 2.2, "Br": 2.1, "S": 1.3}
    near = sum(pull.get(view.element[b], 0.9 * (found.coarse[b] in "afnKDT")) for b in view.around[atom])
    return rough.get(kind, 0.7 + 0.3 * len(around) + near)


@dataclass(frozen=True)
class Rows:
    """Design rows of all lists: terms, first guess, part and width key per row; groups with their part."""

    terms: list[list[str]]
    guess: list[float]
    atoms: list[tuple[Surroundings, int]]
    groups: list[tuple[int, Group]]


def lay_out(lists: list[Shifts], nucleus: str) -> Rows:
    """One row per observed atom."""
    rows = Rows([], [], [], [])
    for entry in lists:
        for atoms, counts, shifts in entry.groups:
            start = len(rows.terms)
            for atom in atoms:
                rows.terms.append(terms(entry.found, atom))
                rows.guess.append(first_guess(entry.found, atom, nucleus))
                rows.atoms.append((entry.found, atom))
            numbers = tuple(range(start, start + len(atoms)))
            rows.groups.append((entry.part, Group(numbers, counts, shifts)))
    return rows


def fit_without(rows: Rows, left_out: set[int], nucleus: str) -> tuple[dict[str, int], Vector]:
    """Increments (hundredths of a ppm) fitted without some parts, and the estimate of every row."""
    groups = [g for part, g in rows.groups if part not in left_out]
    used = sorted(r for g in groups for r in g.rows)
    names = build_design([rows.terms[r] for r in used], [0.0] * len(used), LEAST[nucleus]).names
    number = {name: i for i, name in enumerate(names)}
    columns: list[int] = []
    starts = [0]
    for row in rows.terms:
        columns.extend(number[name] for name in row if name in number)
        starts.append(len(columns))
    design = Design(np.array(starts), np.array(columns), names, np.full(len(rows.terms), BASE[nucleus]))
    penalty = np.full(len(names), PENALTY[nucleus])
    x, _ = fit(design, groups, np.array(rows.guess), penalty, HUBER[nucleus], ROUNDS)
    whole = np.rint(100.0 * x)
    increments = {name: int(value) for name, value in zip(names, whole, strict=True) if value}
    return increments, design.prior + design.times(whole / 100.0)


def widths(rows: Rows, nucleus: str) -> dict[str, tuple[float, float, int]]:
    """Scale, reach and count by width key, from parts 1 to 4, each estimated without itself."""
    errors: dict[str, list[float]] = {}
    for part in range(1, FOLDS):
        increments, estimate = fit_without(rows, {0, part}, nucleus)
        held = [g for p, g in rows.groups if p == part]
        target, weight = match(held, estimate)
        for row in np.flatnonzero(weight):
            found, atom = rows.atoms[row]
            error = abs(float(target[row] - estimate[row]))
            for key in depth_key(found, atom, increments):
                errors.setdefault(key, []).append(error)
    result = {}
    for key, values in sorted(errors.items()):
        if len(values) < 40:
            continue
        p68, p95, p99 = (float(np.percentile(values, p)) for p in (68.3, 95.0, 99.5))
        digits = 3 if nucleus == "1H" else 2
        scale = max(p68, p95 / 2.2)
        result[key] = (round(scale, digits), round(max(p99, 3.5 * scale), digits), len(values))
    return result


def write(nucleus: str, increments: dict[str, int], spread: dict[str, tuple[float, float, int]], counts: str) -> Path:
    """Write the table; keys in alphabetical order so that two runs give the same bytes."""
    path = ROOT / "rules" / "tables" / f"shift_increments_{nucleus.lower()}.yaml"
    lines = [
        f"# Additive increments of {nucleus} shifts. Written by tests/bench/fit_shifts.py; do not edit by hand.",
        "# increments: pairs of term and hundredths of a ppm. A term is <class of the atom><bonds><path>:<type>;",
        "# 1..., 2..., 3... are the whole surroundings to one, two and three bonds (check sums).",
        "# widths: <kind of atom><depth met in the data>: [scale, reach, atoms], ppm.",
        f"nucleus: {nucleus}",
        f"source: {SOURCE}; {counts}",
        f"base: {int(BASE[nucleus] * 100)}",
        "widths:",
        *(f"  {key!r}: [{a}, {b}, {n}]" for key, (a, b, n) in spread.items()),
        "increments: |",
    ]
    words = [f"{name} {value}" for name, value in sorted(increments.items())]
    line = " "
    for word in words:
        if len(line) + len(word) > 108:
            lines.append(line)
            line = " "
        line += " " + word
    lines.append(line)
    path.write_text("\n".join(lines) + "\n", encoding="utf-8")
    return path


def main() -> None:
    """Fit and write the tables of the nuclei named on the command line."""
    if not DATA.is_dir():
        sys.exit(f"no data at {DATA}; set PEAKWITNESS_DATA")
    for nucleus in sys.argv[1:] or ("1H", "13C"):
        lists = list(read_lists(nucleus))
        rows = lay_out(lists, nucleus)
        used = [g for part, g in rows.groups if part]
        spread = widths(rows, nucleus)
        increments, _ = fit_without(rows, {0}, nucleus)
        counts = f"{sum(entry.part > 0 for entry in lists)} lists, {sum(len(g.shifts) for g in used)} shifts"
        path = write(nucleus, increments, spread, counts)
        print(f"{path.name}: {len(increments)} increments, {len(spread)} widths, {counts}, {path.stat().st_size} bytes")


if __name__ == "__main__":
    main()
