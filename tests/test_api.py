"""The Python interface: records in every form, tables, rooms and functions of one name, lazy names."""

from __future__ import annotations

import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

import jsonschema
import pandas as pd
import pytest

import verify
from verify.api import FRAME_COLUMNS, structure_text
from verify.record.stage import record_from_mapping
from verify.report.json_report import report_schema

ROOT = Path(__file__).parents[1]
SMILES = "CCOC(C)=O"
RIGHT = "4.12 (q, J = 7.1 Hz, 2H), 2.04 (s, 3H), 1.26 (t, J = 7.1 Hz, 3H)"
WRONG = "4.12 (q, J = 7.1 Hz, 2H), 1.26 (t, J = 7.1 Hz, 3H)"


def _record(text: str = RIGHT) -> dict[str, object]:
    spectrum = {"nucleus": "1H", "field_mhz": 400, "solvent": "CDCl3", "report": text}
    return {"compound": "A-1", "structure": {"smiles": SMILES}, "spectra": [spectrum]}


def test_mapping_reading_and_record_are_judged_alike() -> None:
    reading = record_from_mapping(_record(WRONG))
    assert isinstance(reading.record, verify.Record)
    results = [verify.examine(form) for form in (_record(WRONG), reading, reading.record)]
    assert {str(result.verdict) for result in results} == {"contradicted"}
    assert len({tuple(f.fingerprint for f in result.findings) for result in results}) == 1


def test_a_result_says_what_the_interface_promises() -> None:
    result = verify.examine(_record(WRONG))
    assert result.verdict == "contradicted"
    finding = next(f for f in result.findings if f.level == "error")
    assert (finding.rule, finding.stands, finding.nucleus) == ("hydrogen-total-low", True, "1H")
    assert finding.place is not None
    assert (finding.place.file, finding.place.line, finding.place.column) == ("", 1, 1)
    assert result.assignment[0]["signals"][0]["environments"][0]["nuclei"] == 2
    assert result.unassessed_because == ""


@pytest.mark.parametrize("text", [RIGHT, WRONG, "no list"])
def test_as_dict_is_a_record_of_the_report_schema(text: str) -> None:
    schema = report_schema()
    validator = jsonschema.Draft202012Validator({"$ref": "#/$defs/record", "$defs": schema["$defs"]})
    validator.validate(verify.examine(_record(text)).as_dict())


@pytest.mark.parametrize(
    "record", [{}, {"structure": 5}, {"structure": {"smiles": "C("}, "spectra": []}, {"spectra": [None]}, []]
)
def test_a_record_that_cannot_be_judged_is_never_raised(record: object) -> None:
    result = verify.examine(record)  # type: ignore[arg-type]
    assert result.verdict == verify.Verdict.UNASSESSED
    assert result.unassessed_because
    assert result.compound


def test_policy_and_packs_that_cannot_be_used_are_raised() -> None:
    with pytest.raises(verify.ConfigurationError, match="registration"):
        verify.examine(_record(), policy="registratoin")
    with pytest.raises(verify.ConfigurationError, match="no-pack"):
        verify.examine(_record(), packs=["no-pack"])


def test_deviations_hold_until_today_is_past_their_end() -> None:
    marks = [f.fingerprint for f in verify.examine(_record(WRONG)).findings if f.level == "error"]
    from verify.findings.finding import Deviation

    accepted = [Deviation("A-1", mark, "shown", "A. Chemist", "2026-01-01", "2026-12-31") for mark in marks]
    before = verify.examine(_record(WRONG), today="2026-12-31", deviations=accepted)
    after = verify.examine(_record(WRONG), today="2027-01-01", deviations=accepted)
    assert (before.verdict, after.verdict) == ("consistent", "contradicted")


def test_environments_is_a_room_and_a_function() -> None:
    import verify.environments.model as model

    found = verify.environments(SMILES)
    assert [environment.count for environment in found] == [3, 2, 3]
    assert all(isinstance(environment, model.Environment) for environment in found)
    assert len(verify.environments(SMILES, nucleus="13C")) == 4


def test_solvents_that_exchange_take_hydrogens_away() -> None:
    assert len(verify.environments("CCO")) == 3
    assert len(verify.environments("CCO", solvent="D2O")) == 2
    assert len(verify.environments("CCO", solvent="CDCl3")) == 3


@pytest.mark.parametrize("function", [verify.environments, verify.foresee])
def test_what_cannot_be_read_is_a_wrong_call(function: Callable[..., object]) -> None:
    with pytest.raises(verify.UsageError, match="cannot be read"):
        function("C1CC")
    with pytest.raises(verify.UsageError, match="expected one of 1H, 13C, 19F, 31P"):
        function("CC", nucleus="2H")


def test_foresee_orders_by_shift() -> None:
    centres = [expectation.window.centre for expectation in verify.foresee(SMILES)]
    assert len(centres) == 3
    assert centres == sorted(centres, reverse=True)


def test_structures_are_told_apart_by_their_text() -> None:
    assert structure_text("InChI=1S/CH4/h1H4").format == "inchi"
    assert structure_text("\n\n\n  0  0\nM  END\n").format == "molblock"
    assert structure_text(" CCO ").text == "CCO"


def test_a_frame_keeps_its_index_and_never_loses_a_row() -> None:
    frame = pd.DataFrame(
        {
            "compound": ["A-1", "A-2", None, "A-4"],
            "smiles": [SMILES, SMILES, None, SMILES],
            "h1": [RIGHT, WRONG, RIGHT, RIGHT],
            "h1_mhz": [400.0, float("nan"), 400.0, "much"],
            "h1_solvent": ["CDCl3", None, pd.NA, "CDCl3"],
            "hrms_ion": ["[M+H]+", None, None, None],
            "hrms_found": [89.0597, None, None, None],
        },
        index=[10, 20, 30, 30],
    )
    found = verify.examine_frame(frame)
    assert list(found.columns) == list(FRAME_COLUMNS)
    assert list(found.index) == [10, 20, 30, 30]
    assert list(found["compound"]) == ["A-1", "A-2", "row 3", "A-4"]
    assert list(found["verdict"])[:3] == ["consistent", "contradicted", "unassessed"]
    assert found["errors"].iloc[1] >= 1
    assert found["first_rule"].iloc[1] == "hydrogen-total-low"
    assert found["unassessed_because"].iloc[2]
    assert found["warnings"].iloc[3] >= 1


def test_an_empty_frame_gives_an_empty_frame() -> None:
    assert list(verify.examine_frame(pd.DataFrame()).columns) == list(FRAME_COLUMNS)


def test_gate_is_the_command_without_the_printing() -> None:
    run = verify.gate(str(ROOT / "registry_example" / "incoming"))
    assert not run.is_clear
    assert len(run.records) == len(list((ROOT / "registry_example" / "incoming" / "compounds").iterdir()))


def test_public_names_are_all_there_and_in_order() -> None:
    assert sorted(verify.__all__) == verify.__all__
    assert all(getattr(verify, name) is not None for name in verify.__all__)
    assert set(verify.__all__) <= set(dir(verify))
    with pytest.raises(AttributeError, match="no attribute 'exmaine'"):
        verify.exmaine  # noqa: B018


def test_importing_the_package_loads_nothing_else() -> None:
    code = "import sys, verify; print(sorted(m for m in sys.modules if m.startswith(('verify.', 'rdkit', 'numpy'))))"
    done = subprocess.run([sys.executable, "-c", code], cwd=ROOT, capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"
