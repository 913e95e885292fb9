"""Draws a structure with numbered atoms, as SVG of the toolkit's own making without its frame."""

from __future__ import annotations

import re
from typing import Any

from rdkit import Chem
from rdkit.Chem.Draw import rdMolDraw2D

_BODY = re.compile(r"<svg[^>]*>(.*)</svg>", re.DOTALL)


def structure_svg(mol: Chem.Mol, width: int, height: int, labels: dict[int, str]) -> str:
    """The inner elements of an SVG of ``width`` x ``height`` px; ``labels``: heavy atom to the text beside it."""
    bare = Chem.RemoveHs(mol)
    for atom, label in labels.items():
        if atom < bare.GetNumAtoms():
            bare.GetAtomWithIdx(atom).SetProp("atomNote", label)
    drawer = rdMolDraw2D.MolDraw2DSVG(width, height)
    options: Any = drawer.drawOptions()  # its stubs give every option the wrong type
    options.clearBackground = False
    options.useBWAtomPalette()
    options.annotationFontScale = 0.62
    rdMolDraw2D.PrepareAndDrawMolecule(drawer, bare)
    drawer.FinishDrawing()
    found = _BODY.search(drawer.GetDrawingText())
    return found.group(1) if found else ""
