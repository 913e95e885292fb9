"""The stage: structure text in, ``Structure`` out, with what could not be read."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from rdkit import Chem

from verify.findings.location import Locus
from verify.findings.problem import Problem
from verify.record.model import ComponentText, StructureText
from verify.structure.components import drawn_components, known_companions
from verify.structure.composition import formula_of
from verify.structure.model import Component, Structure
from verify.structure.stereo import is_declared_mixture, stereo_state
from verify.structure.toolkit import parse, parse_smiles

MOST_HEAVY_ATOMS = 300
MOST_ATOMS = 500
# Transition metals and lanthanides: unpaired electrons may widen or shift every line
METALS = frozenset([*range(21, 31), *range(39, 49), *range(57, 81)])


@dataclass(frozen=True, slots=True)
class StructureReading:
    """``structure`` is None only if a problem blocks the record."""

    structure: Structure | None
    problems: tuple[Problem, ...]


def read_structure(text: StructureText, components: Sequence[ComponentText] = ()) -> StructureReading:
    """Read a structure and its declared components (any format of ``StructureText``)."""
    parsed = parse(text)
    if parsed.mol is None:
        return StructureReading(None, (parsed.problem,) if parsed.problem else ())
    mol = _heavy_first(parsed.mol)
    locus = Locus(text.pointer)
    too_large = _size_problem(mol, locus)
    if too_large:
        return StructureReading(None, (too_large,))
    problems = [] if _has_carbon(mol) else [_no_carbon(locus)]
    drawn = drawn_components(mol)
    declared, faults = _declared(components)
    problems += faults
    whole = _joined(mol, drawn, declared)
    return StructureReading(whole, tuple(problems))


def _heavy_first(mol: Chem.Mol) -> Chem.Mol:
    """Labelled hydrogen moved behind the heavy atoms, which keep the order of the input."""
    order = sorted(range(mol.GetNumAtoms()), key=lambda i: mol.GetAtomWithIdx(i).GetAtomicNum() == 1)
    return mol if order == list(range(len(order))) else Chem.RenumberAtoms(mol, order)


def _size_problem(mol: Chem.Mol, locus: Locus) -> Problem | None:
    heavy = mol.GetNumHeavyAtoms()
    total = mol.GetNumAtoms() + sum(mol.GetAtomWithIdx(n).GetTotalNumHs() for n in range(mol.GetNumAtoms()))
    if heavy <= MOST_HEAVY_ATOMS and total <= MOST_ATOMS:
        return None
    message = (f"the structure has {heavy} heavy atoms; structures of more than {MOST_HEAVY_ATOMS} heavy atoms "
               f"or {MOST_ATOMS} atoms in all are not judged")
    return Problem("structure-too-large", message, locus, blocks="record", evidence={"heavy_atoms": heavy})


def _has_carbon(mol: Chem.Mol) -> bool:
    return any(mol.GetAtomWithIdx(n).GetAtomicNum() == 6 for n in range(mol.GetNumAtoms()))


def _no_carbon(locus: Locus) -> Problem:
    return Problem("structure-no-carbon", "the structure holds no carbon; no 13C list can be judged by it", locus)


def _declared(texts: Sequence[ComponentText]) -> tuple[list[Component], list[Problem]]:
    """Components given beside the drawing; what cannot be read is told and left out."""
    companions = known_companions()
    found: list[Component] = []
    problems: list[Problem] = []
    for text in texts:
        mol = parse_smiles(text.smiles)
        if mol is None or not 0 < text.per_molecule < 1000 or mol.GetNumAtoms() > MOST_HEAVY_ATOMS:
            message = f"the component {text.smiles!r} ({text.per_molecule} per molecule) cannot be used"
            problems.append(Problem("component-unreadable", message, Locus(text.pointer)))
            continue
        role = companions.get(Chem.MolToSmiles(mol), ("counter-ion" if Chem.GetFormalCharge(mol) else "solvate", ""))
        found.append(Component(role[0], _heavy_first(mol), text.per_molecule, ()))
    return found, problems


def _joined(mol: Chem.Mol, drawn: tuple[Component, ...], declared: list[Component]) -> Structure:
    """Drawing and declared components in one molecule: heavy atoms, then labelled H, then explicit H."""
    placed = list(drawn)
    whole = mol
    for component in declared:
        start = whole.GetNumAtoms()
        whole = Chem.CombineMols(whole, component.mol)
        atoms = tuple(range(start, whole.GetNumAtoms()))
        placed.append(Component(component.role, component.mol, component.per_molecule, atoms))
    if declared:
        Chem.SanitizeMol(whole)
        order = sorted(range(whole.GetNumAtoms()), key=lambda i: whole.GetAtomWithIdx(i).GetAtomicNum() == 1)
        place = {old: new for new, old in enumerate(order)}
        whole = Chem.RenumberAtoms(whole, order)
        placed = [Component(c.role, c.mol, c.per_molecule, tuple(sorted(place[a] for a in c.atoms))) for c in placed]
    state, open_diastereomers = stereo_state(mol)
    return Structure(
        mol=Chem.AddHs(whole),
        heavy=whole.GetNumHeavyAtoms(),
        components=tuple(placed),
        formula=formula_of(mol),
        charge=Chem.GetFormalCharge(mol),
        smiles=Chem.MolToSmiles(mol),
        stereo_state=state,
        flags=_flags(mol, placed) | ({"diastereomers-open"} if open_diastereomers else set()),
    )


def _flags(mol: Chem.Mol, components: Sequence[Component]) -> frozenset[str]:
    """Words that limit what may be judged."""
    found: set[str] = set()
    for index in range(mol.GetNumAtoms()):
        atom = mol.GetAtomWithIdx(index)
        number = atom.GetAtomicNum()
        if number in METALS:
            found.add("paramagnetic-metal")
        if number == 5:
            found.add("boron")
        if atom.GetNumRadicalElectrons() and number not in METALS:
            found.add("radical")
        if atom.GetIsotope():
            found.add("isotope-label")
    if any(c.role == "counter-ion" for c in components):
        found.add("salt")
    if any(c.role == "compound" and _is_zwitterion(c.mol) for c in components):
        found.add("zwitterion")
    compounds = [c.mol for c in components if c.role == "compound"]
    several = len(compounds) > 1 and len({Chem.MolToSmiles(compound) for compound in compounds}) > 1
    if several or is_declared_mixture(mol):
        found.add("mixture")
    return frozenset(found)


def _is_zwitterion(mol: Chem.Mol) -> bool:
    """Opposite charges on atoms that are not bonded to each other (so not a nitro group or an N-oxide)."""
    every = (mol.GetAtomWithIdx(n) for n in range(mol.GetNumAtoms()))
    charged = [a for a in every if a.GetFormalCharge()]
    free = [a for a in charged if not any(n.GetFormalCharge() * a.GetFormalCharge() < 0 for n in a.GetNeighbors())]
    return any(a.GetFormalCharge() > 0 for a in free) and any(a.GetFormalCharge() < 0 for a in free)
