"""Imports run one way: no cycles, and the contracts of pyproject.toml do fail when they are broken."""

from __future__ import annotations

import ast
import subprocess
import sys
import tomllib
from collections.abc import Callable
from pathlib import Path

import pytest

Plant = Callable[[dict[str, str]], Path]
EMPTY = {
    f"verify/{room}/__init__.py": '"""Room."""\n'
    for room in (
        "cli", "engine", "report", "pipeline", "sources", "rulebook", "assignment", "expectations", "environments",
        "structure", "record", "peaklist", "findings",
    )
}  # fmt: skip
PARTS = ("__init__", "api", "compiled", "resources", "errors", "version")
EMPTY |= {f"verify/{name}.py": '"""Part."""\n' for name in PARTS}


def imports(root: Path) -> dict[str, set[str]]:
    """For each module of the package the modules it imports, in functions and for types as well."""
    names = {_module(path, root): path for path in root.glob("verify/**/*.py")}
    graph = {}
    for name, path in names.items():
        seen: set[str] = set()
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Import):
                seen.update(alias.name for alias in node.names)
            elif isinstance(node, ast.ImportFrom) and node.module and not node.level:
                seen.update(f"{node.module}.{alias.name}" for alias in node.names)
                seen.add(node.module)
        graph[name] = {one for one in seen if one in names and one != name}
    return graph


def _module(path: Path, root: Path) -> str:
    parts = path.relative_to(root).with_suffix("").parts
    return ".".join(parts[:-1] if parts[-1] == "__init__" else parts)


def cycle(graph: dict[str, set[str]]) -> list[str]:
    """The modules of one import cycle, or nothing: what is left when all that import nothing left are taken away."""
    left = {name: set(seen) for name, seen in graph.items()}
    while True:
        free = {name for name, seen in left.items() if not seen}
        if not free:
            return sorted(left)
        left = {name: seen - free for name, seen in left.items() if name not in free}


def test_no_import_cycle(root: Path) -> None:
    graph = imports(root)
    doors = {"verify"}  # the package's own file loads the public names when they are first used
    assert cycle({name: seen - doors for name, seen in graph.items() if name not in doors}) == []


@pytest.mark.parametrize("lazy", ["import verify.a", "def f():\n    from verify import a", "from verify.a import x"])
def test_a_cycle_is_found(plant: Plant, lazy: str) -> None:
    top = plant({"verify/a.py": "import verify.b\n", "verify/b.py": f"{lazy}\n", "verify/c.py": "x = 1\n"})
    assert cycle(imports(top)) == ["verify.a", "verify.b"]


def _contracts_hold(top: Path, root: Path) -> tuple[bool, str]:
    contracts = (root / "pyproject.toml").read_text(encoding="utf-8")
    (top / "pyproject.toml").write_text(contracts, encoding="utf-8")
    call = "from importlinter.cli import lint_imports_command; lint_imports_command()"
    command = [sys.executable, "-c", call, "--no-cache"]
    done = subprocess.run(command, cwd=top, capture_output=True, text=True, timeout=120, check=False)
    return done.returncode == 0, done.stdout + done.stderr


def test_the_contracts_hold_for_an_orderly_package(plant: Plant, root: Path) -> None:
    held, output = _contracts_hold(plant(EMPTY), root)
    assert held, output


@pytest.mark.parametrize(
    ("file", "line"),
    [
        ("structure/room", "import verify.rulebook"),
        ("structure/room", "def f():\n    import verify.assignment"),
        ("record/room", "import verify.peaklist"),
        ("expectations/room", "import verify.peaklist"),
        ("rulebook/room", "import rdkit.Chem"),
        ("report/room", "from rdkit import Chem"),
        ("expectations/room", "import scipy.optimize"),
        ("report/room", "import pandas"),
    ],
)
def test_the_contracts_find_a_breach(plant: Plant, root: Path, file: str, line: str) -> None:
    top = plant(EMPTY | {f"verify/{file}.py": f'"""Breach."""\n{line}\n'})
    held, output = _contracts_hold(top, root)
    assert not held
    assert "BROKEN" in output, output


def test_every_room_has_its_layer(root: Path) -> None:
    table = tomllib.loads((root / "pyproject.toml").read_text(encoding="utf-8"))
    layers = " | ".join(table["tool"]["importlinter"]["contracts"][0]["layers"]).split(" | ")
    rooms = {f"verify.{path.parent.name}" for path in root.glob("verify/*/__init__.py")}
    files = {f"verify.{path.stem}" for path in root.glob("verify/*.py") if not path.stem.startswith("__")}
    assert set(layers) == rooms | files
