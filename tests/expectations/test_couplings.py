"""Coupling paths get the window and the visibility a spectroscopist would give them.

The couplings named are textbook values (Silverstein, Webster, Kiemle; Pretsch, Buehlmann, Badertscher), from
memory, unless a source stands beside them.
"""

from __future__ import annotations

import pytest

from verify.environments.model import EnvironmentSet
from verify.environments.stage import find_environments
from verify.expectations.coupling_table import coupling_table
from verify.expectations.couplings import coupling_blocks
from verify.expectations.model import CouplingBlock
from verify.record.model import StructureText
from verify.structure.model import Structure
from verify.structure.stage import read_structure


def read(smiles: str) -> tuple[Structure, EnvironmentSet]:
    structure = read_structure(StructureText("smiles", smiles, "/structure")).structure
    assert structure is not None
    return structure, find_environments(structure)


def blocks_at(smiles: str, carrier: int, solvent: str = "CDCl3", nucleus: str = "1H") -> list[CouplingBlock]:
    """Blocks of the first environment on a heavy atom."""
    structure, environments = read(smiles)
    found = coupling_blocks(structure, environments, solvent)
    for environment in environments.of(nucleus):
        if carrier in environment.carriers:
            return list(found[environment.index])
    raise AssertionError(f"no {nucleus} on atom {carrier} of {smiles}")


# SMILES, heavy atom that bears the nucleus, J in Hz that is known, count of partners, how it is seen
KNOWN = [
    ("CCOC(C)=O", 0, 7.1, 2, "required"),  # ethyl acetate, Gottlieb 1997
    ("CCOC(C)=O", 1, 7.1, 3, "required"),
    ("CC(C)O", 0, 6.0, 1, "required"),  # 2-propanol, Gottlieb 1997
    ("OC(=O)/C=C/c1ccccc1", 3, 16.0, 1, "required"),
    ("CCOC(=O)/C=C\\C(=O)O", 5, 12.0, 1, "required"),
    ("O=C1C=CC(C)(C)O1", 2, 5.6, 1, "required"),  # butenolide
    ("O=C1C=CC(C)(C)CC1", 2, 10.0, 1, "required"),
    ("Fc1ccccc1", 2, 9.4, 1, "required"),  # Bak, Shoolery, Williams 1958
    ("Fc1ccccc1", 3, 5.8, 1, "required"),
    ("c1ccncc1", 2, 4.9, 1, "required"),
    ("Cc1ccco1", 2, 3.2, 1, "required"),
    ("c1ccsc1", 1, 5.1, 1, "required"),
    ("OCC#C", 1, 2.5, 1, "optional"),
    ("CCC=O", 2, 1.4, 2, "optional"),
    ("CC=CC=O", 3, 7.9, 1, "required"),
    ("OCC(F)(F)F", 1, 8.9, 3, "required"),
    ("COP(=O)(OC)OC", 0, 11.0, 1, "required"),
    ("COP(C)(=O)OC", 3, 17.4, 1, "required"),
    ("C1COCCN1C(C)=O", 0, 4.7, 2, "required"),
    ("C1CCN1c1ccccc1", 0, 7.2, 2, "required"),
    ("CNC(C)=O", 0, 4.8, 1, "optional"),
    ("O=C1C=CC=CN1C", 3, 6.6, 1, "required"),  # 2-pyridone
]


@pytest.mark.parametrize(("smiles", "carrier", "j", "count", "visibility"), KNOWN)
def test_known_couplings_lie_in_their_window(
    smiles: str, carrier: int, j: float, count: int, visibility: str
) -> None:
    blocks = blocks_at(smiles, carrier)
    hits = [b for b in blocks if b.low <= j <= b.high and b.count == count and b.visibility == visibility]
    assert hits, [(b.label, b.low, b.high, b.count, b.visibility) for b in blocks]


# a J that such a hydrogen cannot show
IMPOSSIBLE = [
    ("CCOC(C)=O", 1, 12.0),
    ("OC(=O)/C=C/c1ccccc1", 3, 9.0),
    ("OC(=O)/C=C\\c1ccccc1", 3, 16.5),
    ("Cc1ccc(C)cc1", 2, 16.0),
    ("Cc1ccco1", 2, 8.0),
    ("CC(C)O", 0, 10.0),
]


@pytest.mark.parametrize(("smiles", "carrier", "j"), IMPOSSIBLE)
def test_impossible_couplings_lie_outside_every_window(smiles: str, carrier: int, j: float) -> None:
    blocks = blocks_at(smiles, carrier)
    assert blocks
    assert all(not b.low - 0.6 <= j <= b.high + 0.6 for b in blocks)


@pytest.mark.parametrize(
    ("smiles", "carrier", "solvent", "visibility"),
    [
        ("CCO", 1, "DMSO-d6", "optional"),  # CH2 of ethanol sees OH, 5 Hz: Babij et al. 2016 read 4.3 to 5.9
        ("CCO", 1, "CDCl3", "hidden"),
        ("CCO", 1, "CD3OD", "hidden"),
        ("CCN", 1, "CDCl3", "hidden"),
        ("CCNC(C)=O", 1, "CDCl3", "optional"),
        ("CCNC(C)=O", 1, "D2O", "hidden"),
        ("CCS", 1, "CDCl3", "optional"),
    ],
)
def test_solvent_decides_whether_exchanging_partners_show(
    smiles: str, carrier: int, solvent: str, visibility: str
) -> None:
    seen = {b.visibility for b in blocks_at(smiles, carrier, solvent) if b.label.startswith("xh.")}
    assert seen == {visibility}


def test_para_coupling_is_hidden_and_meta_optional() -> None:
    seen = {b.bonds: b.visibility for b in blocks_at("Clc1ccc(Br)c(C)c1", 2)}
    assert seen == {3: "required", 4: "optional"}
    para = [b for b in blocks_at("COc1ccccc1", 3) if b.bonds == 5]
    assert [b.visibility for b in para] == ["hidden"]


def test_equal_nuclei_do_not_split_each_other() -> None:
    assert blocks_at("ClCCCl", 1) == []
    assert blocks_at("C1CCCCC1", 0) == []


def test_diastereotopic_hydrogens_split_each_other() -> None:
    blocks = blocks_at("CC(O)CCl", 3)
    assert [b.label for b in blocks if b.bonds == 2] == ["hh.geminal_sp3"]
    vicinal = next(b for b in blocks if b.bonds == 3 and b.label.startswith("hh."))
    assert vicinal.low <= 3.5
    assert vicinal.high >= 8.0


def test_salt_adds_a_partner_that_need_not_show() -> None:
    free = blocks_at("CN(C)CCc1ccccc1", 0)
    salt = blocks_at("CN(C)CCc1ccccc1.Cl", 0)
    assert [b for b in free if b.environment == -1] == []
    assert [(b.visibility, b.low) for b in salt if b.environment == -1] == [("optional", 0.0)]


@pytest.mark.parametrize(
    ("smiles", "carbon", "j", "count"),
    [
        ("Fc1ccccc1", 1, 245.0, 1),  # 1J, 2J, 3J of fluorobenzene: 245, 21, 7.8
        ("Fc1ccccc1", 2, 21.0, 1),
        ("Fc1ccccc1", 3, 7.8, 1),
        ("OCC(F)(F)F", 2, 278.0, 3),
        ("FC(F)(F)c1ccccc1", 4, 32.0, 3),
        ("CP(=O)(C)c1ccccc1", 4, 98.0, 1),
        ("CCOP(=O)(OCC)OCC", 1, 6.0, 1),
    ],
)
def test_carbon_is_split_by_fluorine_and_phosphorus(smiles: str, carbon: int, j: float, count: int) -> None:
    blocks = blocks_at(smiles, carbon, nucleus="13C")
    assert [b.count for b in blocks if b.low <= j <= b.high] == [count]


def test_every_row_of_the_table_is_a_window_around_its_typical_value() -> None:
    table = coupling_table()
    assert len(table) > 250
    for label, row in table.items():
        assert 0.0 <= row.low <= row.high, label
        assert row.low <= row.typical <= row.high, label
        assert row.source, label


def test_partners_see_each_other_with_the_same_window() -> None:
    structure, environments = read("CC(C)C(O)c1ccc(F)cc1")
    found = coupling_blocks(structure, environments, "CDCl3")
    for environment in environments.of("1H"):
        for block in found[environment.index]:
            if block.nucleus != "1H" or block.environment < 0:
                continue
            back = [b for b in found[block.environment] if b.environment == environment.index]
            assert (block.low, block.high) in {(b.low, b.high) for b in back}
