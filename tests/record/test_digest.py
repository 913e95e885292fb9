"""The digest follows what a record says, not how it is typed."""

from __future__ import annotations

import pytest

from verify.record.digest import digest_of
from verify.record.settings import Defaults, ReadingSettings
from verify.record.stage import Surroundings, read_record

PLAIN = """\
compound: A
structure: {smiles: CCO}
spectra:
  - {nucleus: 1H, field_mhz: 400, report: "3.7 (q, 2H), 1.2 (t, 3H)"}
mass: [{ion: "[M+H]+", calculated: 47.0491}]
elemental: {found: {C: 52, H: 13.1}}
"""
OTHERWISE_TYPED = """\
# the same
mass:
  - calculated: 47.04910
    ion: '[M+H]+'
spectra:
  - report: >-
      3.7 (q, 2H),
      1.2 (t, 3H)
    "field_mhz": 400.0
    nucleus: 1H
    solvent:
elemental:
  found:
    H: 13.10
    C: 52.0
notes: words
structure:
  smiles: "CCO"
compound: "A"
"""
NO_DEFAULTS = Defaults()
CHANGES = [
    ("CCO", "CCN"),
    ("compound: A", "compound: B"),
    ("400", "500"),
    ("(q, 2H)", "(q,2H)"),
    ("47.0491", "47.0492"),
    ("13.1", "13.2"),
    ("1H,", "13C,"),
    ("smiles: CCO", "inchi: InChI=1S/CCO"),
]


def _digest(text: str, defaults: Defaults = NO_DEFAULTS) -> str:
    record = read_record(
        text.encode("utf-8"), "r.yaml", Surroundings(ReadingSettings(defaults=defaults))
    ).record
    assert record is not None
    return digest_of(record)


def test_formatting_does_not_matter() -> None:
    assert _digest(PLAIN) == _digest(OTHERWISE_TYPED)
    assert len(_digest(PLAIN)) == 64


@pytest.mark.parametrize(("old", "new"), CHANGES)
def test_every_change_of_meaning_matters(old: str, new: str) -> None:
    assert old in PLAIN
    assert _digest(PLAIN.replace(old, new, 1)) != _digest(PLAIN)


def test_defaults_of_the_registry_matter() -> None:
    assert _digest(PLAIN, Defaults(solvent="CDCl3")) != _digest(PLAIN)


def test_digest_is_the_same_in_every_process_and_version_of_python() -> None:
    """Caches outlive a process: a change of this value makes every cached result of every user void."""
    assert _digest(PLAIN) == "470374f100bd5bc7d05d2304f0cfb9785c08e1ab3c0cef3dae2e51365b041c00"
