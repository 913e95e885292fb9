"""``peakwitness rulebook``: list the rules, explain one, or check a pack."""

from __future__ import annotations

import sys
from collections.abc import Sequence

from rich.console import Console
from rich.table import Table

from verify.cli.parsing import CommandParser
from verify.errors import UsageError
from verify.rulebook.documents import nearest
from verify.rulebook.examples import failures
from verify.rulebook.model import Rule
from verify.rulebook.source import load_rulebook, read_pack


def options() -> CommandParser:
    """Options of the command."""
    found = CommandParser("rulebook", "List the rules, explain one, or check a pack of rules.")
    found.add_argument("rule", metavar="RULE", nargs="?", help="id of a rule to explain")
    found.add_argument("--policy", metavar="NAME", default="registration")
    found.add_argument("--rules", metavar="FOLDER", action="append", default=[], help="a folder of further rules")
    found.add_argument("--check", metavar="FOLDER", help="check a pack of rules: form, facts and examples")
    return found


def run(arguments: Sequence[str]) -> int:
    """Run the command; 1 if an example of a checked pack fails."""
    given = options().parse_args(list(arguments))
    console = Console(file=sys.stdout, highlight=False)
    if given.check:
        return _check(console, given.check, given.policy)
    rules = {rule.id: rule for rule in load_rulebook(given.policy, tuple(given.rules)).rules}
    if given.rule is None:
        _list(console, list(rules.values()))
        return 0
    if given.rule not in rules:
        raise UsageError(f"there is no rule '{given.rule}'{nearest(given.rule, list(rules))}")
    _explain(console, rules[given.rule])
    return 0


def _list(console: Console, rules: Sequence[Rule]) -> None:
    table = Table(box=None, pad_edge=False, header_style="bold")
    for name in ("rule", "level", "asked of", "says"):
        table.add_column(name, overflow="fold")
    for rule in rules:
        level = f"{rule.level} ({rule.raised})" if rule.raised else str(rule.level)
        table.add_row(rule.id, level, " ".join((rule.scope, *rule.nuclei)), rule.title)
    console.print(table)


def _explain(console: Console, rule: Rule) -> None:
    lines = [("rule", rule.id), ("says", rule.title), ("level", str(rule.level)), ("asked of", rule.scope), ("when", rule.condition.source)]
    if rule.raised_when is not None:
        lines.append((f"{rule.raised} when", rule.raised_when.source))
    lines += [("message", rule.message), ("remedy", rule.remedy), ("basis", rule.basis), ("file", rule.file)]
    for name, text in lines:
        console.print(f"{name:14s}{text}", soft_wrap=True, markup=False)
    for example in rule.examples:
        console.print(f"{'speaks' if example.fires else 'is silent':14s}{example.says}", markup=False)


def _check(console: Console, folder: str, policy: str) -> int:
    rules = read_pack(folder)
    limits = load_rulebook(policy, (folder,)).policy.limits
    found = [words for rule in rules for words in failures(rule, limits)]
    for words in found:
        console.print(words, soft_wrap=True, markup=False)
    console.print(f"{len(rules)} rules, {sum(len(r.examples) for r in rules)} examples, {len(found)} failures")
    return 1 if found else 0
