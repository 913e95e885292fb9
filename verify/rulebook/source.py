"""Reads rules, one a file, and joins them with a policy into a rulebook."""

from __future__ import annotations

import hashlib
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import replace
from functools import lru_cache
from importlib.resources.abc import Traversable
from pathlib import Path
from typing import Any

from verify.errors import ConfigurationError
from verify.findings.finding import Level
from verify.resources import shipped
from verify.rulebook.conditions import Condition
from verify.rulebook.documents import nearest, read_document
from verify.rulebook.facts import FACTS, GROUPS_OF_SCOPE
from verify.rulebook.messages import placeholders
from verify.rulebook.model import Example, Policy, Rule, Rulebook
from verify.rulebook.policy import load_policy

NOT_RULES = frozenset({"tables", "policies"})


def load_rulebook(policy: str = "registration", packs: Sequence[str] = (), folder: str | None = None) -> Rulebook:
    """The shipped rules, those of ``packs`` (folders of rule files), and a policy applied to them.

    A rule of a pack replaces the shipped one of the same id. ``folder`` is where relative packs and policies are
    looked for. Raises ConfigurationError naming file and key.
    """
    return _loaded(policy, tuple(packs), folder)


@lru_cache(maxsize=8)
def _loaded(policy: str, packs: tuple[str, ...], folder: str | None) -> Rulebook:
    base = Path(folder) if folder else None
    chosen = load_policy(policy, base)
    rules = {rule.id: rule for rule in _shipped_rules()}
    for pack in packs:
        rules |= {rule.id: rule for rule in read_pack(base / pack if base else Path(pack))}
    _check_policy(chosen, rules)
    _check_limits(chosen, rules.values())
    applied = [_with_level(rule, chosen) for rule in sorted(rules.values(), key=lambda r: r.id)]
    kept = tuple(rule for rule in applied if rule is not None)
    return Rulebook(chosen, kept, _digest(chosen, kept))


@lru_cache(maxsize=1)
def _shipped_rules() -> tuple[Rule, ...]:
    found = []
    for family in sorted(shipped().iterdir(), key=lambda entry: entry.name):
        if family.is_dir() and family.name not in NOT_RULES:
            for path in _rule_files(family):
                found.append(read_rule(path, f"rules/{family.name}/{path.name}", trusted=True))
    return tuple(found)


def _rule_files(folder: Path | Traversable) -> Iterator[Path | Traversable]:
    for entry in sorted(folder.iterdir(), key=lambda e: e.name):
        if entry.name.endswith(".yaml"):
            yield entry


def read_pack(folder: str | Path) -> list[Rule]:
    """Rules of a folder and the folders in it; raises ConfigurationError."""
    folder = Path(folder)
    if not folder.is_dir():
        raise ConfigurationError(f"{folder}: there is no such folder of rules")
    rules = [read_rule(path, str(path)) for path in sorted(folder.rglob("*.yaml"))]
    if not rules:
        raise ConfigurationError(f"{folder}: holds no rule (one .yaml file for each rule is expected)")
    seen: dict[str, str] = {}
    for rule in rules:
        if rule.id in seen:
            raise ConfigurationError(f"{rule.file}: the id '{rule.id}' is that of {seen[rule.id]} already")
        seen[rule.id] = rule.file
    return rules


def read_rule(path: Path | Traversable, name: str, *, trusted: bool = False) -> Rule:
    """One rule; raises ConfigurationError naming the file, the key and the nearest known fact."""
    data = read_document(path, "rule", trusted=trusted)
    try:
        rule = _rule(data, name)
    except ConfigurationError as error:
        raise ConfigurationError(f"{name}: {error}") from error
    stem = name.rsplit("/", 1)[-1].removesuffix(".yaml")
    if rule.id != stem:
        raise ConfigurationError(f"{name}: id is '{rule.id}', the file's name says '{stem}'")
    return rule


def _rule(data: Mapping[str, Any], name: str) -> Rule:
    scope = data["scope"]
    condition = Condition(data["when"])
    check_names(condition.names, scope, "when")
    for key in ("message", "remedy", "subject"):
        check_names(placeholders(data.get(key, "")), scope, key)
    softened = data.get("softened")
    raised_when = Condition(data["raised_when"]) if "raised_when" in data else None
    if raised_when is not None:
        check_names(raised_when.names, scope, "raised_when")
    return Rule(
        id=data["id"], title=data["title"], scope=scope, level=Level(data["level"]), condition=condition,
        message=data["message"], remedy=data["remedy"], basis=data["basis"], locus=data["locus"],
        subject=data.get("subject", ""), file=name,
        nuclei=tuple(data.get("nuclei", ())), codes=tuple(data.get("codes", ())),
        raised=Level(data["raised"]) if "raised" in data else None, raised_when=raised_when,
        softened=_softened(softened, Level(data["level"])),
        examples=tuple(_example(e) for e in data["examples"]),
    )  # fmt: skip


def _example(data: Mapping[str, Any]) -> Example:
    level = Level(data["level"]) if "level" in data else None
    return Example(data["says"], data.get("facts", {}), data["fires"], level)


def _softened(word: str | None, level: Level) -> Level | None:
    if word is None:
        return level
    return None if word == "silent" else Level(word)


def check_names(names: Sequence[tuple[str, str]], scope: str, key: str) -> None:
    """Raise ConfigurationError for a fact that does not exist or does not belong to the scope."""
    groups = GROUPS_OF_SCOPE[scope]
    for group, fact in names:
        if group not in groups:
            raise ConfigurationError(f"{key}: scope '{scope}' has no facts '{group}.*'{nearest(group, list(groups))}")
        if group != "limits" and fact not in FACTS[group]:
            hint = nearest(fact, list(FACTS[group]))
            raise ConfigurationError(f"{key}: there is no fact '{group}.{fact}'{hint}")


def _check_policy(policy: Policy, rules: Mapping[str, Rule]) -> None:
    for rule in policy.levels:
        if rule not in rules:
            hint = nearest(rule, list(rules))
            raise ConfigurationError(f"policy '{policy.name}': levels: there is no rule '{rule}'{hint}")


def _check_limits(policy: Policy, rules: Iterable[Rule]) -> None:
    for rule in rules:
        for group, name in (*rule.condition.names, *(rule.raised_when.names if rule.raised_when else ())):
            if group == "limits" and name not in policy.limits:
                hint = nearest(name, list(policy.limits))
                raise ConfigurationError(f"{rule.file}: policy '{policy.name}' has no limit '{name}'{hint}")


def _with_level(rule: Rule, policy: Policy) -> Rule | None:
    if rule.id not in policy.levels:
        return rule
    level = policy.levels[rule.id]
    if level is None:
        return None
    order = list(Level)
    softened = rule.softened
    if softened is not None and order.index(softened) < order.index(level):
        softened = level  # a policy that lowers a rule lowers it for softened lists too
    return replace(rule, level=level, softened=softened, raised=None, raised_when=None)


def _digest(policy: Policy, rules: Sequence[Rule]) -> str:
    content = hashlib.sha256(repr(sorted(policy.limits.items())).encode())
    content.update(repr((policy.name, policy.required, policy.holds, policy.rivals)).encode())
    for rule in rules:
        content.update("\0".join((rule.id, rule.scope, rule.level, str(rule.softened), rule.condition.source)).encode())
        content.update(f"{rule.raised} {rule.raised_when.source if rule.raised_when else ''}".encode())
        words = (rule.message, rule.remedy, rule.locus, rule.subject, *rule.nuclei, *rule.codes)
        content.update("\0".join(words).encode())
    return content.hexdigest()
