"""A registry's settings are read whole, or refused with file, line, column and what was expected."""

from __future__ import annotations

import pickle
from pathlib import Path

import pytest

from verify.errors import ConfigurationError
from verify.record.registry import load_registry
from verify.record.settings import Defaults

WHOLE = """\
name: Aroma
description: >-
  Invented,
  all of it.
id_pattern: "ARO-[0-9]{4}"
policy: registration
defaults: {solvent: CDCl3, temperature_k: 298, field_mhz: {1H: 400, 13C: 101}}
required_spectra: [1H, 13C]
rules: [rules, ../common/pack.yaml]
deviations: accepted.yaml
x-owner: QA
"""


def _registry(folder: Path, text: str) -> str:
    (folder / "registry.yaml").write_text(text, encoding="utf-8")
    return str(folder)


def test_whole_settings(tmp_path: Path) -> None:
    folder = tmp_path / "registry"
    (folder / "rules").mkdir(parents=True)
    (tmp_path / "common").mkdir()
    for path in (folder / "accepted.yaml", tmp_path / "common" / "pack.yaml"):
        path.write_text("x: []\n", encoding="utf-8")
    settings = load_registry(_registry(folder, WHOLE))
    assert (settings.name, settings.description, settings.policy) == (
        "Aroma",
        "Invented, all of it.",
        "registration",
    )
    assert settings.reading.id_pattern == "ARO-[0-9]{4}"
    assert settings.reading.defaults == Defaults("CDCl3", 298, (("13C", 101.0), ("1H", 400.0)))
    assert settings.reading.defaults.field_mhz("13C") == 101.0
    assert settings.reading.defaults.field_mhz("19F") is None
    assert settings.required_spectra == ("1H", "13C")
    assert settings.rule_packs == (str(folder / "rules"), str(tmp_path / "common" / "pack.yaml"))
    assert settings.deviations == str(folder / "accepted.yaml")
    assert pickle.loads(pickle.dumps(settings)) == settings


def test_settings_may_be_all_but_empty(tmp_path: Path) -> None:
    settings = load_registry(_registry(tmp_path, "name:\n"))
    assert (settings.name, settings.policy, settings.deviations, settings.rule_packs) == ("", "", "", ())
    assert settings.required_spectra is None
    assert settings.reading.id_pattern == ""


def test_deviations_beside_the_settings_are_found(tmp_path: Path) -> None:
    (tmp_path / "deviations.yaml").write_text("deviations: []\n", encoding="utf-8")
    assert load_registry(_registry(tmp_path, "name: x\n")).deviations == str(tmp_path / "deviations.yaml")


def test_policy_is_a_name_or_a_file_beside_the_settings(tmp_path: Path) -> None:
    (tmp_path / "own.yaml").write_text("extends: registration\n", encoding="utf-8")
    assert load_registry(_registry(tmp_path, "policy: own.yaml\n")).policy == str(tmp_path / "own.yaml")
    assert load_registry(_registry(tmp_path, "policy: bench\n")).policy == "bench"


@pytest.mark.parametrize(
    ("text", "place", "words"),
    [
        ("", ":1:1: ", "empty"),
        ("- a\n", ":1:1: ", "a list"),
        ("name: x\npolicy: [a]\n", ":2:9: ", "the name of a policy"),
        ("name: x\npolizy: a\n", ":2:1: ", 'did you mean "policy"?'),
        ("solvent: CDCl3\n", ":1:1: ", 'it belongs under "defaults"'),
        ('name: x\nid_pattern: "ARO-["\n', ":2:14: ", "regular expression"),
        ("defaults: {field_mhz: {1H: 4}}\n", ":1:28: ", "5 to 1500"),
        ("defaults: {field_mhz: {H: 400}}\n", ":1:24: ", "1H, 13C"),
        ("required_spectra: [1H, 2H]\n", ":1:24: ", "1H, 13C"),
        ("deviations: none.yaml\n", ":1:13: ", '"none.yaml"'),
        ("rules: [none]\n", ":1:9: ", '"none"'),
        ("policy: none.yaml\n", ":1:9: ", '"none.yaml"'),
        ("name: a\nname: b\n", ":2:1: ", "twice"),
        ("name: 'a\n", ":1:7: ", "quote"),
    ],
)
def test_wrong_settings_are_refused_at_their_place(tmp_path: Path, text: str, place: str, words: str) -> None:
    folder = _registry(tmp_path, text)
    with pytest.raises(ConfigurationError) as caught:
        load_registry(folder)
    assert f"registry.yaml{place}" in str(caught.value)
    assert words in str(caught.value)


def test_all_that_is_wrong_is_said_at_once(tmp_path: Path) -> None:
    with pytest.raises(ConfigurationError) as caught:
        load_registry(_registry(tmp_path, "polizy: a\nname: [x]\nrules: y\n"))
    assert len(str(caught.value).splitlines()) == 3
