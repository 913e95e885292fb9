"""Rules over the whole registry: asked of a record after all that came before it are known."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

from verify.findings.finding import Finding, Level
from verify.findings.location import Locus, Place
from verify.findings.result import RecordResult, verdict_of
from verify.rulebook.deviations import fingerprint
from verify.rulebook.messages import fill
from verify.rulebook.model import Rulebook


def judge_in_registry(
    result: RecordResult, facts: Mapping[str, Mapping[str, Any]], places: Mapping[str, Place | None], rulebook: Rulebook
) -> RecordResult:
    """The result with findings of rules of scope "registry". ``places``: where "record" and "structure" stand."""
    more = []
    for rule in rulebook.of("registry"):
        try:
            speaks = rule.condition.holds(facts)
        except (ArithmeticError, KeyError, TypeError, ValueError) as error:  # the other rules must still be asked
            more.append(_rule_fault(result.compound, rule.id, error, places.get("record")))
            continue
        if not speaks:
            continue
        subject = fill(rule.message, facts)
        more.append(
            Finding(
                rule=rule.id, level=rule.level, message=subject, locus=Locus(), place=places.get(rule.locus),
                remedy=rule.remedy, subject=subject, fingerprint=fingerprint(result.compound, rule.id, "", subject),
            )
        )  # fmt: skip
    if not more:
        return result
    marks = {finding.fingerprint for finding in more}
    # When the record was judged alone, a deviation that accepts one of these still met nothing.
    kept = [f for f in result.findings if f.rule != "deviation-unmatched" or f.subject not in marks]
    findings = tuple(sorted((*kept, *more), key=lambda f: f.sort_key))
    return replace(result, findings=findings, verdict=verdict_of(findings, bool(result.unassessed_because)))


def _rule_fault(compound: str, rule: str, error: Exception, place: Place | None) -> Finding:
    """A rule of a pack that its facts broke, told as a finding of ``rule-fault``."""
    message = f"the rule '{rule}' could not be asked: {type(error).__name__}: {error}"
    mark = fingerprint(compound, "rule-fault", "", rule)
    remedy = "Correct the rule; its condition met facts it does not understand."
    return Finding("rule-fault", Level.WARNING, message, Locus(), place, remedy, rule, mark)
