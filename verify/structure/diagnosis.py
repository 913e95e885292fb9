"""Why a structure text could not be read, and at which characters.

The toolkit tells a syntax fault only to its log; this reads the text itself, so nothing global is touched.
"""

from __future__ import annotations

from dataclasses import dataclass

from rdkit import Chem

from verify.findings.location import Span

BARE_ATOMS = ("Cl", "Br", "B", "C", "N", "O", "P", "S", "F", "I", "b", "c", "n", "o", "p", "s", "*")
BOND_MARKS = frozenset("-=#$:/\\.~")


@dataclass(frozen=True, slots=True)
class Fault:
    """What is wrong in words, and where in the text if that is known."""

    words: str
    span: Span | None = None


def smiles_fault(text: str) -> Fault:
    """First fault of a SMILES: brackets, parentheses, ring bonds or a character that is no atom."""
    rings: dict[str, int] = {}
    opened: list[int] = []
    at = 0
    while at < len(text):
        char = text[at]
        if char == "[":
            end = text.find("]", at)
            if end < 0:
                return Fault("a bracket atom is not closed", Span(at, len(text)))
            at = end + 1
            continue
        if char == "(":
            opened.append(at)
        elif char == ")":
            if not opened:
                return Fault("a branch is closed that was never opened", Span(at, at + 1))
            opened.pop()
        elif char.isdigit() or char == "%":
            label, at = _ring_label(text, at)
            if rings.pop(label, None) is None:
                rings[label] = at
            continue
        elif char not in BOND_MARKS:
            atom = next((a for a in BARE_ATOMS if text.startswith(a, at)), "")
            if not atom:
                return Fault(f"{char!r} is no atom, bond or ring mark", Span(at, at + 1))
            at += len(atom)
            continue
        at += 1
    if opened:
        return Fault("a branch is not closed", Span(opened[0], opened[0] + 1))
    if rings:
        label, end = min(rings.items(), key=lambda item: item[1])
        return Fault(f"ring bond {label} is not closed", Span(end - len(label), end))
    return Fault("it is no valid SMILES")


def _ring_label(text: str, at: int) -> tuple[str, int]:
    """Ring label starting at ``at`` and the position behind it."""
    if text[at] != "%":
        return text[at], at + 1
    if text.startswith("(", at + 1) and ")" in text[at:]:
        end = text.index(")", at) + 1
        return text[at:end], end
    return text[at : at + 3], min(at + 3, len(text))


def chemistry_fault(mol: Chem.Mol) -> Fault | None:
    """First fault of valence or aromaticity of a molecule that parsed but is not sound; None if there is none."""
    for problem in Chem.DetectChemistryProblems(mol):
        return Fault(str(problem.Message()))
    return None
