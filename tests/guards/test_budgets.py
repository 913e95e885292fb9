"""Files and functions stay short enough to be read at one sitting."""

from __future__ import annotations

import ast
from collections.abc import Callable, Iterator, Sequence
from pathlib import Path

Plant = Callable[[dict[str, str]], Path]
FILE_LINES = (150, 240, 300)  # median, 90th percentile, largest
FUNCTION_LINES = (9, 25, 50)
MEASURES = ("median", "90th percentile", "largest")


def python_files(root: Path) -> list[Path]:
    """The Python files of the package and of the tests."""
    return sorted([*root.glob("verify/**/*.py"), *root.glob("tests/**/*.py")])


def functions(path: Path) -> Iterator[tuple[str, int]]:
    """Name and number of lines of every function and method of a file."""
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef):
            yield node.name, (node.end_lineno or node.lineno) - node.lineno + 1


def over_ceiling(root: Path) -> list[str]:
    """Every file and function that is too long."""
    found = []
    for path in python_files(root):
        lines = len(path.read_text(encoding="utf-8").splitlines())
        if lines > FILE_LINES[2]:
            found.append(f"{path.relative_to(root)}: {lines} lines")
        for name, length in functions(path):
            if length > FUNCTION_LINES[2]:
                found.append(f"{path.relative_to(root)}: {name} has {length} lines")
    return found


def over_spread(lengths: Sequence[int], budget: tuple[int, int, int]) -> list[str]:
    """Which of median, 90th percentile and largest lie over the budget."""
    ordered = sorted(lengths)
    at = (ordered[len(ordered) // 2], ordered[int(len(ordered) * 0.9)], ordered[-1])
    return [
        f"{words} is {is_now}, budget {most}"
        for words, is_now, most in zip(MEASURES, at, budget, strict=True)
        if is_now > most
    ]


def test_no_file_or_function_is_too_long(root: Path) -> None:
    assert over_ceiling(root) == []


def test_files_of_the_package_keep_their_budget(root: Path) -> None:
    lengths = [len(path.read_text(encoding="utf-8").splitlines()) for path in root.glob("verify/**/*.py")]
    assert over_spread(lengths, FILE_LINES) == []


def test_functions_of_the_package_keep_their_budget(root: Path) -> None:
    lengths = [length for path in root.glob("verify/**/*.py") for _, length in functions(path)]
    assert over_spread(lengths, FUNCTION_LINES) == []


def test_a_long_file_and_a_long_function_are_found(plant: Plant) -> None:
    long_function = "class Room:\n    def talk(self):\n" + "        x = 1\n" * 50
    top = plant({
        "verify/long.py": "x = 1\n" * 301,
        "verify/room.py": long_function,
        "tests/test_just.py": "x = 1\n" * 300,
    })  # fmt: skip
    assert over_ceiling(top) == ["verify/long.py: 301 lines", "verify/room.py: talk has 51 lines"]


def test_a_spread_over_budget_is_found() -> None:
    assert over_spread([9] * 9 + [50], FUNCTION_LINES) == ["90th percentile is 50, budget 25"]
    assert over_spread([10] * 10, FUNCTION_LINES) == ["median is 10, budget 9"]
    assert over_spread([1] * 19 + [51], FUNCTION_LINES) == ["largest is 51, budget 50"]
