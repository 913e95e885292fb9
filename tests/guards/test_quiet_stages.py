"""A stage never prints, exits, or reads the clock, the network or the environment."""

from __future__ import annotations

import ast
from collections.abc import Callable
from pathlib import Path

import pytest

Plant = Callable[[dict[str, str]], Path]
STAGES = (
    "findings", "record", "peaklist", "structure", "environments", "expectations", "assignment", "rulebook", "pipeline",
)  # fmt: skip
# Chance is allowed where its seed is handed in: ``random.Random(seed)``, never the functions of the module.
CALLS = {"print", "input", "exit", "quit", "breakpoint"}
ATTRIBUTES = {"today", "now", "utcnow", "environ", "getenv", "stdout", "stderr"}
MODULES = {"time", "socket", "urllib", "http", "subprocess", "logging", "requests", "httpx"}


def loud(root: Path) -> list[str]:
    """What the files of the stages do that only the doors may do."""
    found: list[str] = []
    for stage in STAGES:
        for path in sorted(root.glob(f"verify/{stage}/**/*.py")):
            for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
                at = f"{path.relative_to(root).as_posix()}:{getattr(node, 'lineno', 0)}"
                found.extend(f"{at}: {word}" for word in _offences(node))
    return found


def _offences(node: ast.AST) -> list[str]:
    if isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and node.func.id in CALLS:
        return [node.func.id]
    if isinstance(node, ast.Attribute) and node.attr in ATTRIBUTES and not _is_own(node.value):
        return [ast.unparse(node)]
    if isinstance(node, ast.Import):
        return [alias.name for alias in node.names if alias.name.split(".")[0] in MODULES]
    if isinstance(node, ast.ImportFrom) and (node.module or "").split(".")[0] in MODULES:
        return [str(node.module)]
    return _chance(node)


def _chance(node: ast.AST) -> list[str]:
    """Calls of the module ``random`` that draw from a seed nobody gave."""
    if isinstance(node, ast.Call) and isinstance(node.func, ast.Attribute) and ast.unparse(node.func.value) == "random":
        return [] if node.func.attr == "Random" and node.args else [ast.unparse(node.func)]
    if isinstance(node, ast.ImportFrom) and node.module == "random":
        return [f"random.{alias.name}" for alias in node.names if alias.name != "Random"]
    return []


def _is_own(value: ast.expr) -> bool:
    """``settings.today`` is a date handed in; ``date.today`` reads the clock."""
    words = ast.unparse(value).split(".")[-1]
    return words not in ("date", "datetime", "os", "sys")


def test_stages_keep_quiet(root: Path) -> None:
    assert loud(root) == []


@pytest.mark.parametrize(
    ("line", "word"),
    [
        ("print('x')", "print"),
        ("exit(1)", "exit"),
        ("day = date.today()", "date.today"),
        ("now = datetime.datetime.now()", "datetime.datetime.now"),
        ("home = os.environ['HOME']", "os.environ"),
        ("sys.stderr.write('x')", "sys.stderr"),
        ("import time", "time"),
        ("x = random.choice([1, 2])", "random.choice"),
        ("x = random.Random()", "random.Random"),
        ("from random import shuffle", "random.shuffle"),
        ("from urllib.request import urlopen", "urllib.request"),
    ],
)
def test_a_loud_stage_is_found(plant: Plant, line: str, word: str) -> None:
    assert loud(plant({"verify/record/room.py": f"{line}\n"})) == [f"verify/record/room.py:1: {word}"]


def test_the_doors_may_print_and_a_date_or_a_seed_may_be_handed_in(plant: Plant) -> None:
    top = plant({
        "verify/cli/gate.py": "print('x')\n",
        "verify/rulebook/stage.py": "x = settings.today\n",
        "verify/pipeline/planting.py": "import random\nx = random.Random(7)\n",
    })  # fmt: skip
    assert loud(top) == []
