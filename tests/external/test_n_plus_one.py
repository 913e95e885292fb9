"""The n+1 rule on open chains. Common practice, no source; shifts are typical values from memory."""

from __future__ import annotations

import pytest

import verify

LETTERS = ("s", "d", "t", "q", "quint", "sext", "sept")
# n equal neighbours -> structure, and its list with a gap for the letters of the signal that sees n of them.
CHAINS = {
    0: ("COC(C)(C)C", "3.21 ({}, 3H), 1.19 (s, 9H)"),
    1: ("CC(C)C#N", "2.70 (sept, J = 7.0 Hz, 1H), 1.33 ({}, 6H)"),
    2: ("CCOC(C)(C)C", "3.41 (q, J = 7.0 Hz, 2H), 1.19 (s, 9H), 1.16 ({}, 3H)"),
    3: ("CCOC(C)(C)C", "3.41 ({}, 2H), 1.19 (s, 9H), 1.16 (t, J = 7.0 Hz, 3H)"),
    4: ("ClCCCCl", "3.71 (t, J = 6.3 Hz, 4H), 2.22 ({}, 2H)"),
    5: ("CCCBr", "3.39 (t, J = 6.8 Hz, 2H), 1.89 ({}, 2H), 1.03 (t, J = 7.4 Hz, 3H)"),
    6: ("CC(C)Br", "4.29 ({}, 1H), 1.71 (d, J = 6.6 Hz, 6H)"),
}


def _verdict(neighbours: int, letters: str) -> tuple[str, list[str]]:
    smiles, report = CHAINS[neighbours]
    words = letters if letters == "s" else f"{letters}, J = 7.0 Hz"
    spectrum = {"nucleus": "1H", "field_mhz": 400, "solvent": "CDCl3", "report": report.format(words)}
    record = {"compound": f"n{neighbours}", "structure": {"smiles": smiles}, "spectra": [spectrum]}
    result = verify.examine(record, policy="registration")
    serious = [f"{f.rule}: {f.message}" for f in result.findings if f.level in ("error", "warning")]
    return str(result.verdict), serious


@pytest.mark.parametrize("neighbours", CHAINS)
def test_n_neighbours_give_n_plus_one_lines(neighbours: int) -> None:
    verdict, serious = _verdict(neighbours, LETTERS[neighbours])
    assert verdict == "consistent", serious


@pytest.mark.parametrize("neighbours", CHAINS)
@pytest.mark.parametrize("lines", range(1, 8))
def test_other_letters_are_held(neighbours: int, lines: int) -> None:
    """One line more or less among five or more is a common slip of the eye, and so are two outer lines lost in the
    noise: of 1:5:10:10:5:1 four stay, of 1:6:15:20:15:6:1 five."""
    near = 1 if max(neighbours + 1, lines) >= 6 or neighbours == 4 else 0
    outer_lost = neighbours >= 5 and lines == neighbours - 1
    if abs(lines - neighbours - 1) <= near or outer_lost:
        pytest.skip("the right letter, or too near to it")
    verdict, _ = _verdict(neighbours, LETTERS[lines - 1])
    assert verdict in ("queried", "contradicted")
