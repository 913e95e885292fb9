"""The door of the room: a record with everything known about it in, findings out."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fnmatch import fnmatchcase
from typing import Any

from verify.assignment.model import SignalReading
from verify.findings.finding import Deviation, Finding, Level
from verify.findings.location import Locus
from verify.findings.problem import Problem
from verify.rulebook.conditions import Condition
from verify.rulebook.deviations import accept, fingerprint
from verify.rulebook.facts_record import elemental_facts, mass_facts, record_facts
from verify.rulebook.facts_signal import missing_facts, signal_facts
from verify.rulebook.facts_spectrum import spectrum_facts
from verify.rulebook.messages import fill
from verify.rulebook.model import RecordCase, Rule, Rulebook, SpectrumCase
from verify.rulebook.places import list_locus, problem_locus, signal_locus, spectrum_locus, structure_locus

Facts = dict[str, dict[str, Any]]
FAULT_OF_A_RULE = "rule-fault"


def judge(
    case: RecordCase, rulebook: Rulebook, deviations: Sequence[Deviation], today: str
) -> tuple[Finding, ...]:
    """Findings about one record, in the order of the file. ``today`` (ISO date) decides expiry of deviations.

    A rule that breaks on a fact becomes a finding itself and never stops the others.
    """
    bench = _Bench(case, rulebook)
    bench.run()
    mine = [d for d in deviations if d.compound == case.reading.compound]
    found = list(accept(bench.findings, mine, today))
    for problem in _about_deviations(mine, found, today):
        found.extend(bench.about_problem(problem, structure_locus(case), ""))
    return tuple(sorted(found, key=lambda f: f.sort_key))


def _about_deviations(mine: Sequence[Deviation], found: Sequence[Finding], today: str) -> Iterator[Problem]:
    marks = {f.fingerprint for f in found}
    for deviation in mine:
        who = f"accepted by {deviation.accepted_by} on {deviation.accepted_on}: {deviation.reason}"
        if deviation.fingerprint not in marks:
            words = f"the deviation {deviation.fingerprint} meets no finding ({who})"
            yield Problem("deviation-unmatched", words, expected=deviation.fingerprint)
        elif deviation.expires_on < today:
            words = f"the deviation {deviation.fingerprint} expired on {deviation.expires_on} ({who})"
            yield Problem("deviation-expired", words, expected=deviation.fingerprint)


class _Bench:
    """One record on its way through the rules."""

    def __init__(self, case: RecordCase, rulebook: Rulebook) -> None:
        self.case, self.rulebook = case, rulebook
        self.limits: dict[str, Any] = dict(rulebook.policy.limits)
        self.findings: list[Finding] = []
        self.faults: set[str] = set()

    def run(self) -> None:
        """Ask every rule of every scope."""
        record = record_facts(self.case, self.rulebook.policy)
        base: Facts = {"record": record, "limits": self.limits}
        for problem in self.case.problems:
            self.findings.extend(self.about_problem(problem, problem.locus, ""))
        self._ask("record", base, "", self._record_locus)
        for entry, mass in mass_facts(self.case):
            self._ask("mass", base | {"mass": mass}, "", lambda _, p=entry.pointer: Locus(p))
        for analysis, element in elemental_facts(self.case):
            self._ask("elemental", base | {"elemental": element}, "", lambda _, p=analysis.pointer: Locus(p))
        for spectrum in self.case.spectra:
            self._spectrum(spectrum, base)

    def _record_locus(self, rule: Rule) -> Locus:
        return structure_locus(self.case) if rule.locus in ("structure", "record") else Locus(rule.locus)

    def _spectrum(self, spectrum: SpectrumCase, base: Facts) -> None:
        nucleus = spectrum.spectrum.nucleus
        for problem in spectrum.peaks.problems:
            self.findings.extend(self.about_problem(problem, problem_locus(spectrum, problem.locus), nucleus))
        facts = base | {"spectrum": spectrum_facts(self.case, spectrum)}
        self._ask("spectrum", facts, nucleus, lambda rule: self._list_locus(spectrum, rule))
        assignment = spectrum.assignment
        if assignment is None:
            return
        for reading in assignment.readings:
            mine = facts | {"signal": signal_facts(spectrum, assignment, reading)}
            self._ask("signal", mine, nucleus, lambda rule, r=reading: self._signal_locus(spectrum, rule, r))
        for missing in assignment.missing:
            mine = facts | {"missing": missing_facts(self.case, spectrum, missing)}
            self._ask("missing", mine, nucleus, lambda rule: self._list_locus(spectrum, rule))

    def _list_locus(self, spectrum: SpectrumCase, rule: Rule) -> Locus:
        if rule.locus == "structure":
            return structure_locus(self.case)
        return spectrum_locus(spectrum) if rule.locus == "spectrum" else list_locus(spectrum)

    def _signal_locus(self, spectrum: SpectrumCase, rule: Rule, reading: SignalReading) -> Locus:
        marked = tuple(abs(j) for j in (*reading.impossible_j, *reading.unpaired_j))
        if rule.condition.source.find("j_unpaired") >= 0:
            marked = tuple(abs(j) for j in reading.unpaired_j)
        return signal_locus(spectrum, reading.signal, rule.locus, marked)

    def _ask(self, scope: str, facts: Facts, nucleus: str, locate: Any) -> None:
        soft = bool(facts.get("spectrum", {}).get("soft"))
        for rule in self.rulebook.of(scope):
            if rule.nuclei and nucleus not in rule.nuclei:
                continue
            if not self._speaks(rule, facts):
                continue
            level = rule.softened if soft else self._level(rule, facts)
            if level is not None:
                self.findings.append(self._finding(rule, level, facts, locate(rule), nucleus))

    def _level(self, rule: Rule, facts: Facts) -> Level:
        if rule.raised is not None and rule.raised_when is not None and self._holds(rule, rule.raised_when, facts):
            return rule.raised
        return rule.level

    def _speaks(self, rule: Rule, facts: Facts) -> bool:
        return self._holds(rule, rule.condition, facts)

    def _holds(self, rule: Rule, condition: Condition, facts: Facts) -> bool:
        try:
            return condition.holds(facts)
        except Exception as error:  # a rule of a user's pack may do anything; the others must still be asked
            if rule.id not in self.faults:
                self.faults.add(rule.id)
                words = f"the rule '{rule.id}' could not be asked: {type(error).__name__}: {error}"
                problem = Problem(FAULT_OF_A_RULE, words)
                self.findings.extend(self.about_problem(problem, structure_locus(self.case), ""))
            return False

    def about_problem(self, problem: Problem, locus: Locus, nucleus: str) -> Iterator[Finding]:
        """The finding of the rule that owns a problem's code: the longest code that fits."""
        owners = [
            (len(code), rule)
            for rule in self.rulebook.of("problem")
            for code in rule.codes
            if fnmatchcase(problem.code, code)
        ]
        facts: Facts = {
            "problem": {
                "code": problem.code, "says": problem.message, "expected": problem.expected, "blocks": problem.blocks,
            },
            "limits": self.limits,
        }  # fmt: skip
        for _, rule in sorted(owners, key=lambda owner: -owner[0]):
            if self._speaks(rule, facts):
                yield self._finding(rule, self._level(rule, facts), facts, locus, nucleus)
                return

    def _finding(self, rule: Rule, level: Level, facts: Facts, locus: Locus, nucleus: str) -> Finding:
        compound = self.case.reading.compound
        subject = fill(rule.subject, facts) if rule.subject else _subject(rule, facts, locus)
        used = {f"{group}.{name}": facts[group][name] for group, name in rule.condition.names if group != "limits"}
        return Finding(
            rule=rule.id, level=level, message=fill(rule.message, facts), locus=locus,
            place=self.case.reading.places.place(locus), remedy=fill(rule.remedy, facts), subject=subject,
            fingerprint=fingerprint(compound, rule.id, nucleus, subject), nucleus=nucleus, evidence=used,
        )  # fmt: skip


def _subject(rule: Rule, facts: Facts, locus: Locus) -> str:
    """What the finding is about, in a form that reformatting does not change."""
    if "signal" in facts:
        return f"{facts['signal']['shift']:.2f}"
    if "missing" in facts:
        return str(facts["missing"]["words"])
    if "mass" in facts:
        return str(facts["mass"]["ion"])
    if "elemental" in facts:
        return str(facts["elemental"]["element"])
    if "problem" in facts:
        return f"{facts['problem']['code']} {locus.pointer}"
    return rule.id
