"""The pages about rules and facts say what the rules and facts say, and no rule is left out."""

from __future__ import annotations

from pathlib import Path

from verify.resources import shipped
from verify.rulebook.facts import FACTS, GROUPS_OF_SCOPE
from verify.rulebook.pages import GROUPS, facts_page, rules_page
from verify.rulebook.source import load_rulebook

REWRITE = "rewrite the pages with: python -m verify.rulebook.pages"


def _page(name: str) -> str:
    return (Path(str(shipped())) / name).read_text(encoding="utf-8")


def test_pages_are_up_to_date() -> None:
    assert _page("FACTS.md") == facts_page(), REWRITE
    assert _page("README.md") == rules_page(), REWRITE


def test_every_rule_and_limit_is_listed_once() -> None:
    page, rulebook = rules_page(), load_rulebook("registration")
    for rule in rulebook.rules:
        assert page.count(f"[`{rule.id}`]") == 1
    for limit in rulebook.policy.limits:
        assert page.count(f"`limits.{limit}`") == 1


def test_every_fact_is_listed_once_with_its_meaning() -> None:
    page = facts_page()
    assert list(GROUPS) == list(FACTS)
    for group, facts in FACTS.items():
        for name, fact in facts.items():
            assert page.count(f"| `{group}.{name}` | {fact.type} | {fact.unit} |") == 1
            assert len(fact.meaning) >= 8, f"{group}.{name}"
    assert {g for groups in GROUPS_OF_SCOPE.values() for g in groups} == {*FACTS, "limits"}


def test_no_cell_breaks_its_table() -> None:
    for page in (facts_page(), rules_page()):
        width = 0
        for line in page.splitlines():
            cells = line.replace(r"\|", "").count("|")
            assert not width or not cells or cells == width or line.startswith("| --- "), line
            width = cells
