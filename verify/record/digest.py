"""A digest of what a record says: equal for two records that differ in formatting only."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Mapping
from dataclasses import fields, is_dataclass

from verify.record.model import Record

_NOT_MEANING = frozenset(
    {"file", "pointer", "notes", "extra"}
)  # where it stands, and words that nothing judges


def digest_of(record: Record) -> str:
    """SHA-256 (hex) over the record's values: key order, quoting, comments, ``1`` or ``1.0`` do not matter.

    The texts of the lists count character by character, and a MOL file by its text, not by its path.
    """
    canonical = json.dumps(_plain(record), sort_keys=True, ensure_ascii=True, separators=(",", ":"))
    return hashlib.sha256(canonical.encode("ascii")).hexdigest()


def _plain(value: object) -> object:
    if is_dataclass(value):
        named = ((f.name, getattr(value, f.name)) for f in fields(value) if f.name not in _NOT_MEANING)
        # what is not given is left out, so that a field the model gains later changes no digest
        return {name: _plain(held) for name, held in named if held is not None and held != () and held != {}}
    if isinstance(value, Mapping):
        return {str(key): _plain(held) for key, held in value.items()}
    if isinstance(value, list | tuple):
        return [_plain(held) for held in value]
    if isinstance(value, bool) or value is None or isinstance(value, str):
        return value
    if isinstance(value, int) and abs(value) > 2**53:  # beyond what a float holds exactly
        return str(value)
    return float(value) if isinstance(value, int | float) else repr(value)
