"""A condition that could only break when asked is refused when read; what it may use is bounded."""

from __future__ import annotations

import pickle

import pytest

from verify.errors import ConfigurationError
from verify.rulebook.conditions import LONGEST, Condition


@pytest.mark.parametrize(
    ("source", "words"),
    [
        ("sgnal > 1.0", "'sgnal' alone is no fact"),
        ('signal["shift"] > 1.0', "may not use '_\\[_\\]'"),
        ("signal . shift > 1.0", "'signal' alone is no fact"),
        ("signal.Shift > 1.0", "'signal' alone is no fact"),
        ("signal.shift.foo > 1.0", "has no parts"),
        ("signal.shift > 1.0 && nuclei > 1.0", "'nuclei' alone is no fact"),
        ('timestamp("2026-01-01T00:00:00Z") == signal.shift', "may not use 'timestamp'"),
        ("[1, 2].map(x, x + 1).size() > signal.shift", "may not loop"),
        ("open('/etc/passwd')", "may not use 'open'"),
        ("signal.shift >", "no CEL expression"),
        ("((((((", "no CEL expression"),
        ("signal.shift > 1.0 || " * 40 + "true", f"may hold {LONGEST} characters"),
    ],
)
def test_what_could_only_break_later_is_refused(source: str, words: str) -> None:
    with pytest.raises(ConfigurationError, match=words):
        Condition(source)


@pytest.mark.parametrize(
    ("source", "facts", "answer"),
    [
        ("signal.shift > 1.0", {"shift": 1.0}, False),
        ("signal.shift > 1.0", {"shift": 1.01}, True),
        ('signal.letters.startsWith("d")', {"letters": "dd"}, True),
        ('signal.letters in ["s", "d"]', {"letters": "d"}, True),
        ('signal.letters == "sgnal.shift"', {"letters": "sgnal.shift"}, True),
        ("signal.letters.size() > 2", {"letters": "dd"}, False),
    ],
)
def test_a_condition_answers(source: str, facts: dict[str, object], answer: bool) -> None:
    condition = Condition(source)
    assert condition.holds({"signal": facts}) is answer
    assert condition.holds({"signal": facts}) is answer  # the answer it remembers
    assert pickle.loads(pickle.dumps(condition)).holds({"signal": facts}) is answer


def test_no_true_or_false_and_a_missing_fact_are_errors() -> None:
    with pytest.raises(TypeError, match="not true or false"):
        Condition("signal.shift").holds({"signal": {"shift": 2.0}})
    with pytest.raises(KeyError):
        Condition("signal.shift > 1.0").holds({"signal": {}})
