"""The door of the room: MOL files, ids, defaults, and records handed in by programs."""

from __future__ import annotations

import os
import pickle
from dataclasses import replace
from pathlib import Path
from types import MappingProxyType
from typing import Any

import numpy as np
import pytest

from verify.findings.location import Locus, Place, Span
from verify.record.model import RecordReading
from verify.record.molfile import MOST_MOLFILE_BYTES, MolfileFolder
from verify.record.settings import Defaults, ReadingSettings
from verify.record.stage import Surroundings, read_record, reading_of, record_from_mapping

MOLFILE = "\n  demo\n\n  1  0  0  0  0  0  0  0  0  0999 V2000\n    0.0 0.0 0.0 C   0  0\nM  END\n"


@pytest.fixture
def registry(tmp_path: Path) -> Path:
    """A registry with one compound's folder, a MOL file in it, one beside it, and one outside of it all."""
    folder = tmp_path / "registry" / "compounds" / "ARO-0001"
    folder.mkdir(parents=True)
    (folder / "structure.mol").write_text(MOLFILE, encoding="utf-8")
    (folder.parent / "shared.mol").write_text(MOLFILE, encoding="utf-8")
    (tmp_path / "secret.mol").write_text(MOLFILE, encoding="utf-8")
    return tmp_path / "registry"


def _read(registry: Path, path: str) -> RecordReading:
    folder = MolfileFolder(str(registry / "compounds" / "ARO-0001"), str(registry))
    text = f"structure:\n  molfile: '{path}'\n"
    return read_record(text.encode("utf-8"), "r.yaml", Surroundings(folder_name="ARO-0001", molfiles=folder))


@pytest.mark.parametrize("path", ["structure.mol", "./structure.mol", "../shared.mol"])
def test_molfile_is_read_from_the_records_folder(registry: Path, path: str) -> None:
    reading = _read(registry, path)
    assert reading.problems == ()
    assert reading.record is not None
    structure = reading.record.structure
    assert (structure.format, structure.text, structure.pointer) == (
        "molblock",
        MOLFILE,
        "/structure/molfile",
    )


@pytest.mark.parametrize(
    ("path", "code"),
    [
        ("../../../secret.mol", "structure-path-outside"),
        ("/etc/passwd", "structure-path-outside"),
        ("C:\\secret.mol", "structure-path-outside"),
        ("\\\\server\\share\\secret.mol", "structure-path-outside"),
        ("link.mol", "structure-path-outside"),
        ("linked/secret.mol", "structure-path-outside"),
        ("none.mol", "structure-file-missing"),
        ("structure.mol/none.mol", "structure-file-missing"),
        (".", "structure-file-unreadable"),
        ("binary.mol", "structure-file-unreadable"),
        ("empty.mol", "structure-file-unreadable"),
        ("large.mol", "structure-file-too-large"),
    ],
)
def test_molfile_that_is_not_read(registry: Path, path: str, code: str) -> None:
    folder = registry / "compounds" / "ARO-0001"
    (folder / "link.mol").symlink_to(registry.parent / "secret.mol")
    (folder / "linked").symlink_to(registry.parent)
    (folder / "binary.mol").write_bytes(b"\x89PNG\0\0")
    (folder / "empty.mol").write_bytes(b" \n")
    with (folder / "large.mol").open("wb") as stream:
        stream.truncate(MOST_MOLFILE_BYTES + 1)
    reading = _read(registry, path)
    assert [(problem.code, problem.blocks) for problem in reading.problems] == [(code, "record")]
    assert reading.record is None
    assert path in reading.problems[0].message
    place = reading.places.place(reading.problems[0].locus)
    assert place is not None
    assert (place.line, place.column, place.length) == (2, 13, len(path))


def test_molfile_in_an_old_encoding_is_read(registry: Path) -> None:
    path = registry / "compounds" / "ARO-0001" / "structure.mol"
    path.write_bytes("Müller\n".encode("latin-1") + MOLFILE.encode("ascii"))
    record = _read(registry, "structure.mol").record
    assert record is not None
    assert record.structure.text.startswith("Müller")


def test_molfile_without_a_folder_is_told() -> None:
    reading = record_from_mapping({"structure": {"molfile": "a.mol"}})
    assert [problem.code for problem in reading.problems] == ["structure-file-missing"]


@pytest.mark.parametrize(
    ("given", "folder", "compound", "codes"),
    [
        ("ARO-0001", "ARO-0001", "ARO-0001", []),
        (None, "ARO-0001", "ARO-0001", []),
        ("ARO-0002", "ARO-0001", "ARO-0002", ["compound-id-mismatch"]),
        ("aro-0001", "ARO-0001", "aro-0001", ["compound-id-mismatch", "compound-id-pattern"]),
        ("ARO-00011", "ARO-00011", "ARO-00011", ["compound-id-pattern"]),
        (None, "misc", "misc", ["compound-id-pattern"]),
        (None, "", "unnamed", ["compound-id-pattern"]),
    ],
)
def test_ids(given: str | None, folder: str, compound: str, codes: list[str]) -> None:
    text = (f"compound: {given}\n" if given else "") + 'structure: {smiles: "C"}\n'
    settings = ReadingSettings(id_pattern="ARO-[0-9]{4}")
    reading = read_record(text.encode("utf-8"), "r.yaml", Surroundings(settings, folder))
    assert reading.compound == compound
    assert [problem.code for problem in reading.problems] == codes
    assert all(problem.blocks == "" for problem in reading.problems)
    assert reading.record is not None
    places = [reading.places.place(problem.locus) for problem in reading.problems]
    assert all(
        place is not None and (place.line, place.column) == (1, 11 if given else 1) for place in places
    )


def test_defaults_stand_beside_what_the_record_says() -> None:
    defaults = Defaults(solvent="DMSO-d6", temperature_k=300.0, fields=(("1H", 500.0),))
    spectra = b"[{nucleus: 1H, solvent: CDCl3, report: x}, {nucleus: 13C, report: x}]"
    text = b"structure: {smiles: C}\nspectra: " + spectra
    record = read_record(text, "r.yaml", Surroundings(ReadingSettings(defaults=defaults))).record
    assert record is not None
    proton, carbon = record.spectra
    assert (proton.solvent, proton.default_solvent, proton.default_field_mhz) == ("CDCl3", "DMSO-d6", 500.0)
    assert (carbon.solvent, carbon.default_solvent, carbon.default_field_mhz) == (None, "DMSO-d6", None)
    assert carbon.default_temperature_k == 300.0


def test_structure_text_loses_only_blanks_behind_it() -> None:
    record = read_record(b"structure:\n  smiles: >\n    CCO\n", "r.yaml").record
    assert record is not None
    assert record.structure.text == "CCO"


def test_mapping_and_file_give_the_same_record() -> None:
    data: dict[str, Any] = {
        "compound": "A",
        "structure": {"smiles": "CCO"},
        "batch": 2,
        "spectra": [{"nucleus": "1H", "field_mhz": 400, "report": "3.7 (q, 2H)"}],
    }
    spectra = b'[{nucleus: 1H, field_mhz: 400, report: "3.7 (q, 2H)"}]'
    text = b"compound: A\nstructure: {smiles: CCO}\nbatch: 2\nspectra: " + spectra
    assert record_from_mapping(data).record == replace(_record(text), file="")


def _record(text: bytes) -> Any:
    record = read_record(text, "r.yaml").record
    assert record is not None
    return record


def test_mapping_is_not_changed_and_may_hold_values_of_other_libraries() -> None:
    signals = ({"shift": np.float64(1.2), "couplings": np.array([7.1, 7.2]), "nuclei": np.int64(3)},)
    spectrum = {"nucleus": "1H", "field_mhz": np.float32(400), "solvent": None, "signals": signals}
    data = MappingProxyType({"structure": {"smiles": "C"}, "spectra": [spectrum], "name": float("nan")})
    reading = record_from_mapping(data)
    assert reading.problems == ()
    assert reading.record is not None
    (read,) = reading.record.spectra
    assert read.field_mhz == 400.0
    assert read.signals == ({"shift": 1.2, "couplings": [7.1, 7.2], "nuclei": 3},)
    assert type(read.signals[0]["nuclei"]) is int
    assert reading.record.name is None
    assert spectrum["solvent"] is None


def test_halves_of_characters_in_a_mapping_are_joined_or_replaced() -> None:
    reading = record_from_mapping(
        {"structure": {"smiles": "C"}, "name": "\ud83d\ude00", "notes": "a\ud83db é"}
    )
    assert reading.record is not None
    assert (reading.record.name, reading.record.notes) == ("😀", "a\ufffdb é")


def test_mapping_that_holds_itself_or_is_none_is_told() -> None:
    data: dict[str, Any] = {"structure": {"smiles": "C"}}
    data["spectra"] = [data]
    assert [problem.code for problem in record_from_mapping(data).problems] == ["record-too-deep"]
    wide = {"structure": {"smiles": "C"}, "notes": ["x"] * 200_000}
    assert [problem.code for problem in record_from_mapping(wide).problems] == ["record-too-large"]
    none: Any = None
    assert [problem.code for problem in record_from_mapping(none).problems] == ["record-not-a-record"]


def test_mapping_with_values_of_no_kind_is_told() -> None:
    reading = record_from_mapping({"structure": {"smiles": "C"}, "batch": object(), "notes": {1: 2}})
    assert [problem.code for problem in reading.problems] == ["record-wrong-type", "record-wrong-type"]
    assert reading.record is not None


def test_places_of_a_mapping_count_inside_its_texts() -> None:
    reading = record_from_mapping(
        {"structure": {"smiles": "C"}, "spectra": [{"nucleus": "1H", "report": "a\nb 1.2"}]}
    )
    place = reading.places.place(Locus("/spectra/0/report", Span(4, 7)))
    assert place == Place("", 2, 3, 2, 6, "/spectra/0/report")
    assert reading.places.place(Locus("/spectra/0")) is None
    assert reading.places.place(Locus("/spectra/9/report")) is None
    assert reading.places.place(Locus("/structure/smiles", on_key=True)) is None


def test_places_of_a_ready_record_count_inside_its_texts() -> None:
    record = _record(b'structure: {smiles: CCO}\nspectra: [{nucleus: 1H, report: "1.2 (t)"}]\n')
    reading = reading_of(record)
    assert reading.record is record
    assert reading.places.place(Locus("/spectra/0/report", Span(5, 6))) == Place(
        "", 1, 6, 1, 7, "/spectra/0/report"
    )
    assert reading.places.place(Locus("/structure/smiles")) == Place("", 1, 1, 1, 4, "/structure/smiles")
    assert reading.places.place(Locus("/spectra/0/solvent")) is None


def test_reading_survives_a_pickle(registry: Path) -> None:
    reading = _read(registry, "structure.mol")
    again = pickle.loads(pickle.dumps(reading))
    assert again.record == reading.record
    locus = Locus("/structure/molfile")
    assert again.places.place(locus) == reading.places.place(locus)


def test_reading_does_not_depend_on_the_working_folder(
    registry: Path, monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    before = _read(registry, "structure.mol")
    monkeypatch.chdir(tmp_path)
    assert os.getcwd() == str(tmp_path)
    assert _read(registry, "structure.mol").record == before.record
