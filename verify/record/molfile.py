"""A MOL file named in a record: read from beside it, and never from outside its registry."""

from __future__ import annotations

import os
from dataclasses import dataclass
from pathlib import Path, PureWindowsPath

from verify.record.decoding import Fault
from verify.record.source import UnfitFileError, read_bytes

MOST_MOLFILE_BYTES = 1_000_000
_EXPECTED = "the path of a MOL file in the record's folder, such as structure.mol"
_CODES = {
    "record-missing": "structure-file-missing",
    "record-too-large": "structure-file-too-large",
    "record-not-a-file": "structure-file-unreadable",
    "record-path-outside": "structure-path-outside",
}


@dataclass(frozen=True, slots=True)
class MolfileFolder:
    """Reads paths relative to ``folder``; what they lead to must lie in ``root``."""

    folder: str
    root: str

    def read(self, path: str) -> str:
        """The text of the MOL file at ``path``; raises UnfitFileError, its code "structure-..."."""
        if os.path.isabs(path) or PureWindowsPath(path).drive or PureWindowsPath(path).root:
            raise UnfitFileError(_outside(path, "is absolute"))
        target = os.path.join(self.folder, path)
        if not Path(os.path.realpath(target)).is_relative_to(os.path.realpath(self.root)):
            raise UnfitFileError(_outside(path, "leads out of the registry"))
        try:
            data = read_bytes(target, MOST_MOLFILE_BYTES)
        except UnfitFileError as unfit:
            raise UnfitFileError(_as_structure(unfit.fault, path)) from unfit
        return _text(data, path)


def _text(data: bytes, path: str) -> str:
    """Names in the header of old MOL files come in any encoding; the atoms are ASCII."""
    if b"\0" in data:
        raise UnfitFileError(
            Fault("structure-file-unreadable", f'the file "{path}" is binary', expected="a MOL file")
        )
    if not data.strip():
        raise UnfitFileError(
            Fault("structure-file-unreadable", f'the file "{path}" is empty', expected="a MOL file")
        )
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError:
        return data.decode("latin-1")


def _outside(path: str, why: str) -> Fault:
    return Fault("structure-path-outside", f'the path "{path}" {why}; it is not read', expected=_EXPECTED)


def _as_structure(fault: Fault, path: str) -> Fault:
    return Fault(_CODES[fault.code], f'the MOL file "{path}": {fault.message}', expected=_EXPECTED)
