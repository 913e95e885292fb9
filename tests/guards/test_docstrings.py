"""Every module and every public name says what it is for, in a sentence that is not its signature."""

from __future__ import annotations

import ast
import re
from collections.abc import Callable, Iterator
from pathlib import Path

import pytest

Plant = Callable[[dict[str, str]], Path]
Named = ast.FunctionDef | ast.AsyncFunctionDef | ast.ClassDef


def _public(node: ast.Module | ast.ClassDef, prefix: str = "") -> Iterator[tuple[str, Named]]:
    for child in node.body:
        if isinstance(child, Named) and not child.name.startswith("_"):
            yield prefix + child.name, child
            if isinstance(child, ast.ClassDef):
                yield from _public(child, f"{child.name}.")


def _words(text: str) -> set[str]:
    return set(re.findall(r"[a-z0-9]+", text.lower()))


def silent(root: Path) -> list[str]:
    """Modules and public names without a docstring, or with one that only repeats the name."""
    found = []
    for path in sorted(root.glob("verify/**/*.py")):
        tree = ast.parse(path.read_text(encoding="utf-8"))
        here = path.relative_to(root)
        if not ast.get_docstring(tree):
            found.append(f"{here}: module")
        for name, node in _public(tree):
            docstring = ast.get_docstring(node)
            if not docstring:
                found.append(f"{here}: {name}")
            elif _words(docstring) <= _words(name.replace("_", " ")):
                found.append(f"{here}: {name} is only repeated")
    return found


def busy_init_files(root: Path) -> list[str]:
    """``__init__.py`` files that hold more than one docstring; the package's own hands out the public names."""
    found = []
    for path in sorted(root.glob("verify/*/**/__init__.py")):
        body = ast.parse(path.read_text(encoding="utf-8")).body
        if len(body) != 1 or not isinstance(body[0], ast.Expr):
            found.append(path.relative_to(root).as_posix())
    return found


def test_everything_public_says_what_it_is_for(root: Path) -> None:
    assert silent(root) == []


def test_init_files_hold_one_docstring(root: Path) -> None:
    assert busy_init_files(root) == []


@pytest.mark.parametrize(
    ("text", "offence"),
    [
        ("x = 1\n", "module"),
        ('"""Words."""\ndef shift():\n    return 1\n', "shift"),
        ('"""Words."""\nclass Signal:\n    """What was read at one place."""\n    def width(self):\n        return 1\n',
         "Signal.width"),
        ('"""Words."""\ndef signal_width():\n    """Signal width."""\n', "signal_width is only repeated"),
    ],
)  # fmt: skip
def test_a_silent_name_is_found(plant: Plant, text: str, offence: str) -> None:
    assert silent(plant({"verify/room.py": text})) == [f"verify/room.py: {offence}"]


def test_private_names_may_be_silent(plant: Plant) -> None:
    text = '"""Words."""\ndef _helper():\n    return 1\nclass _Own:\n    def told(self):\n        return 1\n'
    assert silent(plant({"verify/room.py": text})) == []


def test_a_busy_init_file_is_found(plant: Plant) -> None:
    top = plant({"verify/__init__.py": "import os\n", "verify/room/__init__.py": '"""Words."""\nimport os\n'})
    assert busy_init_files(top) == ["verify/room/__init__.py"]
