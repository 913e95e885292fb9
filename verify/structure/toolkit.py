"""From structure text to a molecule of the toolkit, or to the reason why not."""

from __future__ import annotations

from dataclasses import dataclass, replace

from rdkit import Chem, rdBase

from verify.findings.location import Locus, Span
from verify.findings.problem import Problem
from verify.record.model import StructureText
from verify.structure.diagnosis import Fault, chemistry_fault, smiles_fault

LONGEST_TEXT = 200_000
FORMAT_WORDS = {"smiles": "SMILES", "molblock": "MOL file", "inchi": "InChI"}


@dataclass(frozen=True, slots=True)
class Parsed:
    """A sane molecule without explicit hydrogen, or the problem that prevents it."""

    mol: Chem.Mol | None
    problem: Problem | None


def parse(text: StructureText) -> Parsed:
    """Read SMILES (CXSMILES), MOL V2000/V3000 or InChI; the toolkit's log stays quiet meanwhile."""
    locus = Locus(text.pointer)
    stripped = text.text.strip()
    if not stripped:
        return Parsed(None, Problem("structure-empty", "no structure is given", locus, blocks="record"))
    if len(stripped) > LONGEST_TEXT:
        message = f"the structure text has {len(stripped)} characters; at most {LONGEST_TEXT} are read"
        return Parsed(None, Problem("structure-too-large", message, locus, blocks="record"))
    with rdBase.BlockLogs():
        mol, fault = _read(text.format, text.text)
    if mol is not None and mol.GetNumAtoms() == 0:
        return Parsed(None, Problem("structure-empty", "the structure has no atoms", locus, blocks="record"))
    if mol is not None:
        return Parsed(mol, None)
    fault = fault or Fault("it could not be read")
    code = "structure-unreadable" if fault.span or "valence" not in fault.words else "structure-valence"
    words = FORMAT_WORDS.get(text.format, text.format)
    problem = Problem(code, f"the {words} cannot be read: {fault.words}", locus, blocks="record", expected=words)
    return Parsed(None, replace(problem, locus=Locus(text.pointer, span=fault.span)))


def parse_smiles(smiles: str) -> Chem.Mol | None:
    """Read a SMILES of a declared component; None if it cannot be read or is empty."""
    if not smiles.strip() or len(smiles) > LONGEST_TEXT:
        return None
    with rdBase.BlockLogs():
        mol, _ = _read("smiles", smiles)
    return mol if mol is not None and mol.GetNumAtoms() else None


def _read(style: str, text: str) -> tuple[Chem.Mol | None, Fault | None]:
    """Molecule and, where there is none, the fault."""
    if style == "smiles":
        return _read_smiles(text)
    if style == "molblock":
        return _read_molblock(text)
    if style == "inchi":
        return _read_inchi(text.strip())
    return None, Fault(f"the format {style!r} is not known")


def _read_smiles(text: str) -> tuple[Chem.Mol | None, Fault | None]:
    core = text.strip()
    mol = Chem.MolFromSmiles(core)
    if mol is not None:
        return mol, None
    raw = Chem.MolFromSmiles(core, sanitize=False)
    fault = chemistry_fault(raw) if raw is not None else None
    if fault is not None:
        return None, fault
    fault = smiles_fault(core.split()[0])
    shift = len(text) - len(text.lstrip())
    if fault.span and shift:
        fault = Fault(fault.words, Span(fault.span.start + shift, fault.span.end + shift))
    return None, fault


def _read_molblock(text: str) -> tuple[Chem.Mol | None, Fault | None]:
    block = text.replace("\r\n", "\n").replace("\r", "\n")
    try:
        mol = Chem.MolFromMolBlock(block, sanitize=True, removeHs=True)
        raw = mol if mol is not None else Chem.MolFromMolBlock(block, sanitize=False, strictParsing=False)
    except (RuntimeError, ValueError) as error:  # the toolkit raises on some malformed counts lines
        return None, Fault(str(error).strip().splitlines()[-1] if str(error).strip() else "it is malformed")
    if mol is not None:
        return mol, None
    if raw is None:
        return None, Fault("its header, counts line, atom block or bond block is malformed")
    return None, chemistry_fault(raw) or Fault("it is malformed")


def _read_inchi(text: str) -> tuple[Chem.Mol | None, Fault | None]:
    if not text.startswith("InChI="):
        return None, Fault("it does not begin with InChI=", Span(0, min(6, len(text))))
    mol = Chem.MolFromInchi(text)
    return mol, None if mol is not None else Fault("a layer of it is malformed")
