"""Each planted error changes what it says and nothing else, and is the same for the same seed."""

from __future__ import annotations

import random

import pytest
from planted import KINDS, plant
from published import Published
from rdkit import Chem
from rdkit.Chem.rdMolDescriptors import CalcMolFormula

H1 = (
    "1H NMR (400 MHz, CDCl3) δ 7.84 (d, J = 8.8 Hz, 2H), 7.00 (d, J = 8.8 Hz, 2H), "
    "4.05 (t, J = 6.5 Hz, 2H), 3.86 (s, 3H), 1.02 (t, J = 7.4 Hz, 3H)"
)
C13 = "13C NMR (101 MHz, CDCl3) δ 166.9, 163.2, 131.6, 122.6, 114.1, 69.8, 51.9, 22.6, 10.6"
OWN = Published("one-1", "CCCOc1ccc(C(=O)OC)cc1", {"1H": H1, "13C": C13}, True, "A", "", "")
OTHER = Published(
    "two-1", "CCO", {"1H": "δ 3.72 (q, J = 7.0 Hz, 2H), 1.25 (t, J = 7.0 Hz, 3H)"}, True, "A", "", ""
)
ROWS = [OWN, OTHER]


def _made(kind: str, seed: int = 1) -> Published:
    planted = plant(kind, OWN, ROWS, seed)
    assert planted is not None
    return planted.record


@pytest.mark.parametrize("kind", KINDS)
def test_same_seed_gives_the_same_error(kind: str) -> None:
    random.seed(0)
    first = _made(kind)
    random.seed(99)
    assert _made(kind) == first


@pytest.mark.parametrize("kind", KINDS)
def test_exactly_one_thing_changes(kind: str) -> None:
    made = _made(kind)
    changed = [made.smiles != OWN.smiles, *(made.texts[n] != OWN.texts[n] for n in OWN.texts)]
    assert changed.count(True) == 1


@pytest.mark.parametrize("seed", range(6))
def test_integral_is_off_by_exactly_one(seed: int) -> None:
    def total(text: str) -> int:
        return sum(int(part[-1]) for part in text.split("H)")[:-1])

    assert abs(total(_made("integral off by one", seed).texts["1H"]) - total(H1)) == 1


def test_dropped_signal_leaves_the_others_as_typed() -> None:
    text = _made("signal dropped").texts["1H"]
    assert text.count("H)") == H1.count("H)") - 1
    assert all(part.strip() + "H)" in H1 for part in text.split("H)")[1:-1])


def test_mistyped_coupling_is_ten_times_or_thirty_hertz_more() -> None:
    values = {"8.8", "6.5", "7.4"}
    for seed in range(6):
        text = _made("coupling mistyped", seed).texts["1H"]
        new = {part.split(" Hz")[0] for part in text.split("J = ")[1:]} - values
        (value,) = new
        assert any(abs(float(value) - x) < 0.05 for v in values for x in (10 * float(v), float(v) + 30))


def test_homologue_has_one_more_ch2_and_isomer_the_same_formula() -> None:
    formula = CalcMolFormula(Chem.MolFromSmiles(OWN.smiles))
    assert formula == "C11H14O3"
    assert CalcMolFormula(Chem.MolFromSmiles(_made("homologue drawn").smiles)) == "C12H16O3"
    assert CalcMolFormula(Chem.MolFromSmiles(_made("positional isomer drawn").smiles)) == formula


def test_four_carbons_more() -> None:
    assert _made("four carbons added").texts["13C"].count(",") == C13.count(",") + 4


@pytest.mark.parametrize("seed", range(6))
def test_one_shift_moves_by_more_than_a_ppm(seed: int) -> None:
    def shifts(text: str) -> list[float]:
        return [float(part.split()[-1]) for part in text.split("δ")[1].split(" (")[:-1]]

    old, new = shifts(H1), shifts(_made("shift mistyped", seed).texts["1H"])
    moved = [abs(a - b) for a, b in zip(old, new, strict=True) if a != b]
    assert len(moved) == 1
    assert 1.4 < moved[0] < 3.6
