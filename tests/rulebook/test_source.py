"""Shipped files keep to their schemas, though loading trusts them; faults of a pack name file, key and nearest name."""

from __future__ import annotations

import json
from importlib.resources import files
from pathlib import Path
from typing import Any

import jsonschema
import pytest
import yaml

from verify.errors import ConfigurationError
from verify.findings.result import RecordResult, Verdict
from verify.resources import shipped
from verify.rulebook.registry import judge_in_registry
from verify.rulebook.source import NOT_RULES, load_rulebook, read_pack

RULES = Path(str(shipped()))
FAMILIES = sorted(p for p in RULES.glob("*/*.yaml") if p.parent.name not in NOT_RULES)
POLICIES = sorted((RULES / "policies").glob("*.yaml"))
RULE: dict[str, Any] = {
    "id": "too-far", "title": "A shift too far down", "scope": "signal", "level": "note",
    "when": "signal.shift > 20.0", "message": "{signal.words} is far", "remedy": "Look at it again.",
    "basis": "common practice", "locus": "shift",
    "examples": [{"says": "far", "facts": {"signal.shift": 21.0}, "fires": True}, {"says": "near", "fires": False}],
}  # fmt: skip


def _schema(name: str) -> jsonschema.Draft202012Validator:
    text = files("verify.rulebook").joinpath(f"{name}.schema.json").read_text(encoding="utf-8")
    return jsonschema.Draft202012Validator(json.loads(text))


@pytest.mark.parametrize(("schema", "paths"), [("rule", FAMILIES), ("policy", POLICIES)])
def test_shipped_files_keep_to_their_schema(schema: str, paths: list[Path]) -> None:
    validator = _schema(schema)
    assert paths
    for path in paths:
        found = yaml.safe_load(path.read_text(encoding="utf-8"))
        assert [f"{path.name}: {e.message}" for e in validator.iter_errors(found)] == []


def test_no_id_is_shipped_twice() -> None:
    assert len({path.name for path in FAMILIES}) == len(FAMILIES)


def _pack(folder: Path, **changes: Any) -> Path:
    rule = RULE | changes
    (folder / f"{RULE['id']}.yaml").write_text(yaml.safe_dump(rule), encoding="utf-8")
    return folder


def test_a_pack_is_read(tmp_path: Path) -> None:
    assert [rule.id for rule in read_pack(_pack(tmp_path))] == ["too-far"]


def test_an_id_twice_in_a_pack_is_refused(tmp_path: Path) -> None:
    for name in ("one", "two"):
        (tmp_path / name).mkdir()
        _pack(tmp_path / name)
    with pytest.raises(ConfigurationError, match=r"two/too-far\.yaml: the id 'too-far' is that of .*one/"):
        read_pack(tmp_path)


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"when": "signal.shft > 1.0"}, "no fact 'signal.shft'; did you mean 'shift'"),
        ({"when": "sgnal.shift > 1.0"}, "did you mean 'signal'"),
        ({"when": "shift > 1.0"}, "'shift' alone is no fact"),
        ({"message": "{signal.shft} is far"}, "message: .*did you mean 'shift'"),
        ({"remdy": "x"}, "did you mean 'remedy'"),
        ({"level": "fatal"}, "level: 'fatal' is not one of"),
        ({"id": "other"}, "the file's name says 'too-far'"),
        ({"scope": "mass"}, "has no facts 'signal"),
    ],
)
def test_a_faulty_rule_names_file_key_and_nearest(tmp_path: Path, changes: dict[str, Any], words: str) -> None:
    with pytest.raises(ConfigurationError, match=words) as told:
        read_pack(_pack(tmp_path, **changes))
    assert "too-far.yaml" in str(told.value)


def test_a_registry_rule_that_breaks_is_told_and_stops_no_other(tmp_path: Path) -> None:
    odd = {"scope": "registry", "when": "registry.same_id > 1.0", "message": "never said", "locus": "record"}
    rulebook = load_rulebook(packs=(str(_pack(tmp_path, **odd, examples=RULE["examples"][1:] * 2)),))
    facts = {"registry": {"same_id": "a.yaml", "same_structure": "", "same_list": "", "nucleus": ""}}
    judged = judge_in_registry(RecordResult("A", "", Verdict.CONSISTENT, ()), facts, {}, rulebook)
    assert {f.rule for f in judged.findings} == {"duplicate-compound", "rule-fault"}
