"""Atom types of the shift model: what a spectroscopist would call an atom, read from the toolkit once."""

from __future__ import annotations

from collections.abc import Container
from dataclasses import dataclass

from rdkit import Chem
from rdkit.Chem.rdchem import BondStereo

CIS = frozenset({BondStereo.STEREOZ, BondStereo.STEREOCIS})
TRANS = frozenset({BondStereo.STEREOE, BondStereo.STEREOTRANS})
BOND_MARKS = {1.0: "-", 2.0: "=", 3.0: "#", 1.5: "~"}
LARGEST_RING = 7
HALOGENS_AND_SULFUR = ("F", "Cl", "Br", "I", "S")


@dataclass(frozen=True, slots=True)
class AtomView:
    """Heavy atoms only. Per atom: element, charge, number of H, aromatic, neighbours, bond marks to them,
    size of the smallest ring (0: none, 8: larger than seven), number of rings. ``stereo`` maps a double bond
    to (reference neighbour of its first atom, of its second, True if they are cis)."""

    heavy: int
    element: tuple[str, ...]
    charge: tuple[int, ...]
    hydrogens: tuple[int, ...]
    aromatic: tuple[bool, ...]
    around: tuple[tuple[int, ...], ...]
    order: tuple[tuple[str, ...], ...]
    ring: tuple[int, ...]
    rings: tuple[int, ...]
    stereo: dict[tuple[int, int], tuple[int, int, bool]]

    def bonded(self, atom: int, mark: str, elements: Container[str]) -> int:
        """Number of bonds of this mark to one of these elements."""
        order, element = self.order[atom], self.element
        return sum(order[k] == mark and element[b] in elements for k, b in enumerate(self.around[atom]))


def view_atoms(mol: Chem.Mol) -> AtomView:
    """Read a sanitised molecule, explicit H or not; every heavy atom must precede every H."""
    element, charge, hydrogens, aromatic = [], [], [], []
    for atom in mol.GetAtoms():
        if atom.GetAtomicNum() == 1:
            break
        element.append(atom.GetSymbol())
        charge.append(atom.GetFormalCharge())
        hydrogens.append(atom.GetTotalNumHs(includeNeighbors=True))
        aromatic.append(atom.GetIsAromatic())
    heavy = len(element)
    around: list[list[int]] = [[] for _ in range(heavy)]
    order: list[list[str]] = [[] for _ in range(heavy)]
    stereo: dict[tuple[int, int], tuple[int, int, bool]] = {}
    for bond in mol.GetBonds():
        first, second = bond.GetBeginAtomIdx(), bond.GetEndAtomIdx()
        if first >= heavy or second >= heavy:
            continue
        mark = BOND_MARKS.get(bond.GetBondTypeAsDouble(), "-")
        around[first].append(second)
        around[second].append(first)
        order[first].append(mark)
        order[second].append(mark)
        if mark == "=":
            held = bond.GetStereo()
            ends = list(bond.GetStereoAtoms())
            if (held in CIS or held in TRANS) and len(ends) == 2 and max(ends) < heavy:
                stereo[first, second] = (ends[0], ends[1], held in CIS)
    ring, rings = [0] * heavy, [0] * heavy
    for members in mol.GetRingInfo().AtomRings():
        size = min(len(members), LARGEST_RING + 1)
        for member in members:
            rings[member] += 1
            ring[member] = size if ring[member] == 0 else min(size, ring[member])
    return AtomView(
        heavy, tuple(element), tuple(charge), tuple(hydrogens), tuple(aromatic),
        tuple(tuple(n) for n in around), tuple(tuple(n) for n in order), tuple(ring), tuple(rings), stereo,
    )


def fine_type(view: AtomView, atom: int) -> str:
    """Type with H count, ring and charge: "C4h2r6", "cah", "Oac", "Nam1"."""
    element = view.element[atom]
    charge = "+" if view.charge[atom] > 0 else "-" if view.charge[atom] < 0 else ""
    if element == "C":
        return _carbon(view, atom) + charge
    if element == "N":
        return _nitrogen(view, atom) + charge
    if element == "O":
        return _oxygen(view, atom) + charge
    if element == "S":
        if view.aromatic[atom]:
            return "sa"
        return f"S{view.bonded(atom, '=', 'O')}{'h' if view.hydrogens[atom] else ''}{len(view.around[atom])}{charge}"
    if element == "P":
        return f"P{view.bonded(atom, '=', 'OS')}{len(view.around[atom])}{charge}"
    return element + charge


def _carbon(view: AtomView, atom: int) -> str:
    hydrogens = view.hydrogens[atom]
    ring = f"r{view.ring[atom]}" if view.ring[atom] else ""
    if view.aromatic[atom]:
        fused = "f" if view.rings[atom] > 1 else "h" if hydrogens else ""
        return f"Ca{fused}r{view.ring[atom]}"
    order = view.order[atom]
    if "#" in order:
        return f"C#{'N' if view.bonded(atom, '#', 'N') else 'C'}{hydrogens}"
    doubles = order.count("=")
    if doubles == 2:
        return "C=="
    if doubles == 0:
        return f"C4h{hydrogens}{ring}{'b' if view.rings[atom] > 1 else ''}"
    if view.bonded(atom, "=", "O"):
        return _carbonyl(view, atom, hydrogens) + ring
    if view.bonded(atom, "=", "S"):
        return f"C=S{view.bonded(atom, '-', 'N')}"
    if view.bonded(atom, "=", "N"):
        return f"C=N{hydrogens}{'X' if view.bonded(atom, '-', 'NOS') else ''}{ring}"
    return f"C3h{hydrogens}{ring}"


def _carbonyl(view: AtomView, atom: int, hydrogens: int) -> str:
    nitrogen, oxygen = view.bonded(atom, "-", "N"), view.bonded(atom, "-", "O")
    if hydrogens:
        return "C=OhX" if nitrogen or oxygen else "C=Oh"
    acid = any(view.element[b] == "O" and (view.hydrogens[b] or view.charge[b] < 0) for b in view.around[atom])
    other = "x" if view.bonded(atom, "-", HALOGENS_AND_SULFUR) else ""
    return "C=O" + "N" * nitrogen + ("A" if acid else "O" * oxygen) + other


def _nitrogen(view: AtomView, atom: int) -> str:
    hydrogens = view.hydrogens[atom]
    if view.aromatic[atom]:
        return "na" if len(view.around[atom]) == 2 and not hydrogens else "nr" if not hydrogens else "nh"
    if "#" in view.order[atom]:
        return "N#"
    if view.bonded(atom, "=", "O"):
        return f"No{view.bonded(atom, '=', 'O') + view.bonded(atom, '-', 'O')}"
    if "=" in view.order[atom]:
        return f"N={view.bonded(atom, '=', 'N')}{'X' if view.bonded(atom, '-', 'NOS') else ''}"
    around = view.around[atom]
    if any(view.element[b] == "C" and view.bonded(b, "=", "OS") for b in around):
        return f"Nam{hydrogens}"
    if any(view.element[b] == "S" and view.bonded(b, "=", "O") for b in around):
        return f"Nso{hydrogens}"
    if any(view.aromatic[b] for b in around):
        return f"Nar{hydrogens}"
    return f"N{hydrogens}{'X' if view.bonded(atom, '-', 'NO') else ''}{'r3' if view.ring[atom] == 3 else ''}"


def _oxygen(view: AtomView, atom: int) -> str:
    if view.aromatic[atom]:
        return "oa"
    if "=" in view.order[atom]:
        return "O="
    around = view.around[atom]
    if view.hydrogens[atom] or len(around) == 1:
        return "Oh"
    if any(view.element[b] == "C" and view.bonded(b, "=", "OS") for b in around):
        return "Oac"
    if any(view.element[b] in ("S", "P") for b in around):
        return "Oso"
    if any(view.aromatic[b] for b in around):
        return "Oar"
    if any(view.element[b] == "Si" for b in around):
        return "Osi"
    if any("=" in view.order[b] for b in around):
        return "Ovi"
    return f"Oe{'r3' if view.ring[atom] == 3 else ''}"


def coarse_type(view: AtomView, atom: int) -> str:
    """One letter: what kind of atom a path goes through."""
    element = view.element[atom]
    if view.aromatic[atom]:
        if element == "C":
            return "f" if view.rings[atom] > 1 else "a"
        return {"N": "n", "O": "o", "S": "s"}.get(element, "x")
    if element == "C":
        order = view.order[atom]
        if "#" in order or order.count("=") == 2:
            return "T"
        if "=" in order:
            return "K" if view.bonded(atom, "=", "OS") else "M" if view.bonded(atom, "=", "N") else "D"
        return "C"
    return element if element in ("N", "O", "S", "P") else "X"
