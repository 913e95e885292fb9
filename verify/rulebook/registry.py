"""Rules over the whole registry: asked of a record after all that came before it are known."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

from verify.findings.finding import Finding
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
        if not rule.condition.holds(facts):
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
    findings = tuple(sorted((*result.findings, *more), key=lambda f: f.sort_key))
    return replace(result, findings=findings, verdict=verdict_of(findings, bool(result.unassessed_because)))
