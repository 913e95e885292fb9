"""Options that name a structure and its lists, shared by the commands that judge one compound."""

from __future__ import annotations

import argparse
from typing import Any

from verify.cli.files import read_text
from verify.cli.parsing import frequency
from verify.errors import UsageError
from verify.pipeline.reach import TO_PROTON

LISTS = {"h1": "1H", "c13": "13C", "f19": "19F", "p31": "31P"}
COMPOUND = "compound"


def add_structure(parser: argparse.ArgumentParser) -> None:
    """Adds --smiles, --molfile and --inchi, of which one may be given."""
    which = parser.add_mutually_exclusive_group()
    which.add_argument("--smiles", metavar="SMILES", help="the structure")
    which.add_argument("--molfile", metavar="FILE", help="the structure as a MOL file (V2000 or V3000)")
    which.add_argument("--inchi", metavar="INCHI", help="the structure as InChI")


def add_lists(parser: argparse.ArgumentParser) -> None:
    """Adds --h1, --c13, --f19, --p31, --solvent and --mhz."""
    for key, nucleus in LISTS.items():
        parser.add_argument(f"--{key}", metavar="TEXT", help=f"the {nucleus} list as reported")
    parser.add_argument("--solvent", metavar="NAME", help="solvent of the spectra, such as CDCl3")
    parser.add_argument("--mhz", metavar="N", type=frequency, help="1H frequency of the magnet in MHz")


def structure_of(given: argparse.Namespace) -> dict[str, str]:
    """The structure as a record holds it; raises UsageError where none is given."""
    if given.smiles is not None:
        return {"smiles": given.smiles}
    if given.inchi is not None:
        return {"inchi": given.inchi}
    if given.molfile is not None:
        return {"molblock": read_text(given.molfile)}
    raise UsageError("no structure is given; expected --smiles SMILES, --molfile FILE or --inchi INCHI")


def record_of(given: argparse.Namespace) -> dict[str, Any]:
    """The mapping of a record from the options; raises UsageError where structure or lists lack."""
    structure = structure_of(given)
    spectra = [
        _spectrum(given, key, nucleus) for key, nucleus in LISTS.items() if getattr(given, key) is not None
    ]
    if not spectra:
        raise UsageError("no list is given; expected --h1 TEXT, --c13 TEXT, --f19 TEXT or --p31 TEXT")
    return {"compound": COMPOUND, "structure": structure, "spectra": spectra}


def lists_given(given: argparse.Namespace) -> list[str]:
    """Options of structure and lists that were given, for a command that takes a file instead."""
    names = ("smiles", "molfile", "inchi", *LISTS, "solvent", "mhz")
    return [f"--{name}" for name in names if getattr(given, name) is not None]


def _spectrum(given: argparse.Namespace, key: str, nucleus: str) -> dict[str, Any]:
    spectrum: dict[str, Any] = {"nucleus": nucleus, "report": getattr(given, key)}
    if given.solvent is not None:
        spectrum["solvent"] = given.solvent
    if given.mhz is not None:
        spectrum["field_mhz"] = round(given.mhz * TO_PROTON[nucleus], 1)
    return spectrum
