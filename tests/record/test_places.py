"""Every character of every scalar style is found again in the file at the place that the map gives for it."""

from __future__ import annotations

import re
from pathlib import Path

import pytest
import yaml
from hypothesis import given, settings
from hypothesis import strategies as st

import verify.record.loading
from verify.findings.location import Locus, Place, Span
from verify.record.source import Source, read_source

# Printable in YAML (1.2.2, section 5.1), with what makes scalars difficult drawn often
_HARD = st.sampled_from(" \t\n:#'\"\\-,[]{}&*!|>%@`?~δ–é😀0171.\x85\u2028")
_ANY = st.characters(codec="utf-8", exclude_categories=("Cs", "Cc"), exclude_characters="\ufeff\ufffe\uffff")
TEXTS = st.text(st.one_of(_HARD, _ANY), max_size=60)
STYLES = st.sampled_from([None, "'", '"', "|", ">"])
LINES = st.lists(st.text(st.sampled_from(" ab#:'\"-\t\x85\u2028"), max_size=6), min_size=1, max_size=8)
LOADER = getattr(yaml, "CSafeLoader", yaml.SafeLoader)  # the parser that the tool itself uses
ESCAPES = {
    "0": "\0", "a": "\a", "b": "\b", "t": "\t", "n": "\n", "v": "\v", "f": "\f", "r": "\r", "e": "\x1b",
    " ": " ",    '"': '"', "/": "/", "\\": "\\", "N": "\x85", "_": "\xa0", "L": "\u2028", "P": "\u2029",
}  # fmt: skip  # source: YAML 1.2.2, section 5.7


def _lines(text: str) -> list[str]:
    return re.split("(?<=\r\n)|(?<=\n)|(?<=\r)(?!\n)", text)


def _slice(text: str, place: Place) -> str:
    """The characters of a place, taken from the file's text by line and column alone."""
    lines = _lines(text)
    if place.line == place.end_line:
        return lines[place.line - 1][place.column - 1 : place.end_column - 1]
    first, last = lines[place.line - 1][place.column - 1 :], lines[place.end_line - 1][: place.end_column - 1]
    return first + "".join(lines[place.line : place.end_line - 1]) + last


def _means(raw: str, character: str) -> bool:
    """Whether what is written there reads as this character."""
    if raw == character:
        return True
    if raw.startswith("\\") and len(raw) > 1:
        code = chr(int(raw[2:], 16)) if raw[1] in "xuU" else ESCAPES.get(raw[1])
        return code == character
    if raw == "''":
        return character == "'"
    return raw in ("\n", "\r\n", "\r", "\x85") and character in " \n"


def _check(source: Source, text: str, pointer: str, value: str) -> None:
    """Each character stands where the map says, in order, without overlap; a span covers its characters."""
    behind = (0, 0)
    for position, character in enumerate(value):
        place = source.places.place(Locus(pointer, Span(position, position + 1)))
        assert _means(_slice(text, place), character), (position, character, place)
        assert (place.line, place.column) >= behind
        behind = (place.end_line, place.end_column)
    if value:
        first = source.places.place(Locus(pointer, Span(0, 1)))
        whole = source.places.place(Locus(pointer, Span(0, len(value))))
        assert (whole.line, whole.column) == (first.line, first.column)
        assert (whole.end_line, whole.end_column) == behind


@settings(max_examples=150, deadline=None)
@given(
    TEXTS, STYLES, st.sampled_from([20, 40, 10_000]), st.booleans(), st.booleans(), st.sampled_from([2, 4])
)
def test_every_character_is_found_again(
    value: str, style: str | None, width: int, unicode: bool, crlf: bool, indent: int
) -> None:
    document = {"before": "x", "spectra": [{"nucleus": "1H", "report": value}], "after": value}
    text = yaml.dump(document, default_style=style, width=width, allow_unicode=unicode, indent=indent)
    text = text.replace("\n", "\r\n") if crlf else text
    source = read_source(text.encode("utf-8"), "f.yaml")
    assert source.problems == ()
    assert isinstance(source.data, dict)
    loaded = yaml.load(text, Loader=LOADER)["after"]
    assert loaded == value or set(value) & set("\x85\u2028")  # which PyYAML writes as it does not read them
    for pointer, read in (
        ("/spectra/0/report", source.data["spectra"][0]["report"]),
        ("/after", source.data["after"]),
    ):
        assert read == loaded
        _check(source, text, pointer, read)


@settings(max_examples=150, deadline=None)
@given(
    LINES,
    st.sampled_from("|>"),
    st.sampled_from(["", "-", "+"]),
    st.integers(1, 4),
    st.booleans(),
    st.booleans(),
)
def test_blocks_typed_by_hand(
    lines: list[str], style: str, chomping: str, indent: int, told: bool, crlf: bool
) -> None:
    header = f"{style}{indent}{chomping}" if told else f"{style}{chomping}"
    body = "".join(f"{' ' * indent}{line}\n" if line else "\n" for line in lines)
    text = f"report: {header}  # a comment\n{body}after: x\n"
    text = text.replace("\n", "\r\n") if crlf else text
    try:
        value = yaml.load(text, Loader=LOADER)["report"]
    except yaml.YAMLError:
        return  # not every random block is YAML
    source = read_source(text.encode("utf-8"), "f.yaml")
    assert isinstance(source.data, dict)
    assert source.data["report"] == value
    _check(source, text, "/report", value)


@settings(max_examples=150, deadline=None)
@given(LINES, st.sampled_from(["", "'", '"']), st.booleans(), st.sampled_from(["", "&a ", "!!str ", "! &a "]))
def test_flow_scalars_typed_by_hand(lines: list[str], quote: str, crlf: bool, properties: str) -> None:
    body = "\n  ".join(lines)
    text = f"report: {properties}{quote}{body}{quote}\nafter: x\n"
    text = text.replace("\n", "\r\n") if crlf else text
    try:
        value = yaml.load(text, Loader=LOADER)["report"]
    except (yaml.YAMLError, KeyError):
        return
    source = read_source(text.encode("utf-8"), "f.yaml")
    if source.problems or not isinstance(value, str):
        return
    assert isinstance(source.data, dict)
    assert source.data["report"] == value
    _check(source, text, "/report", value)


EXAMPLES = [
    ('a: "1.26 (t)"', "1.26", (1, 5, 4)),
    ("a: '1.26 (t)'", "1.26", (1, 5, 4)),
    ("a: δ 1.26 (t)", "1.26", (1, 6, 4)),
    ("a: >-\n  δ 4.12 (q),\n  1.26 (t)\n", "1.26", (3, 3, 4)),
    ("a: |\n  δ 4.12 (q),\n  1.26 (t)\n", "1.26", (3, 3, 4)),
    ('a: "δ 4.12 (q),\n   1.26 (t)"\n', "1.26", (2, 4, 4)),
    ('a: "\\u03b4 1.26 (t)"\n', "1.26", (1, 12, 4)),
    ('a: "\\u03b4 1.26 (t)"\n', "δ", (1, 5, 6)),
    ("a: 'it''s 1.26'\n", "1.26", (1, 11, 4)),
    ("a: 'it''s 1.26'\n", "'", (1, 7, 2)),
    ("b: &x 1.26 (t)\na: *x\n", "1.26", (1, 7, 4)),
    ("\ufeffa: 1.26 (t)\n", "1.26", (1, 4, 4)),
    ("a: 😀 1.26 (t)\n", "1.26", (1, 6, 4)),
]


@pytest.mark.parametrize(("text", "part", "expected"), EXAMPLES)
def test_worked_places(text: str, part: str, expected: tuple[int, int, int]) -> None:
    source = read_source(text.encode("utf-8"), "f.yaml")
    assert isinstance(source.data, dict)
    at = source.data["a"].index(part)
    place = source.places.place(Locus("/a", Span(at, at + len(part))))
    assert (place.line, place.column, place.length) == expected


EXAMPLE = sorted((Path(__file__).parents[2] / "registry_example").rglob("record.yaml"))


@pytest.mark.parametrize("path", EXAMPLE, ids=lambda path: path.parent.name)
def test_every_text_of_the_example_stands_where_the_map_says(path: Path) -> None:
    text = path.read_text(encoding="utf-8")
    source = read_source(text.encode("utf-8"), str(path))

    def walk(value: object, pointer: str) -> None:
        if isinstance(value, dict):
            for key, held in value.items():
                assert _slice(text, source.places.place(Locus(f"{pointer}/{key}", on_key=True))) == key
                walk(held, f"{pointer}/{key}")
        elif isinstance(value, list):
            for number, held in enumerate(value):
                walk(held, f"{pointer}/{number}")
        elif isinstance(value, str):
            _check(source, text, pointer, value)
        else:
            assert float(_slice(text, source.places.place(Locus(pointer)))) == value

    walk(source.data, "")


def test_parser_without_libyaml_gives_the_same_places(monkeypatch: pytest.MonkeyPatch) -> None:
    """PyYAML comes without its C library on some systems; the plain one is slower and must agree."""

    def everything() -> list[object]:
        sources = [read_source(path.read_bytes(), "f.yaml") for path in EXAMPLE]
        pointers = ["", "/structure", "/spectra/0", "/spectra/1/signals/2/shift", "/notes"]
        loci = [Locus("/spectra/0/report", Span(2, 40)), *map(Locus, pointers)]
        return [(each.data, [each.places.place(locus) for locus in loci]) for each in sources]

    fast = everything()
    monkeypatch.setattr(verify.record.loading, "_Parser", yaml.BaseLoader)
    assert everything() == fast


def test_half_a_character_is_refused_by_either_parser(monkeypatch: pytest.MonkeyPatch) -> None:
    for _ in range(2):
        (problem,) = read_source(b'a: "\\ud83d"\n', "f.yaml").problems
        assert problem.code == "record-syntax"
        monkeypatch.setattr(verify.record.loading, "_Parser", yaml.BaseLoader)


DOCUMENT = """\
# a comment
compound: ARO-0001
structure: {smiles: "CCO"}

spectra:
  - nucleus: 1H   # the first
    "field mhz": 400
    report: >-
      δ 1.2

  - nucleus: 13C
notes:
"""


@pytest.mark.parametrize(
    ("pointer", "on_key", "expected"),
    [
        ("/compound", False, (2, 11, 2, 19)),
        ("/compound", True, (2, 1, 2, 9)),
        ("/structure/smiles", False, (3, 22, 3, 25)),
        ("/structure/smiles", True, (3, 13, 3, 19)),
        ("/structure", False, (3, 12, 3, 27)),
        ("/spectra", False, (6, 3, 11, 17)),
        ("/spectra/0", False, (6, 5, 9, 12)),
        ("/spectra/0/nucleus", False, (6, 14, 6, 16)),
        ("/spectra/0/field mhz", True, (7, 6, 7, 15)),
        ("/spectra/0/field mhz", False, (7, 18, 7, 21)),
        ("/spectra/1/solvent", False, (11, 5, 11, 17)),  # not there: its group
        ("/spectra/1", True, (11, 5, 11, 17)),  # an item has no key: its value
        ("/spectra/7/report", True, (6, 3, 11, 17)),
        ("/notes", False, (12, 7, 12, 7)),
        ("", False, (2, 1, 12, 7)),
    ],
)
def test_places_of_keys_and_groups(pointer: str, on_key: bool, expected: tuple[int, int, int, int]) -> None:
    place = read_source(DOCUMENT.encode("utf-8"), "f.yaml").places.place(Locus(pointer, on_key=on_key))
    assert (place.line, place.column, place.end_line, place.end_column) == expected
    assert place.file == "f.yaml"


def test_keys_with_slash_and_tilde_are_reached_by_their_pointer() -> None:
    # source: RFC 6901, section 3 (~0 for ~, ~1 for /)
    source = read_source(b"a/b: {x~y: 1}\n", "f.yaml")
    assert source.places.place(Locus("/a~1b/x~0y")).column == 12


def test_places_survive_a_pickle() -> None:
    import pickle

    source = read_source(DOCUMENT.encode("utf-8"), "f.yaml")
    again = pickle.loads(pickle.dumps(source))
    locus = Locus("/spectra/0/report", Span(2, 5))
    assert again.places.place(locus) == source.places.place(locus)
