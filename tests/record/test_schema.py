"""What is wrong with a record is said at its line and column, in words, and costs nothing that is right."""

from __future__ import annotations

import json
from importlib.resources import files
from pathlib import Path
from typing import Any

import pytest
import yaml
from hypothesis import given, settings
from hypothesis import strategies as st
from jsonschema import Draft202012Validator

from verify.record.model import RecordReading
from verify.record.schema import nearest_key, shipped_schema
from verify.record.stage import Surroundings, read_record, record_schema

FAULTS = yaml.safe_load(Path(__file__).with_name("record_faults.yaml").read_text(encoding="utf-8"))
GOOD = """\
compound: ARO-0001
name: ethanol
structure: {smiles: "CCO"}
batch: 2
components: [{smiles: "Cl", per_molecule: 0.5}]
spectra:
  - nucleus: 1H
    field_mhz: 400
    solvent: CDCl3
    temperature_k: 298
    report: "3.7 (q, 2H), 1.2 (t, 3H)"
  - nucleus: 13C
    signals: [{shift: 58.1}, {low: 18.0, high: 18.2, multiplicity: s, couplings: [2.1], nuclei: 1, note: x}]
mass: [{ion: "[M+H]+", calculated: 47.0491, found: 47.0490, formula: C2H7O}]
elemental: {calculated: {C: 52.14}, found: {C: 52.1}}
notes: none
x-origin: shelf 3
"""


def _read(text: str) -> RecordReading:
    return read_record(text.encode("utf-8"), "r.yaml", Surroundings(folder_name="ARO-0001"))


def _told(reading: RecordReading) -> list[tuple[str, int, int, int]]:
    """Code, line, column and length of each problem."""
    places = [reading.places.place(problem.locus) for problem in reading.problems]
    assert None not in places
    pairs = zip(reading.problems, places, strict=True)
    return [(problem.code, place.line, place.column, place.length) for problem, place in pairs if place]


def test_whole_record_is_read() -> None:
    reading = _read(GOOD)
    assert reading.problems == ()
    record = reading.record
    assert record is not None
    assert (record.compound, record.name, record.batch, record.notes) == ("ARO-0001", "ethanol", "2", "none")
    assert (record.structure.format, record.structure.text) == ("smiles", "CCO")
    assert [(each.smiles, each.per_molecule, each.pointer) for each in record.components] == [
        ("Cl", 0.5, "/components/0/smiles")
    ]
    proton, carbon = record.spectra
    assert (proton.nucleus, proton.field_mhz, proton.solvent, proton.temperature_k) == (
        "1H",
        400.0,
        "CDCl3",
        298.0,
    )
    assert proton.report == "3.7 (q, 2H), 1.2 (t, 3H)"
    assert (carbon.pointer, carbon.report, len(carbon.signals)) == ("/spectra/1", None, 2)
    assert record.mass[0].calculated == 47.0491
    assert record.elemental[0].found == {"C": 52.1}
    assert record.extra == {"x-origin": "shelf 3"}


def _place_of(text: str, whole: str) -> tuple[int, int, int]:
    """Line, column and length of a text that must stand in the record exactly once."""
    assert whole.count(text) == 1, text
    before = whole[: whole.index(text)]
    return before.count("\n") + 1, len(before) - before.rfind("\n"), len(text)


@pytest.mark.parametrize("fault", FAULTS, ids=[fault["name"] for fault in FAULTS])
def test_fault_is_told_at_its_place(fault: dict[str, Any]) -> None:
    text = GOOD.replace(fault["old"], fault["new"], 1)
    assert text != GOOD
    reading = _read(text)
    told = _told(reading)
    assert [each[0] for each in told] == [fault["code"]]
    if fault["at"]:
        assert told[0][1:] == _place_of(fault["at"], text)
    problem = reading.problems[0]
    blocks = fault.get("blocks", "")
    assert problem.blocks == blocks
    assert fault["says"] in problem.message
    assert fault["wants"] in problem.expected
    assert (reading.record is None) == (blocks == "record")
    if reading.record is not None:
        assert len(reading.record.spectra) == fault.get("spectra", 1 if blocks == "spectrum" else 2)
        assert reading.record.structure.text == "CCO"


def test_wrong_optional_value_leaves_its_neighbours() -> None:
    record = _read(GOOD.replace("400", "abc").replace("47.0490", "n.d.").replace("52.1}", "521}")).record
    assert record is not None
    assert record.spectra[0].field_mhz is None
    assert record.spectra[0].solvent == "CDCl3"
    assert (record.mass[0].calculated, record.mass[0].found) == (47.0491, None)
    assert (record.elemental[0].calculated, record.elemental[0].found) == ({"C": 52.14}, {})


def test_many_faults_are_all_told() -> None:
    text = (
        GOOD.replace("400", "abc").replace("298", "25").replace("solvent", "solvant").replace("name", "nam")
    )
    codes = sorted(problem.code for problem in _read(text).problems)
    assert codes == ["record-unknown-key", "record-unknown-key", "record-wrong-type", "record-wrong-value"]


def test_problems_of_a_kept_spectrum_carry_its_number() -> None:
    text = GOOD.replace("nucleus: 1H", "nucleus: H").replace("signals:", "temperature_k: 3\n    signals:")
    dropped, kept = _read(text).problems
    assert (dropped.locus.pointer, dropped.locus.spectrum) == ("/spectra/0/nucleus", None)
    assert (kept.locus.pointer, kept.locus.spectrum) == ("/spectra/1/temperature_k", 0)


def test_more_spectra_than_are_read_are_told() -> None:
    spectra = "spectra: [" + "{nucleus: 1H, report: x}, " * 51 + "]"
    (problem,) = _read(f"structure: {{smiles: C}}\n{spectra}\n").problems
    assert (problem.code, problem.blocks, problem.expected) == ("record-too-many", "spectrum", "at most 50")
    assert "51 items" in problem.message


def test_problem_in_a_signal_carries_its_number() -> None:
    (problem,) = _read(GOOD.replace("[2.1]", "[xx]")).problems
    assert (problem.locus.spectrum, problem.locus.signal) == (1, 1)


def test_endless_faults_are_cut_and_the_record_is_not_read() -> None:
    text = GOOD + "".join(f"key{number}: 1\n" for number in range(5000)) + f"? {'k' * 100_000}\n: 1\n"
    reading = _read(text)
    assert [problem.code for problem in reading.problems] == ["record-unknown-key"] * 100 + [
        "record-many-faults"
    ]
    assert reading.record is None


def test_long_key_is_shortened_in_the_message() -> None:
    (problem,) = _read(f"{GOOD}? {'k' * 100_000}\n: 1\n").problems
    assert problem.code == "record-unknown-key"
    assert len(problem.message) < 200


@pytest.mark.parametrize("key", ["batch", "name", "notes", "components", "spectra", "mass", "elemental"])
def test_key_without_a_value_counts_as_not_given(key: str) -> None:
    reading = _read(f'compound: ARO-0001\nstructure: {{smiles: "C"}}\n{key}:\n')
    assert reading.problems == ()
    assert reading.record is not None


@pytest.mark.parametrize(
    ("typed", "kept"),
    [
        ("2", "2"),
        ('"2"', "2"),
        ("007", "007"),
        ("1.0", "1.0"),
        ("1e5", "1e5"),
        ("NO", "NO"),
        ("12:30", "12:30"),
    ],
)
def test_text_keeps_what_was_typed(typed: str, kept: str) -> None:
    reading = _read(GOOD.replace("batch: 2", f"batch: {typed}").replace("ethanol", typed))
    assert reading.problems == ()
    assert reading.record is not None
    assert (reading.record.batch, reading.record.name) == (kept, kept)


def test_report_that_is_a_single_number_stays_text() -> None:
    record = _read(GOOD.replace('"3.7 (q, 2H), 1.2 (t, 3H)"', "77.10")).record
    assert record is not None
    assert record.spectra[0].report == "77.10"


@pytest.mark.parametrize("name", ["record.schema.json", "registry.schema.json"])
def test_shipped_schema_is_valid_2020_12(name: str) -> None:
    document = json.loads(files("verify.record").joinpath(name).read_text(encoding="utf-8"))
    assert document["$schema"] == "https://json-schema.org/draft/2020-12/schema"
    assert document["$id"].startswith("urn:")
    Draft202012Validator.check_schema(document)


def test_schema_compiled_for_speed_says_what_the_shipped_one_says() -> None:
    document = json.loads(files("verify.record").joinpath("record.schema.json").read_text(encoding="utf-8"))
    plain = Draft202012Validator(document)
    for data in _variants():
        assert plain.is_valid(data) == (record_schema().check(data) == ())


def _variants() -> list[dict[str, Any]]:
    good: dict[str, Any] = {"structure": {"smiles": "C"}}
    percentages: list[Any] = [{"C": 1}, {"C": 101}, {"carbon": 1}, [], {"C": "1"}]
    parts = [{"elemental": {"found": value}} for value in percentages]
    parts += [{"elemental": [{"calculated": value}]} for value in percentages]
    return [good, {}, *({**good, **part} for part in parts)]


def test_every_value_of_the_schema_has_words() -> None:
    """Whatever the validator may complain of carries the keyword that says what is wanted."""

    def parts(schema: dict[str, Any], path: str) -> list[tuple[str, dict[str, Any]]]:
        found = [(path, schema)]
        for key, value in schema.get("properties", {}).items():
            found += parts(value, f"{path}/{key}")
        for key in ("items", "propertyNames", "additionalProperties"):
            if isinstance(schema.get(key), dict):
                found += parts(schema[key], f"{path}/{key}")
        return found

    for name, prefix in (("record.schema.json", "record"), ("registry.schema.json", "registry")):
        for path, part in parts(shipped_schema(name, prefix).document, ""):
            assert set(part) <= {"description"} or part.get("expected"), path


@pytest.mark.parametrize(
    ("typed", "meant"),
    [("solvant", "solvent"), ("Solvent", "solvent"), ("field mhz", "field_mhz"), ("zzz", "")],
)
def test_nearest_key(typed: str, meant: str) -> None:
    assert nearest_key(typed, ["nucleus", "solvent", "field_mhz", "report"]) == meant


_JSON = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats() | st.text(max_size=5),
    lambda inner: (
        st.lists(inner, max_size=3)
        | st.dictionaries(
            st.sampled_from(["structure", "smiles", "spectra", "nucleus", "report", "signals", "mass", "x"]),
            inner,
        )
    ),
    max_leaves=12,
)


@settings(max_examples=150, deadline=None)
@given(
    st.dictionaries(
        st.sampled_from(["compound", "structure", "spectra", "mass", "elemental", "components"]), _JSON
    )
)
def test_any_json_ends_in_a_reading(data: dict[str, Any]) -> None:
    reading = read_record(json.dumps(data).encode("utf-8"), "r.json")
    assert reading.compound
    assert (reading.record is None) == any(problem.blocks == "record" for problem in reading.problems)
    assert all(reading.places.place(problem.locus) is not None for problem in reading.problems)
