"""Every shipped schema is a valid JSON Schema 2020-12, names itself, and stands where the wheel takes it from."""

from __future__ import annotations

import json
from collections.abc import Callable
from pathlib import Path

import pytest
from jsonschema import Draft202012Validator
from jsonschema.exceptions import SchemaError

Plant = Callable[[dict[str, str]], Path]
DIALECT = "https://json-schema.org/draft/2020-12/schema"


def wrong_schemas(root: Path) -> list[str]:
    """What is wrong with each schema file of the package."""
    found = []
    for path in sorted(root.glob("verify/**/*.json")):
        schema = json.loads(path.read_text(encoding="utf-8"))
        name = path.relative_to(root).as_posix()
        if schema.get("$schema") != DIALECT:
            found.append(f"{name}: not 2020-12")
        if not schema.get("title"):
            found.append(f"{name}: no title")
        try:
            Draft202012Validator.check_schema(schema)
        except SchemaError as error:
            found.append(f"{name}: {error.json_path}")
    return found


def test_schemas_are_valid(root: Path) -> None:
    assert wrong_schemas(root) == []


def test_the_schemas_that_are_promised_are_there(root: Path) -> None:
    names = {path.name.removesuffix(".schema.json") for path in root.glob("verify/**/*.schema.json")}
    assert {"record", "registry", "rule", "policy", "deviations", "report"} <= names


@pytest.mark.parametrize(
    ("schema", "fault"),
    [
        ({"$schema": DIALECT, "title": "x", "type": "list"}, "$.type"),
        ({"$schema": "http://json-schema.org/draft-07/schema#", "title": "x"}, "not 2020-12"),
        ({"$schema": DIALECT}, "no title"),
    ],
)
def test_a_wrong_schema_is_found(plant: Plant, schema: dict[str, str], fault: str) -> None:
    top = plant({"verify/record/x.schema.json": json.dumps(schema)})
    assert wrong_schemas(top) == [f"verify/record/x.schema.json: {fault}"]
