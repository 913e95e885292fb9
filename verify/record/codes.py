"""Every code that a problem of a record can carry, with what it means; rules on problems speak of these."""

from __future__ import annotations

from collections.abc import Mapping
from types import MappingProxyType

PROBLEM_CODES: Mapping[str, str] = MappingProxyType(
    {
        "compound-id-mismatch": "the id typed in the record is not the name of its folder",
        "compound-id-pattern": "the id does not follow the pattern of the registry",
        "record-alias-bomb": "aliases blow the file up beyond what is read",
        "record-alias-unknown": "an alias has no anchor, or stands inside the value it repeats",
        "record-duplicate-key": "a key stands twice in one group; the first is read",
        "record-empty": "the file holds nothing",
        "record-key-missing": "a key without which a part cannot be used is missing",
        "record-many-documents": "the file holds more than one document",
        "record-many-faults": "the file breaks the schema more often than is told",
        "record-misplaced": "a record stands outside a folder of its own",
        "record-missing": "the folder of a compound holds no record",
        "record-not-a-file": "the record is a folder, pipe or device, or cannot be opened",
        "record-not-a-record": "the file holds a list or a text instead of keys with values",
        "record-not-text": "the file is binary, in another encoding, or holds control characters",
        "record-path-outside": "the record is a link, or its folder leads out of the registry",
        "record-syntax": "the file is not valid YAML",
        "record-tab": "a tab stands where only spaces may",
        "record-tag": "a value carries a tag that is not allowed or does not fit",
        "record-too-deep": "values are nested deeper than is read",
        "record-too-large": "the file, or the number of values in it, is larger than is read",
        "record-too-many": "a list has more items than are read",
        "record-unknown-key": "a key is not known",
        "record-wrong-type": "a value is of the wrong kind",
        "record-wrong-value": "a value is of the right kind but cannot be",
        "spectrum-list-missing": "a spectrum has neither a report nor signals",
        "spectrum-list-twice": "a spectrum has a report and signals; the report is read",
        "structure-ambiguous": "the structure is given more than once",
        "structure-file-missing": "the MOL file is not there",
        "structure-file-too-large": "the MOL file is larger than is read",
        "structure-file-unreadable": "the MOL file is empty, binary, or cannot be opened",
        "structure-missing": "the record has no structure",
        "structure-path-outside": "the path of the MOL file leads out of the registry",
    }
)
