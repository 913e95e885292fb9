"""Writes the pages in words about the shipped rules: ``rules/README.md`` and ``rules/FACTS.md``.

``python -m verify.rulebook.pages`` rewrites both in a checkout; a test holds them to what this module says.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path

from verify.resources import shipped
from verify.rulebook.facts import FACTS, GROUPS_OF_SCOPE, VERSION, Fact
from verify.rulebook.model import Policy, Rule
from verify.rulebook.policy import load_policy, shipped_policies
from verify.rulebook.source import NOT_RULES, load_rulebook, read_rule

GENERATED = "<!-- Written by `python -m verify.rulebook.pages`; changes made here are lost. -->"
GROUPS: Mapping[str, str] = {
    "record": "A record as a whole. Every rule but those about problems and about the registry may use these.",
    "mass": "One entry of `mass`.",
    "elemental": "One element of an elemental analysis.",
    "spectrum": "One spectrum. Rules about its signals and about missing groups may use these too.",
    "signal": "One signal that was read.",
    "missing": "One group of the structure that no signal explains.",
    "problem": "Something a stage could not read or decide.",
    "registry": "A record beside all that came before it in the same run.",
}


def facts_page() -> str:
    """Text of ``rules/FACTS.md``: every fact with type, unit, neutral value and meaning, group by group."""
    lines = [
        GENERATED, "", f"# Facts, version {VERSION}", "",
        "A condition is one expression of the Common Expression Language over these facts, written `group.name`. "
        "*Neutral* is the value in a record without fault: an example of a rule states only the facts that differ "
        "from it. Numbers are doubles: write `3.0`, not `3`. `limits.NAME` is a number of the policy.",
        "", "| scope of a rule | groups it may use |", "| --- | --- |",
    ]  # fmt: skip
    lines += [f"| {scope} | {', '.join(groups)} |" for scope, groups in GROUPS_OF_SCOPE.items()]
    for group, facts in FACTS.items():
        lines += ["", f"## {group}", "", GROUPS[group], ""]
        lines += ["| fact | type | unit | neutral | meaning |", "| --- | --- | --- | --- | --- |"]
        lines += [_fact_row(group, name, fact) for name, fact in facts.items()]
    return "\n".join(lines) + "\n"


def _fact_row(group: str, name: str, fact: Fact) -> str:
    neutral = str(fact.neutral).lower() if isinstance(fact.neutral, bool) else str(fact.neutral)
    return f"| `{group}.{name}` | {fact.type} | {fact.unit} | {_cell(neutral) or '(empty)'} | {_cell(fact.meaning)} |"


def rules_page() -> str:
    """Text of ``rules/README.md``: every rule with its level under each policy, and the limits of the policies."""
    names = _in_order(shipped_policies())
    policies = [load_policy(name) for name in names]
    levels = {name: {rule.id: rule for rule in load_rulebook(name).rules} for name in names}
    lines = [
        GENERATED, "", "# Rules", "",
        "One rule a file, by family. Levels: an **error** contradicts a record, a **warning** queries it, a **note** "
        "changes no verdict. *warning to error* depends on how far the facts go; *softened* is the level where the "
        "text or the structure softens every statement, as with rotamers or a mixture. `peakwitness rulebook RULE` "
        "shows a rule with its condition and examples; [FACTS.md](FACTS.md) lists what conditions may use.",
    ]  # fmt: skip
    for family, rules in _families().items():
        lines += ["", f"## {family}", "", f"| rule | says | {' | '.join(names)} | softened |"]
        lines += [f"| --- | --- |{' --- |' * len(names)} --- |"]
        for rule in rules:
            cells = " | ".join(_levels(levels[name].get(rule.id)) for name in names)
            lines.append(f"| [`{rule.id}`]({family}/{rule.id}.yaml) | {_cell(rule.title)} | {cells} | {_soft(rule)} |")
    return "\n".join([*lines, *_policy_lines(policies)]) + "\n"


def _in_order(names: Sequence[str]) -> list[str]:
    """The policy that others extend comes first."""
    return sorted(names, key=lambda name: (name != "registration", name))


def _families() -> dict[str, list[Rule]]:
    """Shipped rules by the folder they lie in, off or on."""
    found = {}
    for folder in sorted(shipped().iterdir(), key=lambda entry: entry.name):
        if folder.is_dir() and folder.name not in NOT_RULES:
            files = sorted((f for f in folder.iterdir() if f.name.endswith(".yaml")), key=lambda f: f.name)
            found[folder.name] = [read_rule(f, f"rules/{folder.name}/{f.name}") for f in files]
    return found


def _levels(rule: Rule | None) -> str:
    if rule is None:
        return "off"
    return str(rule.level) if rule.raised in (None, rule.level) else f"{rule.level} to {rule.raised}"


def _soft(rule: Rule) -> str:
    if rule.softened is None:
        return "silent"
    return "" if rule.softened is rule.level else str(rule.softened)


def _policy_lines(policies: Sequence[Policy]) -> Iterator[str]:
    yield from ("", "## Policies", "")
    yield from ("| policy | for | required | holds | isomers tried |", "| --- | --- | --- | --- | --- |")
    for policy in policies:
        required, holds = ", ".join(policy.required) or "none", ", ".join(policy.holds)
        yield f"| `{policy.name}` | {_cell(policy.title)} | {required} | {holds} | {policy.rivals} |"
    names = sorted({limit for policy in policies for limit in policy.limits})
    yield from ("", "| limit | " + " | ".join(p.name for p in policies) + " |", "| --- |" + " --- |" * len(policies))
    for limit in names:
        yield f"| `limits.{limit}` | " + " | ".join(f"{p.limits[limit]:g}" for p in policies) + " |"


def _cell(text: str) -> str:
    return text.replace("|", r"\|").replace("\n", " ").strip()


def write_pages() -> None:
    """Write both pages beside the shipped rules of a checkout."""
    folder = Path(str(shipped()))
    (folder / "FACTS.md").write_text(facts_page(), encoding="utf-8")
    (folder / "README.md").write_text(rules_page(), encoding="utf-8")


if __name__ == "__main__":
    write_pages()
