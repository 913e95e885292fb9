"""The real command on hostile registries: each fault is told where it stands, and no record is lost."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from dataclasses import dataclass
from itertools import pairwise
from pathlib import Path
from typing import Any

import pytest

from verify.cli.main import main

ROOT = Path(__file__).parents[2]
ACETATE = "CCOC(C)=O"
LIST = "4.12 (q, J = 7.1 Hz, 2H), 2.04 (s, 3H), 1.26 (t, J = 7.1 Hz, 3H)"
TYPED = 'structure: {smiles: "%s"}\nspectra:\n- nucleus: 1H\n  field_mhz: 400\n  solvent: CDCl3\n  report: "%s"\n'
ENTERED = """\
structure: {smiles: "CCOC(C)=O"}
spectra:
- nucleus: 1H
  field_mhz: 400
  solvent: CDCl3
  signals:
  - {shift: 4.12, multiplicity: q, couplings: [7.1], nuclei: 2}
  - {shift: 2.04, multiplicity: s, nuclei: %s}
  - {shift: 1.26, multiplicity: t, couplings: [7.1], nuclei: 3}
"""
MOLFILE = TYPED.replace('{smiles: "%s"}', "{molfile: %s}")
LETTERS = "abcdefghij"
BOMB = "a: &a [x, x, x, x, x, x, x, x, x]\n" + "".join(
    f"{new}: &{new} [{', '.join([f'*{old}'] * 9)}]\n" for old, new in pairwise(LETTERS)
)


@dataclass(frozen=True)
class Case:
    """``at``: text at which the finding must begin, or (line, column) where there is none to point at."""

    content: str | bytes
    rule: str
    at: str | tuple[int, int] = (1, 1)
    verdict: str = "unassessed"
    says: str = ""


UNREAD = "unreadable-record"
NO_STRUCTURE = "unreadable-structure"
CASES = {
    "EMPTY": Case("", UNREAD, says="empty"),
    "COMMENT-ONLY": Case("# nothing yet\n", UNREAD),
    "BINARY": Case(bytes(range(256)) * 8, UNREAD, says="binary"),
    "HUGE": Case(b"compound: HUGE\n", UNREAD, says="52.4 MB"),  # made 50 MiB long below
    "BOMB": Case(BOMB, UNREAD, (5, 28), says="alias"),
    "DEEP": Case("a: " + "[" * 4000 + "]" * 4000, UNREAD, (1, 1003), says="depth"),
    "NOT-A-MAPPING": Case("- a\n- b\n", UNREAD, says="list"),
    "UTF-16": Case((TYPED % (ACETATE, LIST)).encode("utf-16"), UNREAD, says="UTF-16"),
    "LATIN-1": Case((TYPED % (ACETATE, "\u03b4 4.12")).encode("cp1253"), UNREAD, (6, 12), says="0xE4"),
    "UNKNOWN-KEY": Case(
        (TYPED % (ACETATE, LIST)).replace("solvent", "solvant"), "unknown-key", "solvant", "queried", '"solvent"'
    ),
    "BAD-SMILES": Case(TYPED % ("CCOC(C=O", LIST), NO_STRUCTURE, "(C=O", says="branch is not closed"),
    "BAD-VALENCE": Case(TYPED % ("C(C)(C)(C)(C)C", LIST), NO_STRUCTURE, "C(C)", says="valence"),
    "500-ATOMS": Case(TYPED % ("C" * 500, LIST), NO_STRUCTURE, "CCCC", says="500 heavy atoms"),
    "500-ATOM-PEPTIDE": Case(TYPED % ("NCC(=O)" * 125 + "O", LIST), NO_STRUCTURE, "NCC(=O)", says="501 heavy"),
    "MOLFILE-LEAVES": Case(MOLFILE % ("../../../outside.mol", LIST), NO_STRUCTURE, "../", says="out of the registry"),
    "MOLFILE-ABSOLUTE": Case(MOLFILE % ("/etc/hostname", LIST), NO_STRUCTURE, "/etc", says="absolute"),
    "MOLFILE-MISSING": Case(MOLFILE % ("none.mol", LIST), NO_STRUCTURE, "none.mol", says="no such file"),
    "NO-NUMBER": Case(TYPED % (ACETATE, "pure by NMR"), "unreadable-list", "pure", says="no shift"),
    "TYPED-0": Case(
        TYPED % (ACETATE, LIST.replace("s, 3H", "s, 0H")), "integral-unreadable", "0H)", "queried", "'0H'"
    ),
    "TYPED-1E9": Case(
        TYPED % (ACETATE, LIST.replace("s, 3H", "s, 1000000000H")), "integral-unreadable", "1000000000H", "queried"
    ),
    "TYPED-X": Case(
        TYPED % (ACETATE, LIST.replace("s, 3H", "s, xH")), "integral-unreadable", "xH)", "queried", "'xH'"
    ),
    "ENTERED-0": Case(ENTERED % "0", "integral-unreadable", "0}\n  - {shift: 1.26", "queried", "'0'"),
    "ENTERED-1E9": Case(ENTERED % "1.0e+9", "integral-unreadable", "1.0e+9", "queried", "1000000000"),
    "ENTERED-X": Case(ENTERED % "x", "integral-unreadable", "x}", "queried", "'x'"),
    "ENTERED-NAN": Case(ENTERED % ".nan", "integral-unreadable", ".nan", "queried"),
    "SAME-1": Case("compound: SAME\n" + TYPED % (ACETATE, LIST), "compound-id", "SAME", "queried", '"SAME-1"'),
    "SAME-2": Case("compound: SAME\n" + TYPED % (ACETATE, LIST), "duplicate-compound", verdict="contradicted"),
    "RIGHT": Case(TYPED % (ACETATE, LIST), "structure-registered-twice", verdict="consistent"),
}


def _write(root: Path) -> Path:
    (root / "registry.yaml").write_text("name: hostile\n", encoding="utf-8")
    (root.parent / "outside.mol").write_text("not to be read\n", encoding="utf-8")
    for name, case in CASES.items():
        folder = root / "compounds" / name
        folder.mkdir(parents=True)
        content = case.content.encode() if isinstance(case.content, str) else case.content
        (folder / "record.yaml").write_bytes(content)
    os.truncate(root / "compounds" / "HUGE" / "record.yaml", 50 * 1024 * 1024)  # sparse: takes no room
    (root / "compounds" / "NO-RECORD").mkdir()
    (root / "compounds" / "LOOSE.yaml").write_text(TYPED % (ACETATE, LIST), encoding="utf-8")
    return root


def _gate(root: Path, *options: str) -> tuple[subprocess.CompletedProcess[str], dict[str, Any]]:
    report = root.parent / "report.json"
    command = [sys.executable, "-m", "verify", "gate", str(root), "--json", str(report), *options]
    done = subprocess.run(command, cwd=ROOT, capture_output=True, text=True, timeout=240, check=False)
    return done, json.loads(report.read_text(encoding="utf-8"))


@pytest.fixture(scope="module")
def run(tmp_path_factory: pytest.TempPathFactory) -> tuple[subprocess.CompletedProcess[str], dict[str, Any]]:
    root = tmp_path_factory.mktemp("hostile") / "registry"
    root.mkdir()
    return _gate(_write(root), "--workers", "2")


@pytest.fixture(scope="module")
def records(run: tuple[subprocess.CompletedProcess[str], dict[str, Any]]) -> dict[str, dict[str, Any]]:
    """Records by the name of their folder, since ids may be equal."""
    return {Path(record["file"]).parent.name: record for record in run[1]["records"]}


def test_the_run_ends_held_without_a_word_of_python(
    run: tuple[subprocess.CompletedProcess[str], dict[str, Any]],
) -> None:
    done, report = run
    assert done.returncode == 1
    assert done.stderr == ""
    assert "Traceback" not in done.stdout
    assert not any(finding["rule"] == "tool-fault" for record in report["records"] for finding in record["findings"])


def test_no_record_is_lost(run: tuple[subprocess.CompletedProcess[str], dict[str, Any]]) -> None:
    report = run[1]
    assert len(report["records"]) == len(CASES) + 2  # and the folder without a record, and the loose file
    assert report["counts"]["records"] == len(CASES) + 2
    assert all(record["compound"] and record["file"] for record in report["records"])


def _place(case: Case) -> tuple[int, int]:
    if isinstance(case.at, tuple):
        return case.at
    assert isinstance(case.content, str)
    before = case.content[: case.content.index(case.at)]
    return before.count("\n") + 1, len(before) - (before.rfind("\n") + 1) + 1


@pytest.mark.parametrize("name", CASES)
def test_each_fault_is_told_where_it_stands(name: str, records: dict[str, dict[str, Any]]) -> None:
    case, record = CASES[name], records[name]
    assert record["verdict"] == case.verdict, record["findings"]
    assert bool(record["unassessed_because"]) == (case.verdict == "unassessed")
    found = [finding for finding in record["findings"] if finding["rule"] == case.rule]
    assert found, [finding["rule"] for finding in record["findings"]]
    assert found[0]["place"]["file"] == record["file"]
    assert (found[0]["place"]["line"], found[0]["place"]["column"]) == _place(case)
    assert case.says in found[0]["message"]
    assert found[0]["remedy"]


@pytest.mark.parametrize("name", [name for name, case in CASES.items() if case.rule in (UNREAD, NO_STRUCTURE)])
def test_an_unread_record_is_not_blamed_for_what_it_may_hold(name: str, records: dict[str, dict[str, Any]]) -> None:
    assert "required-spectrum-missing" not in {finding["rule"] for finding in records[name]["findings"]}


def test_a_folder_without_a_record_and_a_loose_file_are_told(run: Any) -> None:
    by_id = {record["compound"]: record for record in run[1]["records"]}
    assert "holds no record.yaml" in by_id["NO-RECORD"]["unassessed_because"]
    assert "move this file to compounds/LOOSE/record.yaml" in by_id["LOOSE"]["unassessed_because"]


@pytest.mark.parametrize(
    ("settings", "words"),
    [
        ("name: [\n", "registry.yaml:"),
        ("nam: x\n", 'did you mean "name"'),
        ("policy: registratoin\n", "did you mean 'registration'"),
        ("rules: [no-such-pack]\n", "no-such-pack"),
        ("deviations: none.yaml\n", "none.yaml"),
        ('id_pattern: "("\n', "id_pattern"),
        ("\x00", "registry.yaml"),
    ],
)
def test_settings_that_cannot_be_used_end_2(
    tmp_path: Path, capsys: pytest.CaptureFixture[str], settings: str, words: str
) -> None:
    (tmp_path / "compounds" / "A").mkdir(parents=True)
    (tmp_path / "compounds" / "A" / "record.yaml").write_text(TYPED % (ACETATE, LIST), encoding="utf-8")
    (tmp_path / "registry.yaml").write_text(settings, encoding="utf-8")
    assert main(["gate", str(tmp_path)]) == 2
    out, error = capsys.readouterr()
    assert out == ""
    assert words in error
    assert "fault inside the tool" not in error


@pytest.mark.parametrize("text", ["deviations: 5\n", "- a\n", "", "deviations: [{compound: A}]\n", "\x00"])
def test_deviations_that_cannot_be_used_end_2(
    tmp_path: Path, capsys: pytest.CaptureFixture[str], text: str
) -> None:
    (tmp_path / "deviations.yaml").write_text(text, encoding="utf-8")
    assert main(["gate", str(ROOT / "registry_example"), "--deviations", str(tmp_path / "deviations.yaml")]) == 2
    out, error = capsys.readouterr()
    assert out == ""
    assert "deviations.yaml" in error
    assert "fault inside the tool" not in error
