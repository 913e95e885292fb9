"""The top level holds exactly what DEVELOPERS.md tells, and tracked texts name no machine and no one's registry."""

from __future__ import annotations

import re
import shutil
import subprocess
from collections.abc import Callable, Iterable
from pathlib import Path

import pytest

Plant = Callable[[dict[str, str]], Path]
NAMES = {
    "README.md", "DEVELOPERS.md", "LICENSE", "CHANGELOG.md", "pyproject.toml", "verify", "rules", "tests",
    "registry_example", ".github", ".ci", ".gitignore",
}  # fmt: skip
# Spelt in pieces, so that this file does not name them either.
FOREIGN = re.compile(
    "|".join([
        r"(?<![\w.])/(?:work|root|tmp|home/\w+|Users/\w+)/[\w.]", r"[A-Z]:\\Users",
        r"py" r"pi\.org", r"python" r"hosted", r"npm" r"js\.(?:org|com)", r"deb" r"ian\.(?:org|net)", r"crates\." r"io",
        r"api[_-]?key\s*[:=]", r"BEGIN [A-Z ]*PRIVATE KEY",
    ])
)  # fmt: skip


def tracked(root: Path) -> list[Path]:
    """The files that git tracks; the guards of this file are skipped where there is no git."""
    if shutil.which("git") is None or not (root / ".git").exists():
        pytest.skip("not a git checkout")
    done = subprocess.run(["git", "ls-files", "-z"], cwd=root, capture_output=True, text=True, timeout=60, check=True)
    return [Path(name) for name in done.stdout.split("\0") if name]


def strangers(files: Iterable[Path]) -> set[str]:
    """Top-level names that do not belong there, or that are missing."""
    return {path.parts[0] for path in files} ^ NAMES


def foreign(root: Path, files: Iterable[Path]) -> list[str]:
    """Lines that name a path of some machine, the host of a package registry, or a secret."""
    found: list[str] = []
    for path in files:
        if not (root / path).is_file():  # deleted, not yet committed
            continue
        lines = (root / path).read_bytes().decode("utf-8", errors="replace").splitlines()
        found.extend(f"{path}:{number}" for number, line in enumerate(lines, 1) if FOREIGN.search(line))
    return found


def test_top_level_is_as_told(root: Path) -> None:
    assert strangers(tracked(root)) == set()


def test_no_text_names_a_machine(root: Path) -> None:
    assert foreign(root, tracked(root)) == []


def test_a_stranger_and_a_gap_are_found() -> None:
    files = [Path(name) for name in NAMES - {"LICENSE"}] + [Path("notes.txt"), Path("scripts/run.sh")]
    assert strangers(files) == {"LICENSE", "notes.txt", "scripts"}


@pytest.mark.parametrize(
    "text",
    ["cd /wo" "rk/main", "see /ro" "ot/.cache", "in /ho" "me/anna/data", "https://py" "pi.org/simple", "api_" "key=1"],
)  # fmt: skip
def test_a_foreign_text_is_found(plant: Plant, text: str) -> None:
    assert foreign(plant({"a.md": f"fine\n{text}\n"}), [Path("a.md")]) == ["a.md:2"]


@pytest.mark.parametrize("text", ["../shared/data", "/structure/smiles", "compounds/root/x", "https://example.org/work/1"])
def test_other_paths_are_left_alone(plant: Plant, text: str) -> None:
    assert foreign(plant({"a.md": text}), [Path("a.md")]) == []
