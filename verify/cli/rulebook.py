"""``peakwitness rulebook``: list the rules, explain one, or check a pack."""

from __future__ import annotations

import os
from collections.abc import Iterator, Sequence

from rich.table import Table
from rich.text import Text

from verify.cli.parsing import CommandParser
from verify.cli.terminal import Terminal
from verify.engine.faults import EXPLAINED
from verify.engine.settings import DEFAULT_POLICY, whole_paths, whole_policy
from verify.errors import UsageError
from verify.rulebook.documents import nearest
from verify.rulebook.examples import failures
from verify.rulebook.model import Rule
from verify.rulebook.source import load_rulebook, read_pack

LABEL = 14  # characters before each text of an explanation


def options() -> CommandParser:
    """Options of the command."""
    found = CommandParser("rulebook", "List the rules, explain one, or check a pack of rules.")
    found.add_argument("rule", metavar="RULE", nargs="?", help="id of a rule to explain")
    found.add_argument("--policy", metavar="NAME", default=DEFAULT_POLICY, help=f"default: {DEFAULT_POLICY}")
    found.add_argument("--rules", metavar="PACK", action="append", default=[], help="a folder of further rules")
    found.add_argument("--check", metavar="PACK", help="check a pack: form, facts and examples of its rules")
    return found


def run(arguments: Sequence[str]) -> int:
    """Run the command; 1 where an example of a checked pack fails."""
    given = options().parse_args(list(arguments))
    policy, terminal = whole_policy(given.policy), Terminal()
    if given.check:
        return _check(terminal, os.path.abspath(given.check), policy)
    rules = {rule.id: rule for rule in load_rulebook(policy, whole_paths(tuple(given.rules))).rules}
    if given.rule is None:
        terminal.print(_listed(list(rules.values())))
        return 0
    if given.rule in EXPLAINED and given.rule not in rules:
        terminal.print(f"{given.rule}: {EXPLAINED[given.rule]} No policy turns it off.", soft_wrap=True)
        return 0
    if given.rule not in rules:
        hint = nearest(given.rule, list(rules))
        raise UsageError(f"there is no rule '{given.rule}'{hint}\nTry: peakwitness rulebook")
    for label, words in _explained(rules[given.rule]):
        terminal.print(Text(f"{label:<{LABEL}}", style="bold").append(words, style="not bold"), soft_wrap=True)
    return 0


def _listed(rules: Sequence[Rule]) -> Table:
    table = Table(box=None, pad_edge=False, header_style="bold")
    table.add_column("rule", no_wrap=True)
    table.add_column("level", no_wrap=True)
    table.add_column("says", overflow="fold")
    for rule in rules:
        levels = str(rule.level) if rule.raised in (None, rule.level) else f"{rule.level} to {rule.raised}"
        table.add_row(rule.id, levels, rule.title)
    return table


def _explained(rule: Rule) -> Iterator[tuple[str, str]]:
    """Everything a rule says of itself, label by label."""
    yield "rule", rule.id
    yield "says", rule.title
    yield "level", str(rule.level)
    yield "asked of", " ".join((rule.scope, *rule.nuclei))
    yield "when", rule.condition.source
    if rule.raised is not None and rule.raised_when is not None:
        yield f"{rule.raised} when", rule.raised_when.source
    if rule.softened is not rule.level:
        yield "softened to", str(rule.softened or "silence")
    yield "message", rule.message
    yield "remedy", rule.remedy
    yield "basis", rule.basis
    yield "file", rule.file
    for example in rule.examples:
        yield ("speaks" if example.fires else "is silent"), example.says


def _check(terminal: Terminal, folder: str, policy: str) -> int:
    rules = read_pack(folder)
    limits = load_rulebook(policy, (folder,)).policy.limits
    found = [words for rule in rules for words in failures(rule, limits)]
    for words in found:
        terminal.print(words, soft_wrap=True)
    examples = sum(len(rule.examples) for rule in rules)
    terminal.print(f"{len(rules)} rules, {examples} examples, {len(found)} failures")
    return 1 if found else 0
