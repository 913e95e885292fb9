"""Unquoted values have the types of the YAML 1.2 core schema, and no others."""

from __future__ import annotations

import pytest

from verify.record.scalars import resolve_plain
from verify.record.source import read_source

# source: YAML 1.2.2, section 10.3.2 (tag resolution table) and example 10.9
CORE = {
    "null": None, "Null": None, "NULL": None, "~": None, "": None,
    "true": True, "True": True, "TRUE": True, "false": False, "False": False, "FALSE": False,
    "0": 0, "0o7": 7, "0x3A": 58, "-19": -19, "+12": 12, "007": 7, "0777": 777,
    "0.": 0.0, "-0.0": -0.0, ".5": 0.5, "12e03": 12000.0, "-2E+05": -200000.0, "1e5": 1e5, "7.26": 7.26,
}  # fmt: skip

# Types of YAML 1.1 that 1.2 dropped, and near misses. source: YAML 1.2.2, sections 1.2 and 10.3.2
TEXT_IN_CORE = [
    "NO", "No", "no", "yes", "Yes", "on", "Off", "y", "n", "12:30", "190:20:30", "1:1.5", "1_000", "0b101",
    "2026-12-01", "2026-12-01T10:00:00Z", "<<", "=", "tRUE", "nULL", "1e", "e5", "0x", "0o8", "-", "+", ".",
    "-.", "1.2.3", "1H", "13C", "7.26-7.30", "0xZZ", "--1", "1 000", "1,5", "½",
]  # fmt: skip


@pytest.mark.parametrize(("text", "value"), CORE.items())
def test_core_schema(text: str, value: object) -> None:
    found = resolve_plain(text)
    assert found == value
    assert type(found) is type(value)


@pytest.mark.parametrize("text", TEXT_IN_CORE)
def test_what_the_core_schema_leaves_as_text(text: str) -> None:
    assert resolve_plain(text) == text


@pytest.mark.parametrize("text", [".inf", "-.Inf", ".nan", "1e999", "9" * 400])
def test_numbers_that_no_quantity_has_stay_text(text: str) -> None:
    """Narrower than the core schema on purpose: no value of a record can be infinite or no number."""
    assert resolve_plain(text) == text


def test_quoted_and_tagged_values() -> None:
    source = read_source(
        b"a: \"1\"\nb: 'true'\nc: !!str 1\nd: ! 1\ne: !!float 1\nf: |-\n  1\ng: !!null\n", "r.yaml"
    )
    # a plain 1 under !!float keeps its integer type: what counts is that it is a number
    assert source.data == {"a": "1", "b": "true", "c": "1", "d": "1", "e": 1, "f": "1", "g": None}


def test_keys_stay_text() -> None:
    source = read_source(b"{1H: a, 13: b, N: c, NO: d, null: e, true: f, 1.0: g}\n", "r.yaml")
    assert isinstance(source.data, dict)
    assert list(source.data) == ["1H", "13", "N", "NO", "null", "true", "1.0"]
