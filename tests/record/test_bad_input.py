"""Every file that cannot be used ends in one located problem: no traceback, no long wait, no code run."""

from __future__ import annotations

import os
import tracemalloc
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from verify.record.loading import DEEPEST
from verify.record.source import read_file, read_source
from verify.record.stage import Surroundings, read_record

BOMB = b"a: &a [x,x,x,x,x,x,x,x,x,x]\n" + b"".join(
    b"%c: &%c [%s]\n" % (name, name, b",".join([b"*%c" % (name - 1)] * 10))
    for name in range(ord("b"), ord("k"))
)
DEEP = b"[" * (DEEPEST + 1) + b"]" * (DEEPEST + 1)
# Two chains of ten levels each: deeper than allowed only once the alias is expanded
DEEP_BY_ALIAS = b"a: &a " + b"[" * 15 + b"]" * 15 + b"\nb: " + b"[" * 15 + b"*a" + b"]" * 15

# content, code, line, column
UNUSABLE = {
    "empty": (b"", "record-empty", 1, 1),
    "blank": (b" \n\t\n", "record-empty", 1, 1),
    "only a comment": (b"# nothing\n", "record-empty", 1, 1),
    "only a mark of byte order": (b"\xef\xbb\xbf", "record-empty", 1, 1),
    "binary": (b"\x89PNG\r\n\x1a\n\0\0\0\rIHDR", "record-not-text", 1, 1),
    "UTF-16": ("compound: A".encode("utf-16"), "record-not-text", 1, 1),
    "Latin-1": ("name: é\n".encode("latin-1"), "record-not-text", 1, 7),
    "Latin-1 in a later line": ("name: a\nb: δé\n".encode()[:-2] + b"\xe9\n", "record-not-text", 2, 5),
    "control character": (b"a: 1\nb: x\x07", "record-not-text", 2, 5),
    "tab as indentation": (b"a:\n\tb: 1\n", "record-tab", 2, 1),
    "tab in a block": (b"a: |\n\tb\n", "record-tab", 2, 1),
    "open quote": (b'a: 1\nb: "x\nc: 2\n', "record-syntax", 2, 4),
    "open list": (b"a: [1, 2\n", "record-syntax", 1, 4),
    "open group": (b"a: {b: 1\n", "record-syntax", 1, 4),
    "colon in a plain text": (b"report: 1H NMR: 7.2 (s)\n", "record-syntax", 1, 15),
    "bracket SMILES without quotes": (b"smiles: [Na+].[Cl-]\n", "record-syntax", 1, 14),
    "backslash SMILES in double quotes": (b'smiles: "F/C=C\\F"\n', "record-syntax", 1, 15),
    "at sign": (b"a: @home\n", "record-syntax", 1, 4),
    "star": (b"a: *\n", "record-syntax", 1, 4),
    "wrong indentation": (b"a: 1\n  b: 2\n", "record-syntax", 2, 4),
    "line without a colon": (b"a: 1\nbc\nd: 2\n", "record-syntax", 3, 1),
    "text behind a quote": (b'a: "x" y\n', "record-syntax", 1, 8),
    "version of YAML": (b"%YAML 3.0\n---\na: 1\n", "record-syntax", 1, 1),
    "unknown block header": (b"a: |x\n  b\n", "record-syntax", 1, 5),
    "half an emoji": (b'a: "\\ud83d"\n', "record-syntax", 1, 7),
    "list as key": (b"? [a]\n: 1\n", "record-syntax", 1, 3),
    "group as key": (b"{a: 1}: 2\n", "record-syntax", 1, 1),
    "too deep": (DEEP, "record-too-deep", 1, DEEPEST + 1),
    "too deep by alias": (DEEP_BY_ALIAS, "record-too-deep", 2, 19),
    "bomb": (BOMB, "record-alias-bomb", 5, 17),
    "alias of itself": (b"a: &a [1, *a]\n", "record-alias-unknown", 1, 11),
    "alias of nothing": (b"a: *b\n", "record-alias-unknown", 1, 4),
    "two records": (b"a: 1\n---\na: 2\n", "record-many-documents", 2, 1),
    "code": (b"a: !!python/object/apply:os.system ['true']\n", "record-tag", 1, 4),
    "code by a short tag": (b"a: !os.system x\n", "record-tag", 1, 4),
    "tag that does not fit": (b"a: !!int x\n", "record-tag", 1, 4),
    "too many values": (b"[" + b"1," * 200_000 + b"]", "record-too-large", 1, 100_000),
    "too many keys twice": (b"a: 1\n" * 102, "record-many-faults", 102, 1),
    "2 MB": (b"a: " + b"x" * 2_000_000, "record-too-large", 1, 1),
    "a list": (b"- a\n- b\n", "record-not-a-record", 1, 1),
    "a text": (b"hello\n", "record-not-a-record", 1, 1),
    "null": (b"null\n", "record-not-a-record", 1, 1),
}


@pytest.mark.parametrize(("data", "code", "line", "column"), UNUSABLE.values(), ids=UNUSABLE)
def test_unusable_file_is_one_located_problem(data: bytes, code: str, line: int, column: int) -> None:
    reading = read_record(data, "r.yaml", Surroundings(folder_name="ARO-0001"))
    assert [problem.code for problem in reading.problems] == [code]
    problem = reading.problems[0]
    place = reading.places.place(problem.locus)
    assert place is not None
    assert (place.file, place.line, place.column) == ("r.yaml", line, column)
    assert problem.blocks == "record"
    assert problem.message
    assert problem.expected
    assert reading.record is None
    assert reading.compound == "ARO-0001"


def test_fifty_megabytes_are_refused_unread(tmp_path: Path) -> None:
    path = tmp_path / "record.yaml"
    with path.open("wb") as stream:
        stream.truncate(50_000_000)
    tracemalloc.start()
    source = read_file(str(path), "r.yaml")
    _, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    assert [problem.code for problem in source.problems] == ["record-too-large"]
    assert "50.0 MB" in source.problems[0].message
    assert peak < 1_000_000


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="the system has no named pipes")
def test_pipe_is_refused_without_waiting(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "record.yaml")
    source = read_file(str(tmp_path / "record.yaml"), "r.yaml")
    assert [problem.code for problem in source.problems] == ["record-not-a-file"]


def test_folder_and_missing_file_are_told_apart(tmp_path: Path) -> None:
    assert read_file(str(tmp_path), "r").problems[0].code == "record-not-a-file"
    assert read_file(str(tmp_path / "none"), "r").problems[0].code == "record-missing"


def test_link_is_not_followed(tmp_path: Path) -> None:
    (tmp_path / "secret").write_text("a: 1", encoding="utf-8")
    (tmp_path / "record.yaml").symlink_to(tmp_path / "secret")
    source = read_file(str(tmp_path / "record.yaml"), "r.yaml")
    assert [problem.code for problem in source.problems] == ["record-path-outside"]
    assert source.data is None


@pytest.mark.parametrize(
    "data", [b"\xef\xbb\xbfa: 1\r\nb: x\r\n", b"a: 1\rb: x\r", b"%YAML 1.2\n---\na: 1\nb: x\n...\n"]
)
def test_marks_and_line_ends_of_other_systems_are_read(data: bytes) -> None:
    source = read_source(data, "r.yaml")
    assert source.problems == ()
    assert source.data == {"a": 1, "b": "x"}


def test_json_is_read_as_it_stands() -> None:
    source = read_source(b'{"a":\t1,\r\n\t"b": "x\\/\\u03b4"}', "r.json")
    assert source.data == {"a": 1, "b": "x/δ"}


def test_second_of_two_keys_is_told_and_the_first_is_read() -> None:
    source = read_source(b'a: 1\nb: {c: 2, "c": 3}\n', "r.yaml")
    assert source.data == {"a": 1, "b": {"c": 2}}
    assert [problem.code for problem in source.problems] == ["record-duplicate-key"]
    place = source.places.place(source.problems[0].locus)
    assert (place.line, place.column, place.length) == (2, 12, 1)


def test_alias_repeats_its_value() -> None:
    source = read_source(b"a: &x {b: [1, 2]}\nc: *x\n*x : 1\n".replace(b"*x : 1\n", b""), "r.yaml")
    assert source.data == {"a": {"b": [1, 2]}, "c": {"b": [1, 2]}}


def test_merge_key_is_a_key_like_any_other() -> None:
    # source: YAML 1.2.2, section 10.3 (the core schema knows no merge type)
    source = read_source(b"a: &x {b: 1}\nc: {<<: *x}\n", "r.yaml")
    assert source.data == {"a": {"b": 1}, "c": {"<<": {"b": 1}}}


@settings(max_examples=150, deadline=None)
@given(st.binary(max_size=200))
def test_any_bytes_end_in_a_reading(data: bytes) -> None:
    reading = read_record(data, "r.yaml")
    assert reading.compound
    assert (reading.record is None) == any(problem.blocks == "record" for problem in reading.problems)
    assert all(reading.places.place(problem.locus) is not None for problem in reading.problems)


@settings(max_examples=150, deadline=None)
@given(st.text(st.sampled_from("ab:- \n\t{}[],&*!|>'\"#?%\\1."), max_size=80))
def test_any_text_that_looks_like_yaml_ends_in_a_reading(text: str) -> None:
    reading = read_record(text.encode("utf-8"), "r.yaml")
    assert reading.problems
    assert all(reading.places.place(problem.locus) is not None for problem in reading.problems)
