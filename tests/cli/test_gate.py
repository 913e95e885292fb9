"""``gate``: statuses, reports to files and standard output, what overrides the registry."""

from __future__ import annotations

import json
import os
import stat
from pathlib import Path

import pytest

from verify.cli.main import main

OWN_RULE = """\
id: always-said
title: "Said of every record"
scope: record
level: error
when: >-
  record.has_structure
message: >-
  this rule speaks of every record
remedy: >-
  Take the pack away.
basis: >-
  none; it shows that packs are read
locus: structure
examples:
- {says: "a structure", facts: {record.has_structure: true}, fires: true}
- {says: "none", facts: {record.has_structure: false}, fires: false}
"""


def test_held_registry_ends_1_and_names_the_place(registry: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["gate", str(registry)]) == 1
    out, error = capsys.readouterr()
    record = registry / "compounds" / "SHORT" / "record.yaml"
    column = record.read_text(encoding="utf-8").splitlines()[2].index("4.12") + 1
    assert f"{record}:3:{column}: error hydrogen-total-low: " in out
    assert "the gate holds 1 record" in out
    assert error == ""


def test_clear_registry_ends_0(registry: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (registry / "compounds" / "SHORT" / "record.yaml").unlink()
    (registry / "compounds" / "SHORT").rmdir()
    assert main(["gate", str(registry)]) == 0
    assert "the gate is clear" in capsys.readouterr().out


def test_json_on_standard_output_is_all_there_is(registry: Path, capfdbinary: pytest.CaptureFixture[bytes]) -> None:
    assert main(["gate", str(registry), "--json", "-"]) == 1
    report = json.loads(capfdbinary.readouterr().out)
    assert [record["compound"] for record in report["records"]] == ["GOOD", "SHORT"]


def test_reports_are_written_beside_the_table(
    registry: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    one, two = tmp_path / "report.json", tmp_path / "summary.md"
    assert main(["gate", str(registry), "--json", str(one), "--markdown", str(two)]) == 1
    assert json.loads(one.read_text(encoding="utf-8"))["counts"]["held"] == 1
    assert "the gate holds 1 record" in two.read_text(encoding="utf-8")
    assert "contradicted" in capsys.readouterr().out
    assert sorted(path.name for path in tmp_path.iterdir()) == ["registry", "report.json", "summary.md"]


def test_quiet_prints_nothing(registry: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["gate", str(registry), "--quiet"]) == 1
    assert capsys.readouterr() == ("", "")


def test_a_written_report_keeps_link_and_permissions(registry: Path, tmp_path: Path) -> None:
    real, link = tmp_path / "real.json", tmp_path / "link.json"
    real.write_text("old", encoding="utf-8")
    real.chmod(0o600)
    link.symlink_to(real)
    assert main(["gate", str(registry), "--quiet", "--json", str(link)]) == 1
    assert link.is_symlink()
    assert json.loads(real.read_text(encoding="utf-8"))["clear"] is False
    assert stat.S_IMODE(real.stat().st_mode) == 0o600


@pytest.mark.skipif(not hasattr(os, "geteuid") or os.geteuid() == 0, reason="root may write everywhere")
def test_a_folder_that_cannot_be_written_is_told_before_the_work(registry: Path, tmp_path: Path) -> None:
    locked = tmp_path / "locked"
    locked.mkdir(mode=0o500)
    assert main(["gate", str(registry), "--json", str(locked / "report.json")]) == 2


def test_options_override_the_registry(registry: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (registry / "registry.yaml").write_text("name: two\npolicy: registration\n", encoding="utf-8")
    pack = tmp_path / "pack"
    pack.mkdir()
    (pack / "always-said.yaml").write_text(OWN_RULE, encoding="utf-8")
    assert main(["gate", str(registry), "--policy", "bench", "--rules", str(pack)]) == 1
    out = capsys.readouterr().out
    assert "Policy bench: the gate holds 2 records" in out
    assert out.count(": error always-said: this rule speaks of every record") == 2


def test_deviations_clear_the_gate_until_they_expire(
    registry: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    report = tmp_path / "report.json"
    main(["gate", str(registry), "--quiet", "--json", str(report)])
    short = json.loads(report.read_text(encoding="utf-8"))["records"][1]
    marks = [f["fingerprint"] for f in short["findings"] if f["level"] == "error"]
    entry = "- {{compound: SHORT, fingerprint: '{}', reason: shown to a colleague, accepted_by: A. Chemist, {}}}\n"
    for expiry, status in (("2999-01-01", 0), ("2020-01-01", 1)):
        dates = f"accepted_on: '2019-01-01', expires_on: '{expiry}'"
        text = "deviations:\n" + "".join(entry.format(mark, dates) for mark in marks)
        (tmp_path / "deviations.yaml").write_text(text, encoding="utf-8")
        assert main(["gate", str(registry), "--deviations", str(tmp_path / "deviations.yaml")]) == status
    assert "accepted by deviation" in capsys.readouterr().out
