"""Tabulated multiplicities and J of ordinary compounds are what their coupling partners allow.

Facts: tests/reference/trace_impurities.yaml (Gottlieb 1997, Fulmer 2010, Babij 2016), worked_examples.yaml,
with the source of each entry there.
"""

from __future__ import annotations

from functools import lru_cache
from pathlib import Path
from typing import Any

import pytest
import yaml

from verify.environments.model import EnvironmentSet
from verify.environments.stage import find_environments
from verify.expectations.couplings import coupling_blocks
from verify.expectations.model import CouplingBlock
from verify.expectations.splitting import accepted_splittings, price_pattern
from verify.record.model import StructureText
from verify.structure.model import Structure
from verify.structure.stage import read_structure

REFERENCE = Path(__file__).resolve().parents[1] / "reference"
NAMES = {"quint": 5, "sext": 6, "sept": 7, "nonet": 9, "s": 1, "d": 2, "t": 3, "q": 4}
Blocks = tuple[CouplingBlock, ...]
Case = tuple[Blocks, tuple[int, ...], tuple[float, ...], bool, float, str]


def lines_of(letters: str) -> tuple[int, ...] | None:
    """Line counts of nested letters; None for m and for anything else that has none."""
    rest, lines = letters.replace("br", "").strip(), []
    while rest:
        name = next((n for n in NAMES if rest.startswith(n)), None)
        if name is None:
            return None
        lines.append(NAMES[name])
        rest = rest[len(name) :]
    return tuple(lines) or None


@lru_cache(maxsize=512)
def known(smiles: str) -> tuple[Structure, EnvironmentSet]:
    structure = read_structure(StructureText("smiles", smiles, "/structure")).structure
    assert structure is not None, smiles
    return structure, find_environments(structure)


def load(name: str) -> dict[str, Any]:
    text = (REFERENCE / name).read_text(encoding="utf-8")
    loaded = yaml.load(text, getattr(yaml, "CSafeLoader", yaml.SafeLoader))
    assert isinstance(loaded, dict)
    return loaded


def tabulated() -> list[Case]:
    """Every group of the trace table with letters, one case for each environment on its atoms."""
    cases: list[Case] = []
    for compound in load("trace_impurities.yaml")["impurities"]:
        structure, environments = known(compound["smiles"])
        for group in compound["h1"]:
            lines = lines_of(group["mult"] or "m")
            if lines is None or not group["atoms"]:
                continue
            # OH and NH letters of the table were seen where exchange is slow
            solvent = "DMSO-d6" if "OH" in group["label"] or "NH" in group["label"] else "CDCl3"
            blocks = coupling_blocks(structure, environments, solvent)
            j = group["J_hz"]
            js = tuple(j) if isinstance(j, list) else () if j is None else (float(j),)
            for environment in environments.of("1H"):
                if set(environment.carriers) & set(group["atoms"]):
                    name = f"{compound['name']} {group['label']}"
                    broad = "br" in group["mult"]
                    cases.append((blocks[environment.index], lines, js, broad, group["n_h"], name))
    return cases


CASES = tabulated()


def test_the_table_is_large_enough_to_mean_something() -> None:
    assert len(CASES) > 130


def test_every_tabulated_multiplicity_is_cheap() -> None:
    dear = []
    for blocks, lines, js, broad, nuclei, name in CASES:
        price = price_pattern(blocks, lines, js, kind="first-order", broad=broad, nuclei=nuclei)
        if price.cost > 1.5:
            dear.append((name, lines, js, price))
    assert dear == []


def test_nearly_every_tabulated_multiplicity_is_free() -> None:
    prices = [
        price_pattern(blocks, lines, js, kind="first-order", broad=broad, nuclei=nuclei).cost
        for blocks, lines, js, broad, nuclei, _ in CASES
    ]
    assert sum(p > 0.3 for p in prices) <= 0.02 * len(prices)


WRONG = {(1,): ((2,), (3,), (4,)), (2,): ((1,), (4,)), (3,): ((1,), (2,), (5,)), (4,): ((1,), (2,), (3,))}


def open_chain(blocks: Blocks) -> bool:
    """Groups whose letters are strong evidence: no partner that may or may not show, no ring."""
    return all(b.visibility != "optional" and not b.label.startswith(("xh.", "hh.ring")) for b in blocks)


def test_wrong_letters_are_dear() -> None:
    tried, cheap = 0, []
    for blocks, lines, js, broad, nuclei, name in CASES:
        if broad or lines not in WRONG or not open_chain(blocks):
            continue
        for wrong in WRONG[lines]:
            tried += 1
            price = price_pattern(blocks, wrong, js, kind="first-order", nuclei=nuclei)
            if price.cost < 2.0:
                cheap.append((name, lines, wrong, price.cost))
    assert tried > 150
    assert cheap == []


def test_the_tabulated_letters_are_among_the_accepted_ones() -> None:
    lacking = []
    for blocks, lines, _, broad, _, name in CASES:
        accepted = accepted_splittings(blocks)
        if not broad and lines not in {s.lines for s in accepted}:
            lacking.append((name, lines, [s.letters for s in accepted]))
    assert len(lacking) <= 0.02 * len(CASES), lacking


def examples() -> list[tuple[str, dict[str, Any]]]:
    return [(e["name"], e) for e in load("worked_examples.yaml")["examples"]]


@pytest.mark.parametrize(("name", "example"), examples())
def test_worked_examples_have_a_cheap_home_for_every_letter(name: str, example: dict[str, Any]) -> None:
    structure, environments = known(example["smiles"])
    blocks = coupling_blocks(structure, environments, example["solvent"])
    for signal in example["signals"]:
        lines = lines_of(signal["mult"])
        if lines is None:
            continue
        best = min(
            price_pattern(
                blocks[e.index], lines, tuple(signal["J"]), kind="first-order", broad="br" in signal["mult"],
                nuclei=signal["nH"], merged=signal["nH"] > e.count,
            ).cost
            for e in environments.of("1H") if e.count <= signal["nH"] + 0.1
        )
        assert best <= 1.5, (name, signal)
