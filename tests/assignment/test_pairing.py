"""A coupling without a partner is spoken of only where no other signal shows it."""

from __future__ import annotations

import verify


def _unpaired(smiles: str, report: str) -> list[str]:
    spectrum = {"nucleus": "1H", "field_mhz": 400, "solvent": "CDCl3", "report": report}
    record = {"compound": "x", "structure": {"smiles": smiles}, "spectra": [spectrum]}
    return [f.message for f in verify.examine(record).findings if f.rule == "coupling-without-partner"]


ESTER = "CCOC(=O)/C=C/C"
LIST = (
    "6.97 (dq, J = {}, 6.9 Hz, 1H), 5.85 (dq, J = 15.5, 1.7 Hz, 1H), 4.18 (q, J = 7.1 Hz, 2H), "
    "1.88 (dd, J = 6.9, 1.7 Hz, 3H), 1.28 (t, J = 7.1 Hz, 3H)"
)


def test_partners_that_agree_are_not_spoken_of() -> None:
    assert _unpaired(ESTER, LIST.format("15.5")) == []


def test_partners_that_differ_are() -> None:
    assert "15.5 Hz" in " ".join(_unpaired(ESTER, LIST.format("11.2")))


def test_near_groups_that_swapped_places_are_not() -> None:
    """The two ring hydrogens may be read either way round; their 1.9 Hz stands in both signals."""
    report = (
        "6.82 (d, J = 8.0 Hz, 1H), 6.70 (d, J = 1.9 Hz, 1H), 6.67 (dd, J = 8.0, 1.9 Hz, 1H), 5.51 (s, 1H), "
        "3.87 (s, 3H), 2.83 (t, J = 7.5 Hz, 2H), 2.74 (t, J = 7.5 Hz, 2H), 2.14 (s, 3H)"
    )
    assert _unpaired("COc1cc(CCC(C)=O)ccc1O", report) == []
