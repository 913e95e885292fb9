"""Runs the examples of a rule: neutral facts, changed as the example says, must make it speak or leave it silent."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from verify.errors import ConfigurationError
from verify.findings.finding import Level
from verify.rulebook.documents import nearest
from verify.rulebook.facts import FACTS, neutral
from verify.rulebook.model import Example, Rule


def facts_of(example: Example, rule: Rule, limits: Mapping[str, float]) -> dict[str, dict[str, Any]]:
    """Facts of an example; raises ConfigurationError for a fact that is not there or has another type."""
    facts = neutral(rule.scope) | {"limits": dict(limits)}
    for name, value in example.facts.items():
        group, _, fact = name.partition(".")
        if group not in facts or fact not in facts[group]:
            known = [f"{g}.{f}" for g in facts if g != "limits" for f in facts[g]]
            raise ConfigurationError(f"{rule.file}: example '{example.says}': no fact '{name}'{nearest(name, known)}")
        wanted = FACTS[group][fact].neutral
        whole = isinstance(value, int) and not isinstance(value, bool)
        given = float(value) if isinstance(wanted, float) and whole else value
        if type(given) is not type(wanted):
            wrong = f"'{name}' must be a {FACTS[group][fact].type}"
            raise ConfigurationError(f"{rule.file}: example '{example.says}': {wrong}")
        facts[group][fact] = given
    return facts


def answer(example: Example, rule: Rule, limits: Mapping[str, float]) -> tuple[bool, Level | None]:
    """Whether the rule speaks on the facts of an example, and at which level."""
    facts = facts_of(example, rule, limits)
    if not rule.condition.holds(facts):
        return False, None
    if facts.get("spectrum", {}).get("soft"):
        return rule.softened is not None, rule.softened
    raised = rule.raised is not None and rule.raised_when is not None and rule.raised_when.holds(facts)
    return True, rule.raised if raised else rule.level


def failures(rule: Rule, limits: Mapping[str, float]) -> list[str]:
    """One line for each example that does not come out as it says."""
    found = []
    for example in rule.examples:
        speaks, level = answer(example, rule, limits)
        if speaks != example.fires:
            found.append(f"{rule.file}: example '{example.says}': the rule {'speaks' if speaks else 'is silent'}")
        elif example.level is not None and level is not example.level:
            found.append(f"{rule.file}: example '{example.says}': level {level}, not {example.level}")
    return found
