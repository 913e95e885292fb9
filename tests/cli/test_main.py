"""The command line itself: ways in, exit statuses, wrong calls, faults, interrupted output."""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path

import pytest

from verify.cli import gate
from verify.cli.main import COMMANDS, main
from verify.version import VERSION

ROOT = Path(__file__).parents[2]
SLOW = ("rdkit", "numpy", "scipy", "pandas", "yaml", "rich", "jsonschema", "verify.engine.run", "verify.api")


def _run(*arguments: str) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, *arguments]
    return subprocess.run(command, cwd=ROOT, capture_output=True, text=True, timeout=120, check=False)


@pytest.mark.parametrize("module", ["verify", "verify.cli.main"])
def test_both_modules_are_the_command(module: str) -> None:
    done = _run("-m", module, "--version")
    assert (done.returncode, done.stdout.strip(), done.stderr) == (0, f"peakwitness {VERSION}", "")


def test_help_lists_every_command_and_loads_nothing_slow() -> None:
    code = (
        "import sys\nfrom verify.cli.main import main\n"
        "try:\n    main(['--help'])\nexcept SystemExit as end:\n    assert not end.code\n"
        f"print([name for name in {SLOW!r} if name in sys.modules])"
    )
    done = _run("-c", code)
    assert done.returncode == 0, done.stderr
    assert all(f"\n    {name}" in done.stdout for name in COMMANDS)
    assert done.stdout.splitlines()[-1] == "[]"


@pytest.mark.parametrize("command", COMMANDS)
def test_every_command_has_help(command: str, capsys: pytest.CaptureFixture[str]) -> None:
    with pytest.raises(SystemExit) as end:
        main([command, "--help"])
    assert end.value.code == 0
    assert f"usage: peakwitness {command}" in capsys.readouterr().out


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["gat"], 'there is no command "gat"; did you mean gate? (expected gate, examine'),
        (["gate"], "the following arguments are required: REGISTRY"),
        (["gate", "x", "--jsn", "y"], "did you mean --json?"),
        (["gate", "x", "--workers", "many"], "'many' is no number of workers; expected 0 to 256"),
        (["gate", "x", "--workers", "-1"], "--workers"),
        (["--mood"], "unrecognized arguments: --mood"),
        (["examine", "--smiles", "CCO", "--mhz", "0", "--h1", "x"], "'0' is no 1H frequency in MHz"),
        (["examine", "--h1", "x"], "no structure is given; expected --smiles"),
        (["examine", "--smiles", "CCO"], "no list is given; expected --h1"),
        (["examine", "--smiles", "CCO", "--inchi", "x", "--h1", "x"], "not allowed with argument"),
        (["examine", "no-such-record.yaml"], 'there is no file "no-such-record.yaml"'),
        (["rulebook", "water-listd"], "there is no rule 'water-listd'; did you mean 'water-listed'"),
        (["gate", "no-such-folder"], 'there is no "no-such-folder"; give the folder of a registry'),
        (["gate", "pyproject.toml"], "is a file; give the folder of a registry"),
        (["gate", "registry_example", "--policy", "registratoin"], "did you mean 'registration'"),
        (["gate", "registry_example", "--policy", "none.yaml"], "none.yaml"),
        (["gate", "registry_example", "--rules", "no-pack"], "no-pack: there is no such folder of rules"),
        (["gate", "registry_example", "--deviations", "no.yaml"], "no.yaml: cannot be read"),
        (["gate", "registry_example", "--json", "no/such/folder.json"], "there is no folder no/such"),
        (["gate", "registry_example", "--json", "tests"], "tests: is a folder"),
        (["gate", "registry_example", "--json", "-", "--markdown", "-"], "give a file for all but one"),
    ],
)
def test_wrong_calls_end_2_and_say_what_to_do(
    arguments: list[str], words: str, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(ROOT)
    assert main(arguments) == 2
    out, error = capsys.readouterr()
    assert words in error
    assert error.startswith("peakwitness: ")
    assert "Traceback" not in error
    assert out == ""


def test_no_command_shows_help_and_ends_2(capsys: pytest.CaptureFixture[str]) -> None:
    assert main([]) == 2
    assert "usage: peakwitness" in capsys.readouterr().out


@pytest.mark.parametrize("shown", [False, True])
def test_a_fault_of_the_tool_is_one_line_and_ends_3(
    shown: bool, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    def broken(_: object) -> int:
        raise ValueError("two\nlines")

    monkeypatch.setattr(gate, "run", broken)
    assert main(["gate", "x", *(["--traceback"] if shown else [])]) == 3
    error = capsys.readouterr().err
    assert "peakwitness: fault inside the tool: ValueError: two lines\nPlease report it" in error
    assert ("Traceback" in error) is shown


def test_ctrl_c_ends_130_without_a_traceback(
    capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    def stopped(_: object) -> int:
        raise KeyboardInterrupt

    monkeypatch.setattr(gate, "run", stopped)
    assert main(["gate", "x"]) == 130
    assert capsys.readouterr().err == "peakwitness: stopped; no report was written\n"


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="needs pipes of a POSIX system")
@pytest.mark.parametrize(("arguments", "status"), [(["rulebook"], 0), (["gate", "registry_example/incoming"], 1)])
def test_a_reader_that_goes_away_changes_no_status(arguments: list[str], status: int) -> None:
    read, write = os.pipe()
    command = [sys.executable, "-m", "verify", *arguments]
    process = subprocess.Popen(command, cwd=ROOT, stdout=write, stderr=subprocess.PIPE)
    os.close(write)
    os.close(read)
    _, error = process.communicate(timeout=60)
    assert (process.returncode, error) == (status, b"")


def test_version_is_that_of_the_distribution() -> None:
    import tomllib

    project = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    assert project["version"] == VERSION
    assert project["scripts"] == {"peakwitness": "verify.cli.main:main"}
