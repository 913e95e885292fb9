"""The life of an accepted deviation: read, matched, expired, without match, and met only by the registry."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from verify.errors import ConfigurationError
from verify.findings.finding import Deviation
from verify.findings.location import Locus, Place
from verify.findings.result import RecordResult, Verdict
from verify.record.model import RecordReading
from verify.rulebook.deviations import accept, fingerprint, load_deviations
from verify.rulebook.model import RecordCase
from verify.rulebook.registry import judge_in_registry
from verify.rulebook.source import load_rulebook
from verify.rulebook.stage import judge


class _Nowhere:
    """Places of a record that stands in no file."""

    def place(self, locus: Locus) -> Place | None:  # noqa: ARG002 - as the protocol names it
        return None


RULEBOOK = load_rulebook()
FACTS = {"registry": {"same_id": "", "same_structure": "B", "same_list": "", "nucleus": ""}}
CASE = RecordCase(RecordReading("A", "", None, (), _Nowhere()))
PLAIN = RecordResult("A", "", Verdict.CONSISTENT, ())


def _deviation(mark: str, expires: str = "2027-01-01") -> Deviation:
    return Deviation("A", mark, "looked at again", "N. Muster", "2026-01-01", expires)


def _entry(**changes: str) -> str:
    entry = {
        "compound": "A", "fingerprint": "0" * 16, "reason": "looked at again", "accepted_by": "N. Muster",
        "accepted_on": "2026-01-01", "expires_on": "2027-01-01",
    } | changes  # fmt: skip
    return "".join(f"{'- ' if n == 0 else '  '}{key}: \"{value}\"\n" for n, (key, value) in enumerate(entry.items()))


def test_a_fingerprint_is_sixteen_digits_of_what_is_told() -> None:
    mark = fingerprint("A", "r", "1H", "7.26")
    assert mark == "b7ed071c61ddbb93"  # source: sha256sum (GNU coreutils) of the four words, one a line
    assert len({mark, fingerprint("B", "r", "1H", "7.26"), fingerprint("A", "r", "13C", "7.26")}) == 3


@pytest.mark.parametrize(
    ("text", "words"),
    [
        (_entry(expires_on="2027-02-30"), "deviations/0/expires_on"),
        (_entry(fingerprint="xyz"), "deviations/0/fingerprint"),
        (_entry(reason=""), "deviations/0/reason"),
        (_entry() + _entry(), "accepts 0000000000000000 twice"),
        (_entry() + "  acepted_by: x\n", "did you mean 'accepted_by'"),
    ],
)
def test_a_faulty_entry_names_file_and_key(tmp_path: Path, text: str, words: str) -> None:
    path = tmp_path / "deviations.yaml"
    path.write_text(f"deviations:\n{text}", encoding="utf-8")
    with pytest.raises(ConfigurationError, match=words) as told:
        load_deviations(path)
    assert "deviations.yaml" in str(told.value)


@pytest.mark.parametrize(("today", "stands"), [("2026-12-31", False), ("2027-01-01", False), ("2027-01-02", True)])
def test_a_deviation_accepts_to_the_end_of_its_last_day(today: str, stands: bool) -> None:
    judged = judge_in_registry(PLAIN, FACTS, {}, RULEBOOK)
    (finding,) = judged.findings
    (after,) = accept([finding], [_deviation(finding.fingerprint)], today)
    assert after.stands is stands
    assert replace(after, deviation=None) == finding


def test_two_deviations_without_match_are_two_findings() -> None:
    found = judge(CASE, RULEBOOK, (_deviation("0" * 16), _deviation("1" * 16)), "2026-06-01")
    unmatched = [f for f in found if f.rule == "deviation-unmatched"]
    assert {f.subject for f in unmatched} == {"0" * 16, "1" * 16}
    assert len({f.fingerprint for f in unmatched}) == 2


def test_a_deviation_that_only_the_registry_meets_is_not_called_unmatched() -> None:
    (told,) = judge_in_registry(PLAIN, FACTS, {}, RULEBOOK).findings
    deviations = (_deviation(told.fingerprint), _deviation("1" * 16))
    alone = judge(CASE, RULEBOOK, deviations, "2026-06-01")
    judged = judge_in_registry(replace(PLAIN, findings=alone), FACTS, {}, RULEBOOK)
    assert [f.subject for f in judged.findings if f.rule == "deviation-unmatched"] == ["1" * 16]
