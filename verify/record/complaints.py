"""What a YAML parser complains of, said in the words of somebody who typed a record."""

from __future__ import annotations

from yaml.error import Mark, MarkedYAMLError

from verify.record.decoding import Fault

_QUOTES = "text in quotes"
_PLAIN_WORDS = {
    "mapping values are not allowed": (
        'a second ": " on one line, or a line indented too far',
        'one key and one value; text that holds ": " must stand in quotes',
    ),
    "block sequence entries are not allowed": (
        'a "-" where no list can begin',
        "list items on lines of their own",
    ),
    "could not find expected ':'": ('a line without ":" behind its key', "key: value"),
    "did not find expected key": (
        "this does not fit the lines above it",
        "the same indentation for keys of one level, and nothing behind a closing quote",
    ),
    "did not find expected '-' indicator": (
        "this does not fit the list above it",
        'list items that begin with "- " at one indentation',
    ),
    "did not find expected ',' or ']'": ('a list in "[ ]" is not closed, or a comma is missing', "[a, b, c]"),
    "did not find expected ',' or '}'": (
        'a group in "{ }" is not closed, or a comma is missing',
        "{key: value, key: value}",
    ),
    "found unknown escape character": (
        'a backslash in double quotes that begins no known escape (a SMILES with "\\"?)',
        "the text in single quotes, or each backslash typed twice",
    ),
    "found unexpected document indicator": (
        'a line "---" or "..." inside quoted text',
        "one record in one file",
    ),
    "did not find expected <document start>": ("text behind the end of the record", "one record in one file"),
    "did not find expected alphabetic or numeric": ('a value may not begin with "*" or "&"', _QUOTES),
    "found duplicate anchor": ("an anchor (&name) is defined twice", "one anchor of each name"),
}


def explain(error: MarkedYAMLError, text: str) -> Fault:
    """The fault behind a scanner's or parser's complaint, placed where the reader has to look."""
    problem = error.problem or ""
    mark = error.problem_mark or error.context_mark
    start = min(mark.index, len(text)) if mark else len(text)
    if "unexpected end of stream" in problem and "quoted" in (error.context or ""):
        return _at(error.context_mark or mark, "the quote that opens here is never closed", "a closing quote")
    if "cannot start any token" in problem or "tab character" in problem:
        return _unfit_character(text, start)
    if start >= len(text.rstrip()):  # the end of the file is nowhere to look; what is open began above
        mark = error.context_mark or mark
    for words, (message, expected) in _PLAIN_WORDS.items():
        if problem.startswith(words):
            return _at(mark, message, expected)
    context = f" {error.context}" if error.context else ""
    return Fault("record-syntax", f"not valid YAML: {problem}{context}", start, start + 1, "YAML")


def _at(mark: Mark | None, message: str, expected: str) -> Fault:
    start = mark.index if mark else 0
    return Fault("record-syntax", message, start, start + 1, expected)


def _unfit_character(text: str, start: int) -> Fault:
    character = text[start : start + 1]
    if character == "\t":
        return Fault(
            "record-tab", "a tab stands where only spaces may", start, start + 1, "spaces for indentation"
        )
    message = f"a value may not begin with {character!r} unless it is quoted"
    return Fault("record-syntax", message, start, start + 1, _QUOTES)
