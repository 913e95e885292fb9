"""A rule that is taken out, or whose condition is turned at one place, fails at least one of its examples."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import replace

import pytest

from verify.rulebook.conditions import Condition
from verify.rulebook.examples import failures
from verify.rulebook.model import Rule
from verify.rulebook.source import load_rulebook

RULEBOOK = load_rulebook("registration")
TURNED = {"&&": "||", "||": "&&", ">=": "<", "<=": ">", ">": "<=", "<": ">=", "==": "!=", "!=": "=="}
OPERATOR = re.compile("|".join(sorted(map(re.escape, TURNED), key=len, reverse=True)))


def turned(source: str) -> Iterator[str]:
    """The condition with one operator turned, for each of its operators."""
    for found in OPERATOR.finditer(source):
        yield source[: found.start()] + TURNED[found[0]] + source[found.end() :]


def unnoticed(rule: Rule) -> list[str]:
    """Changed conditions that every example of the rule still agrees with."""
    changed = ("false", "true", *turned(rule.condition.source))
    return [c for c in changed if not failures(replace(rule, condition=Condition(c)), RULEBOOK.policy.limits)]


@pytest.mark.parametrize("rule", RULEBOOK.rules, ids=lambda rule: rule.id)
def test_a_changed_condition_is_noticed(rule: Rule) -> None:
    assert unnoticed(rule) == []


def test_a_rule_with_too_few_examples_is_found() -> None:
    rule = next(rule for rule in RULEBOOK.rules if rule.id == "residual-solvent-listed")
    assert unnoticed(replace(rule, examples=rule.examples[:1]))
