"""Whether a structure holds a nitrogen that ordinary acids protonate."""

from __future__ import annotations

from rdkit import Chem

_BASIC = tuple(
    Chem.MolFromSmarts(pattern)
    for pattern in (
        "[NX3;+0;!$(N[C,S,P]=[O,S,N]);!$(N[#7]);!$(NC#N);!$(N[#8])]",  # amines and anilines
        "[nX2;+0]",  # azines and azoles
        "[NX2;+0]=[CX3][NX3]",  # amidines and guanidines
        "[NX2;+0;!$(N[#7,#8])]=[CX3]",  # imines
    )
)


def has_basic_nitrogen(mol: Chem.Mol) -> bool:
    """True for amines, azines, azoles, amidines and imines (common practice: what forms hydrochlorides)."""
    return any(mol.HasSubstructMatch(pattern) for pattern in _BASIC)
