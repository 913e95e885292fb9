"""``examine``, ``foresee``, ``rivals`` and ``rulebook``: what they print and how they end."""

from __future__ import annotations

import json
from itertools import pairwise
from pathlib import Path

import jsonschema
import pytest

from verify.cli.main import main
from verify.report.json_report import report_schema

SMILES = "CCOC(C)=O"
RIGHT = "4.12 (q, J = 7.1 Hz, 2H), 2.04 (s, 3H), 1.26 (t, J = 7.1 Hz, 3H)"
ODD = RIGHT.replace("2.04 (s, 3H)", "9.80 (s, 3H)")
CARBON = "171.1, 60.4, 21.0, 14.2"


def test_a_right_list_ends_0_and_is_explained(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["examine", "--smiles", SMILES, "--h1", RIGHT, "--c13", CARBON, "--solvent", "CDCl3"]) == 0
    out = capsys.readouterr().out
    assert out.startswith("○ consistent\n")
    assert "1H: 8 H listed, 8 allowed" in out
    assert "13C: 4 lines listed, 4 environments" in out


def test_a_wrong_shift_is_underlined(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["examine", "--smiles", SMILES, "--h1", ODD]) == 1
    lines = capsys.readouterr().out.splitlines()
    assert lines[0] == "■ contradicted"
    marked = [(above, below) for above, below in pairwise(lines) if set(below.strip()) == {"^"}]
    assert any(above[below.index("^") : len(below)].startswith("9.80") for above, below in marked)


def test_json_is_one_record_of_the_report_schema(capfdbinary: pytest.CaptureFixture[bytes]) -> None:
    assert main(["examine", "--smiles", SMILES, "--h1", ODD, "--json", "-"]) == 1
    record = json.loads(capfdbinary.readouterr().out)
    schema = report_schema()
    jsonschema.Draft202012Validator({"$ref": "#/$defs/record", "$defs": schema["$defs"]}).validate(record)
    assert record["verdict"] == "contradicted"


def test_frequency_of_the_magnet_is_that_of_the_nucleus(capfdbinary: pytest.CaptureFixture[bytes]) -> None:
    given = ["--smiles", SMILES, "--h1", RIGHT, "--c13", CARBON, "--mhz", "400", "--solvent", "CDCl3"]
    main(["examine", *given, "--json", "-"])
    rules = {finding["rule"] for finding in json.loads(capfdbinary.readouterr().out)["findings"]}
    assert not rules & {"frequency-odd", "frequency-not-stated"}


@pytest.mark.parametrize("smiles", ["CCO(", "", "not a structure"])
def test_an_unreadable_structure_is_unassessed_and_ends_1(smiles: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["examine", "--smiles", smiles, "--h1", RIGHT]) == 1
    out, error = capsys.readouterr()
    assert out.startswith("△ unassessed: ")
    assert error == ""


def test_a_molfile_is_read(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    from rdkit import Chem

    path = tmp_path / "a.mol"
    path.write_text(Chem.MolToMolBlock(Chem.MolFromSmiles(SMILES)), encoding="utf-8")
    assert main(["examine", "--molfile", str(path), "--h1", RIGHT]) == 0
    assert capsys.readouterr().out.startswith("○ consistent")
    path.write_bytes(b"\xff\xfe\x00")
    assert main(["examine", "--molfile", str(path), "--h1", RIGHT]) == 2
    assert "is no UTF-8 text" in capsys.readouterr().err


def test_a_record_file_is_read_as_its_registry_would(registry: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (registry / "registry.yaml").write_text('id_pattern: "X-[0-9]+"\npolicy: manuscript\n', encoding="utf-8")
    path = registry / "compounds" / "GOOD" / "record.yaml"
    main(["examine", str(path)])
    assert f"{path}:1:1: warning compound-id: " in capsys.readouterr().out
    alone = registry.parent / "record.yaml"
    alone.write_text(path.read_text(encoding="utf-8"), encoding="utf-8")
    assert main(["examine", str(alone)]) == 0
    assert "compound-id" not in capsys.readouterr().out


def test_a_record_file_takes_no_second_structure(registry: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = registry / "compounds" / "GOOD" / "record.yaml"
    assert main(["examine", str(path), "--smiles", "C", "--mhz", "400"]) == 2
    assert "leave out --smiles, --mhz" in capsys.readouterr().err


def test_foresee_shows_every_group(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["foresee", "--smiles", SMILES]) == 0
    lines = capsys.readouterr().out.splitlines()
    assert [line.split()[0] for line in lines[1:] if not line.startswith(" ")] == ["OCH2", "C(O)CH3", "CH3"]


def test_foresee_json(capfdbinary: pytest.CaptureFixture[bytes]) -> None:
    assert main(["foresee", "--smiles", SMILES, "--nucleus", "13C", "--json", "-"]) == 0
    expected = json.loads(capfdbinary.readouterr().out)
    assert len(expected) == 4
    assert expected[0]["window"]["centre"] > 160


def test_rivals_of_a_propyl_list(capsys: pytest.CaptureFixture[str]) -> None:
    given = ["--smiles", "CC(C)OC(C)=O", "--h1", "4.02 (t, J = 6.7 Hz, 2H), 2.04 (s, 3H), 1.65 (m, 2H), 0.94 (t, 3H)"]
    assert main(["rivals", *given]) == 0
    assert "nats" in capsys.readouterr().out


def test_rulebook_lists_and_explains(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["rulebook"]) == 0
    assert "water-listed" in capsys.readouterr().out
    assert main(["rulebook", "water-listed"]) == 0
    out = capsys.readouterr().out
    assert all(word in out for word in ("when", "remedy", "basis", "speaks", "is silent"))
