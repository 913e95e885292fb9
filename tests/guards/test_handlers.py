"""A fault is caught broadly in three places only: where a rule runs, where a record runs, and at the command line."""

from __future__ import annotations

import ast
from collections.abc import Callable
from pathlib import Path

import pytest

Plant = Callable[[dict[str, str]], Path]
ALLOWED = ["verify/cli/main.py", "verify/engine/work.py", "verify/rulebook/stage.py"]
BROAD = ("Exception", "BaseException")


def broad_handlers(root: Path) -> list[str]:
    """The file of each handler that catches everything and keeps it, once for each handler."""
    found = []
    for path in sorted(root.glob("verify/**/*.py")):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.ExceptHandler) and _is_broad(node.type) and not _passes_on(node):
                found.append(path.relative_to(root).as_posix())
            elif isinstance(node, ast.Call) and ast.unparse(node.func).endswith("suppress"):
                found.extend(path.relative_to(root).as_posix() for given in node.args if _is_broad(given))
    return found


def _passes_on(handler: ast.ExceptHandler) -> bool:
    """Whether it only tidies up and raises the same fault again."""
    last = handler.body[-1]
    return isinstance(last, ast.Raise) and last.exc is None


def _is_broad(caught: ast.expr | None) -> bool:
    if caught is None:
        return True
    several = caught.elts if isinstance(caught, ast.Tuple) else [caught]
    return any(ast.unparse(one).split(".")[-1] in BROAD for one in several)


def test_exactly_three_handlers_are_broad(root: Path) -> None:
    assert broad_handlers(root) == ALLOWED


@pytest.mark.parametrize(
    "handler",
    ["except:", "except Exception:", "except (ValueError, Exception):", "except builtins.BaseException as e:"],
)
def test_a_broad_handler_is_found(plant: Plant, handler: str) -> None:
    top = plant({"verify/room.py": f"try:\n    x = 1\n{handler}\n    pass\n"})
    assert broad_handlers(top) == ["verify/room.py"]


def test_a_broad_suppression_is_found(plant: Plant) -> None:
    top = plant({"verify/room.py": "with contextlib.suppress(Exception):\n    x = 1\n"})
    assert broad_handlers(top) == ["verify/room.py"]


@pytest.mark.parametrize(
    "handler", ["except (ValueError, KeyError):\n    pass", "except Exception:\n    x = 2\n    raise"]
)
def test_a_narrow_handler_and_a_tidy_one_are_left_alone(plant: Plant, handler: str) -> None:
    top = plant({"verify/room.py": f"try:\n    x = 1\n{handler}\n"})
    assert broad_handlers(top) == []
