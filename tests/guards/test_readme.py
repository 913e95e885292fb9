"""README has exactly two set-up lines, and the script of CI runs the second one as it stands there."""

from __future__ import annotations

import re
from collections.abc import Callable
from pathlib import Path

import pytest

Plant = Callable[[dict[str, str]], Path]
COMMAND = re.compile(r"^    (\S.*)$", re.M)  # in the first section, commands are the indented lines
SET_UP = "python3 -m venv .venv && .venv/bin/pip install -q "


def commands(readme: str) -> list[str]:
    """The set-up lines of README: every indented line before the second heading."""
    return COMMAND.findall(readme.split("\n## ")[0])


def faults(readme: str) -> list[str]:
    """What is wrong with the set-up lines."""
    found = commands(readme)
    wrong = [f"no virtual environment of its own: {line}" for line in found if not line.startswith(SET_UP)]
    if len(found) != 2:
        wrong.append(f"{len(found)} commands")
    if not any(line.endswith("peakwitness gate registry_example") for line in found):
        wrong.append("nothing gates the example")
    if not any("pytest" in line for line in found):
        wrong.append("nothing runs the tests")
    return wrong


def drifted(root: Path) -> bool:
    """Whether .ci/run would run something else than README's test command, or write it out itself."""
    script = (root / ".ci" / "run").read_text(encoding="utf-8")
    pattern = re.search(r"sed -n 's/(.*)/\\1/p' README\.md", script)
    if pattern is None or "bin/pytest" in script or "-m pytest" in script:
        return True
    wanted = re.compile(pattern[1].replace(r"\(", "(").replace(r"\)", ")"), re.M)
    readme = (root / "README.md").read_text(encoding="utf-8")
    return wanted.findall(readme) != [line for line in commands(readme) if "pytest" in line]


def test_readme_has_two_set_up_lines(root: Path) -> None:
    assert faults((root / "README.md").read_text(encoding="utf-8")) == []


def test_ci_runs_the_test_command_of_readme(root: Path) -> None:
    assert not drifted(root)


def test_workflows_only_call_the_script(root: Path) -> None:
    for workflow in root.glob(".github/workflows/*.yml"):
        text = workflow.read_text(encoding="utf-8")
        assert re.findall(r"^\s*- run: (.*)$", text, re.M) == [".ci/run"]
        assert all(re.fullmatch(r"[0-9a-f]{40}", pin) for pin in re.findall(r"uses: \S+@(\S+)", text))


GATE = f"    {SET_UP}. && .venv/bin/peakwitness gate registry_example\n"
TEST = f"    {SET_UP}.[test] && .venv/bin/python -m pytest\n"


@pytest.mark.parametrize(
    ("readme", "fault"),
    [
        (GATE, "1 commands"),
        (GATE + TEST + TEST, "3 commands"),
        (GATE + "    pip install . && pytest\n", "no virtual environment of its own"),
        (TEST + TEST, "nothing gates the example"),
        (GATE + GATE, "nothing runs the tests"),
    ],
)
def test_a_wrong_readme_is_found(readme: str, fault: str) -> None:
    assert any(fault in one for one in faults(readme))


def test_a_right_readme_passes() -> None:
    assert faults(f"# x\n\n{GATE}\n{TEST}\n## Next\n\n    other\n") == []


def lost_paths(root: Path) -> list[str]:
    """Paths of the repository that a document names and that are not there."""
    found = []
    for document in ("README.md", "DEVELOPERS.md", "tests/bench/README.md", "registry_example/README.md"):
        text = (root / document).read_text(encoding="utf-8") if (root / document).is_file() else ""
        for path in re.findall(r"(?<![\w./-])(?:verify|rules|tests|registry_example)/[\w./-]*[\w/]", text):
            if not (root / path).exists() and "<" not in path:
                found.append(f"{document}: {path}")
    return found


def test_documents_name_only_what_is_there(root: Path) -> None:
    assert lost_paths(root) == []


def test_a_lost_path_is_found(plant: Plant) -> None:
    top = plant({"README.md": "run `python tests/bench/speed.py`, see verify/api.py.", "verify/api.py": ""})
    assert lost_paths(top) == ["README.md: tests/bench/speed.py"]


@pytest.mark.parametrize("script", ["pytest", r"sed -n 's/^    \(make .*\)$/\1/p' README.md", ".venv/bin/pytest"])
def test_a_drift_is_found(plant: Plant, script: str) -> None:
    assert drifted(plant({"README.md": GATE + TEST, ".ci/run": script}))
