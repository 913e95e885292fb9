"""Spin systems made from structures: what couples with what, and patterns any chemist knows (common practice)."""

from __future__ import annotations

import numpy as np
import pytest

from verify.expectations.spectrum import Simulated, simulate_system, spin_systems
from verify.expectations.spins import merged
from verify.pipeline.foresight import foresee_structure
from verify.record.model import StructureText


def systems(smiles: str, field: float = 400.0) -> list[Simulated]:
    foresight = foresee_structure(StructureText("smiles", smiles, ""), "1H", "CDCl3", field)
    assert foresight.structure is not None
    return [
        simulate_system(system, field)
        for system in spin_systems(foresight.structure, foresight.environments, foresight.expectations, "1H")
    ]


@pytest.mark.parametrize(
    ("smiles", "sizes"),
    [
        ("COC(C)=O", [3, 3]),  # two isolated methyls
        ("CC(=O)OC(C)C", [3, 7]),  # acetyl; isopropyl
        ("COc1ccc(C=O)cc1", [1, 3, 4]),  # CHO, OCH3, the ring
        ("CCOC(C)=O", [3, 5]),
        ("CCO", [1, 5]),  # the OH exchanges
    ],
)
def test_what_couples(smiles: str, sizes: list[int]) -> None:
    assert sorted(sum(s.system.sizes) for s in systems(smiles)) == sizes


def test_intensities_count_the_nuclei() -> None:
    for simulated in systems("CC(=O)/C=C/c1ccc(OC)cc1"):
        assert simulated.lines.intensity.sum() == pytest.approx(sum(simulated.system.sizes), rel=1e-4)


def test_an_isopropyl_is_a_doublet_and_a_septet() -> None:
    simulated = next(s for s in systems("CC(=O)OC(C)C", 800.0) if sum(s.system.sizes) == 7)
    lines = merged(simulated.lines, 0.6)
    high = lines.intensity[lines.frequency_hz > 3.0 * 800.0]
    # n + 1 lines, intensities 1:6:15:20:15:6:1 of one nucleus
    assert len(high) == 7
    assert high / high.max() == pytest.approx(np.array([1, 6, 15, 20, 15, 6, 1]) / 20.0, abs=0.06)


def test_a_symmetric_ring_gives_more_lines_than_two_doublets() -> None:
    ring = next(s for s in systems("COc1ccc(C=O)cc1") if sum(s.system.sizes) == 4)
    assert ring.how == "exact"
    assert len(merged(ring.lines, 0.05).frequency_hz) > 4


def test_a_long_chain_is_still_simulated() -> None:
    longest = max(systems("CCCCCCCCCCO"), key=lambda s: sum(s.system.sizes))
    assert longest.how != "exact"
    assert longest.lines.intensity.sum() == pytest.approx(sum(longest.system.sizes), rel=0.01)
