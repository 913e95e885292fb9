"""What README shows is what the tool prints, and its Python lines run. Numbers may drift with the tables, words not."""

from __future__ import annotations

import re
import shlex
import subprocess
import sys
from pathlib import Path

import pytest

from verify.cli.main import COMMANDS

ROOT = Path(__file__).parents[2]
README = (ROOT / "README.md").read_text(encoding="utf-8")
SHOWN = re.findall(r"```console\n\$ (peakwitness .*?)\n(.*?)```", README, re.S)
PYTHON = re.search(r"```python\n(.*?)```", README, re.S)


def _words(text: str) -> list[str]:
    """The words of an output without its numbers, fingerprints and widths."""
    return re.sub(r"\([0-9a-f]{16}\)|\d+(\.\d+)?", "#", text).split()


def test_readme_shows_a_finding() -> None:
    assert SHOWN


@pytest.mark.parametrize(("command", "output"), SHOWN, ids=[command[:40] for command, _ in SHOWN])
def test_readme_shows_what_the_tool_prints(command: str, output: str) -> None:
    arguments = shlex.split(command)[1:]
    done = subprocess.run(
        [sys.executable, "-m", "verify.cli.main", *arguments],
        cwd=ROOT, capture_output=True, text=True, encoding="utf-8", timeout=120, check=False,
    )  # fmt: skip
    assert done.stderr == ""
    assert _words(done.stdout) == _words(output)


def test_readme_lists_every_command() -> None:
    listed = set(re.findall(r"^\| `peakwitness (\w+)", README, re.M))
    assert listed == set(COMMANDS)


def test_the_python_lines_of_readme_run() -> None:
    assert PYTHON is not None
    names: dict[str, object] = {}
    lines = [line for line in PYTHON[1].splitlines() if "frame" not in line]
    exec(compile("\n".join(lines), "README.md", "exec"), names)
    assert getattr(names["result"], "verdict", None) == "consistent"
