"""What only the registry as a whole shows: ids used twice, structures and lists that stand under two ids.

Results stream through in order; of each record only short digests are kept.
"""

from __future__ import annotations

import hashlib
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace

from verify.findings.finding import Deviation, Finding, Level
from verify.findings.location import Locus, Place
from verify.findings.result import RecordResult, verdict_of
from verify.rulebook.deviations import accept, fingerprint
from verify.rulebook.model import Rulebook
from verify.rulebook.registry import judge_in_registry

FEWEST_SIGNALS = 3  # shorter lists may agree by chance


def _digest(text: str) -> str:
    return hashlib.sha256(text.encode()).hexdigest()[:20]


def list_digests(result: RecordResult) -> dict[str, str]:
    """Digest of each list of enough signals, by nucleus: shifts, letters and counts, not the words around them."""
    found: dict[str, str] = {}
    for spectrum in result.assignment:
        signals = spectrum["signals"]
        if len(signals) < FEWEST_SIGNALS:
            continue
        key = ";".join(f"{s['low']:.2f}-{s['high']:.2f} {s['letters']} {s['nuclei']}" for s in signals)
        found[spectrum["nucleus"]] = _digest(key)
    return found


class Watch:
    """Sees every result once, in order."""

    def __init__(self, rulebook: Rulebook, deviations: Sequence[Deviation], today: str) -> None:
        self.rulebook, self.deviations, self.today = rulebook, tuple(deviations), today
        self.files: dict[str, str] = {}
        self.structures: dict[str, str] = {}
        self.lists: dict[tuple[str, str], tuple[str, str]] = {}

    def see(self, results: Iterable[RecordResult]) -> Iterator[RecordResult]:
        """Results with what the registry says about them."""
        for result in results:
            yield self._one(result)

    def _one(self, result: RecordResult) -> RecordResult:
        smiles = _digest(str(result.summary.get("smiles", ""))) if result.summary.get("smiles") else ""
        facts = {"registry": self._facts(result, smiles)}
        self.files.setdefault(result.compound, result.file)
        if smiles:
            self.structures.setdefault(smiles, result.compound)
        for nucleus, digest in list_digests(result).items():
            self.lists.setdefault((nucleus, digest), (result.compound, smiles))
        if not any(facts["registry"][name] for name in ("same_id", "same_structure", "same_list")):
            return result
        place = Place(result.file, 1, 1, 1, 1) if result.file else None
        judged = judge_in_registry(result, facts, {"record": place, "structure": place}, self.rulebook)
        mine = [d for d in self.deviations if d.compound == result.compound]
        return _accepted(judged, mine, self.today)

    def _facts(self, result: RecordResult, smiles: str) -> dict[str, str]:
        same_id = self.files.get(result.compound, "")
        same_structure = self.structures.get(smiles, "") if smiles else ""
        same_list, nucleus = "", ""
        for name, digest in list_digests(result).items():
            other, structure = self.lists.get((name, digest), ("", ""))
            if other and structure != smiles:
                same_list, nucleus = other, name
        return {
            "same_id": same_id, "same_structure": "" if same_id else same_structure, "same_list": same_list,
            "nucleus": nucleus,
        }  # fmt: skip

    def close(self) -> tuple[Finding, ...]:
        """Deviations of compounds that were not in the run."""
        missing = sorted({d.compound for d in self.deviations} - set(self.files))
        return tuple(_orphan(compound) for compound in missing)


def _accepted(result: RecordResult, deviations: Sequence[Deviation], today: str) -> RecordResult:
    findings = accept(result.findings, deviations, today)
    return replace(result, findings=findings, verdict=verdict_of(findings, bool(result.unassessed_because)))


def _orphan(compound: str) -> Finding:
    message = f"deviations are accepted for {compound}, which is not among the records"
    mark = fingerprint(compound, "deviation-unmatched", "", compound)
    remedy = "Take them out of the deviations file."
    return Finding("deviation-unmatched", Level.NOTE, message, Locus(), None, remedy, compound, mark)
