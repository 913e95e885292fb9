"""Elemental composition: formula, monoisotopic and average mass.

Isotopic masses: AME2020, Wang et al., Chin. Phys. C 2021, 45, 030003; last digits of K, Br, I, and all values below
the line "from memory", recalled. Standard atomic weights: CIAAW 2021, conventional values; recalled but for H to Cl,
Br, Se.
"""

from __future__ import annotations

from collections.abc import Mapping

from rdkit import Chem

ELECTRON_MASS = 0.000548579909
# element: (mass of its most abundant isotope / u, standard atomic weight)
MASSES: Mapping[str, tuple[float, float]] = {
    "H": (1.007825031898, 1.008), "D": (2.014101777844, 2.014), "C": (12.0, 12.011),
    "N": (14.00307400425, 14.007), "O": (15.99491461926, 15.999), "F": (18.99840316207, 18.998),
    "Na": (22.98976928195, 22.990), "P": (30.97376199768, 30.974), "S": (31.97207117354, 32.06),
    "Cl": (34.968852694, 35.45), "B": (11.009305166, 10.81), "K": (38.963706485, 39.098),
    "Br": (78.9183376, 79.904), "I": (126.904472, 126.904),
    # from memory
    "Li": (7.0160034, 6.94), "Be": (9.0121831, 9.0122), "Mg": (23.9850417, 24.305), "Al": (26.9815384, 26.982),
    "Si": (27.9769265, 28.085), "Ca": (39.9625909, 40.078), "Ti": (47.9479409, 47.867), "V": (50.9439570, 50.942),
    "Cr": (51.9405062, 51.996), "Mn": (54.9380439, 54.938), "Fe": (55.9349363, 55.845), "Co": (58.9331943, 58.933),
    "Ni": (57.9353424, 58.693), "Cu": (62.9295977, 63.546), "Zn": (63.9291420, 65.38), "Ge": (73.9211778, 72.630),
    "As": (74.9215946, 74.922), "Se": (79.9165218, 78.971), "Ru": (101.9043441, 101.07), "Rh": (102.9054980, 102.91),
    "Pd": (105.9034804, 106.42), "Ag": (106.9050916, 107.87), "Sn": (119.9022016, 118.71), "Sb": (120.9038120, 121.76),
    "Te": (129.9062227, 127.60), "Cs": (132.9054520, 132.91), "Ir": (192.9629216, 192.22), "Pt": (194.9647917, 195.08),
    "Au": (196.9665688, 196.97), "Hg": (201.9706434, 200.59), "Pb": (207.9766525, 207.2), "Bi": (208.9803991, 208.98),
}


def formula_of(mol: Chem.Mol) -> dict[str, int]:
    """Element to count with implicit H counted; deuterium as "D"; C, H first, then alphabetical (Hill order)."""
    counts: dict[str, int] = {}
    for number in range(mol.GetNumAtoms()):  # the iterator of the toolkit costs as much as the work
        atom = mol.GetAtomWithIdx(number)
        symbol = atom.GetSymbol()
        if symbol == "H" and atom.GetIsotope() == 2:
            symbol = "D"
        counts[symbol] = counts.get(symbol, 0) + 1
        hydrogens = atom.GetTotalNumHs()
        if hydrogens:
            counts["H"] = counts.get("H", 0) + hydrogens
    first = [s for s in ("C", "H", "D") if s in counts] if "C" in counts else []
    return {s: counts[s] for s in first + sorted(set(counts) - set(first))}


def formula_text(formula: Mapping[str, int], charge: int = 0) -> str:
    """Formula as printed, such as ``C13H17NO3`` or ``C6H7+``."""
    text = "".join(s if n == 1 else f"{s}{n}" for s, n in formula.items())
    if not charge:
        return text
    sign = "+" if charge > 0 else "-"
    return text + (sign if abs(charge) == 1 else f"{abs(charge)}{sign}")


def monoisotopic_mass(formula: Mapping[str, int], charge: int = 0) -> float | None:
    """Mass in u of the most abundant isotopes, electrons counted; None if an element is not in the table."""
    if any(symbol not in MASSES for symbol in formula):
        return None
    return sum(MASSES[s][0] * n for s, n in formula.items()) - charge * ELECTRON_MASS


def average_mass(formula: Mapping[str, int]) -> float | None:
    """Molar mass in g/mol; None if an element is not in the table."""
    if any(symbol not in MASSES for symbol in formula):
        return None
    return sum(MASSES[s][1] * n for s, n in formula.items())
