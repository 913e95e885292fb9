"""Every example of every shipped rule comes out as it says, under the policy its limits come from."""

from __future__ import annotations

from dataclasses import replace

import pytest

from verify.errors import ConfigurationError
from verify.rulebook.examples import answer, facts_of, failures
from verify.rulebook.facts import neutral
from verify.rulebook.model import Example, Rule
from verify.rulebook.source import load_rulebook

RULEBOOK = load_rulebook("registration")


@pytest.mark.parametrize("rule", RULEBOOK.rules, ids=lambda rule: rule.id)
def test_examples(rule: Rule) -> None:
    assert failures(rule, RULEBOOK.policy.limits) == []


@pytest.mark.parametrize("rule", RULEBOOK.rules, ids=lambda rule: rule.id)
def test_every_rule_has_examples_both_ways(rule: Rule) -> None:
    assert len(rule.examples) >= 4
    assert {example.fires for example in rule.examples} == {True, False}


@pytest.mark.parametrize("rule", RULEBOOK.rules, ids=lambda rule: rule.id)
def test_a_record_without_fault_leaves_every_rule_silent(rule: Rule) -> None:
    facts = neutral(rule.scope) | {"limits": dict(RULEBOOK.policy.limits)}
    assert rule.condition.holds(facts) is False


@pytest.mark.parametrize("rule", RULEBOOK.rules, ids=lambda rule: rule.id)
def test_a_missing_fact_is_an_error_and_not_an_answer(rule: Rule) -> None:
    facts = neutral(rule.scope) | {"limits": dict(RULEBOOK.policy.limits)}
    for group, name in rule.condition.names:
        without = facts | {group: {key: value for key, value in facts[group].items() if key != name}}
        with pytest.raises(KeyError):
            rule.condition.holds(without)


@pytest.mark.parametrize("rule", RULEBOOK.rules, ids=lambda rule: rule.id)
def test_a_number_of_the_wrong_type_is_an_error_and_not_an_answer(rule: Rule) -> None:
    speaking = next(example for example in rule.examples if example.fires)
    facts = facts_of(speaking, rule, RULEBOOK.policy.limits)
    numbers = [(g, n) for g, n in rule.condition.names if isinstance(facts[g][n], float) and g != "limits"]
    broken = 0
    for group, name in numbers:
        odd = facts | {group: facts[group] | {name: (1, 2)}}
        try:
            rule.condition.holds(odd)
        except (TypeError, ValueError):
            broken += 1
    assert broken > 0 or not numbers or "||" in rule.condition.source


def test_an_example_that_is_wrong_is_told() -> None:
    rule = RULEBOOK.rules[0]
    turned = replace(rule, examples=tuple(replace(e, fires=not e.fires) for e in rule.examples))
    assert len(failures(turned, RULEBOOK.policy.limits)) == len(rule.examples)
    with pytest.raises(ConfigurationError, match="did you mean"):
        answer(Example("typo", {f"{next(iter(neutral(rule.scope)))}.signls": 1.0}, True), rule, RULEBOOK.policy.limits)
