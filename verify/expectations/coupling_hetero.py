"""Path classes of couplings to fluorine and phosphorus, from hydrogen and from carbon."""

from __future__ import annotations

from verify.expectations.coupling_aromatic import HIDDEN, NOTHING, OPTIONAL, REQUIRED, Verdict
from verify.expectations.sketch import Sketch, geometry

CARBON_FAR = 4
FAMILY = {"III": "phosphine", "oxide": "phosphine_oxide", "ester": "phosphonate", "onium": "phosphonium"}


def _fluorines(sketch: Sketch, carbon: int) -> int:
    return sum(sketch.element[n] == "F" for n in sketch.around[carbon])


def _phosphorus(sketch: Sketch, atom: int) -> str:
    """"onium", "III", "oxide" (no P-O single bond) or "ester"."""
    if sketch.charge[atom] > 0:
        return "onium"
    double = any(sketch.bond(atom, n) == 2.0 for n in sketch.around[atom])
    if not double and len(sketch.around[atom]) <= 3:
        return "III"
    around = sketch.around[atom]
    single = any(sketch.element[n] in ("O", "N", "S") and sketch.bond(atom, n) == 1.0 for n in around)
    return "ester" if single else "oxide"


def _vinyl(sketch: Sketch, path: tuple[int, ...], prefix: str) -> Verdict:
    sense = geometry(sketch, path[0], path[1], path[2], path[3])
    return f"{prefix}_{sense or 'any'}_3J", REQUIRED


def _ring_fluorine(sketch: Sketch, inner: tuple[int, ...]) -> Verdict:
    ring = sketch.shared_ring(*inner)
    azine = any(sketch.element[a] == "N" for a in ring)
    bonds = len(inner) + 1
    if bonds == 3:
        return ("hf.pyridine_ortho_3J" if azine or len(ring) == 5 else "hf.aryl_ortho_3J"), REQUIRED
    if bonds == 4:
        if azine or len(ring) == 5:
            return "hf.pyridine_4J", OPTIONAL
        return "hf.aryl_meta_4J", REQUIRED
    return "hf.aryl_para_5J", OPTIONAL


def fluorine_path(sketch: Sketch, path: tuple[int, ...], averaged: bool) -> Verdict:
    """H at the start, F at the end of ``path``."""
    inner = path[1:-1]
    carbon = inner[-1] if inner else path[0]
    states = [sketch.state[a] for a in inner]
    if any(sketch.element[a] not in ("C", "N") for a in inner) or not inner:
        return ("hf.far", HIDDEN) if len(inner) > 2 else NOTHING
    if all(s == "ar" for s in states) and sketch.shared_ring(*inner):
        return _ring_fluorine(sketch, inner)
    if len(inner) == 1:
        if states[0] != "sp3":
            return "hf.vinyl_gem_2J", REQUIRED
        return ("hf.geminal_2J" if _fluorines(sketch, carbon) == 1 else "hf.geminal_2J_CHF2"), REQUIRED
    if len(inner) == 2:
        if sketch.bond(inner[0], inner[1]) == 2.0:
            return _vinyl(sketch, path, "hf.vinyl")
        if _fluorines(sketch, carbon) == 3:
            return "hf.CF3_CH_3J", REQUIRED
        free = averaged and not sketch.shared_ring(*inner)
        return ("hf.vicinal_3J_freely_rotating" if free else "hf.vicinal_3J_antiperiplanar"), REQUIRED
    if len(inner) == 3:
        if states[-1] == "ar":
            return "hf.benzylic_ortho_F_CH3_4J", OPTIONAL
        if _fluorines(sketch, carbon) == 3:
            return "hf.CF3_aryl_4J", HIDDEN
        return "hf.long_4J", OPTIONAL
    return "hf.far", OPTIONAL if len(inner) == 4 else HIDDEN


def _phosphorus_vicinal(sketch: Sketch, path: tuple[int, ...], kind: str) -> Verdict:
    first, second = path[1], path[2]
    if sketch.element[second] == "O":
        return "hp.POCH_3J_phosphate", REQUIRED
    if sketch.element[second] == "N":
        return "hp.PNCH_3J", REQUIRED
    if sketch.element[second] != "C":
        return "hp.PNCH_3J", OPTIONAL
    if sketch.state[first] == "ar":
        return "hp.P_aryl_ortho_3J", REQUIRED
    if sketch.bond(first, second) == 2.0:
        return _vinyl(sketch, path, "hp.P_vinyl")
    return ("hp.PCCH_3J_phosphine" if kind == "III" else "hp.PCCH_3J_phosphonate"), REQUIRED


def phosphorus_path(sketch: Sketch, path: tuple[int, ...]) -> Verdict:
    """H at the start, P at the end of ``path``."""
    inner, kind = path[1:-1], _phosphorus(sketch, path[-1])
    if len(inner) == 0:
        return f"hp.PH_1J_{FAMILY[kind]}", REQUIRED
    if len(inner) == 1:
        if sketch.element[inner[0]] != "C":
            return "hp.PCH_2J_phosphine", HIDDEN
        if sketch.state[inner[0]] != "sp3":
            return "hp.P_vinyl_gem_2J", REQUIRED
        return f"hp.PCH_2J_{FAMILY[kind]}", OPTIONAL if kind == "III" else REQUIRED
    if len(inner) == 2:
        return _phosphorus_vicinal(sketch, path, kind)
    if len(inner) == 3 and sketch.state[inner[-1]] == "ar" and sketch.state[inner[0]] == "ar":
        return "hp.P_aryl_meta_4J", OPTIONAL
    return ("hp.far", HIDDEN) if len(inner) == 3 else NOTHING


def _carbon_fluorine_one(sketch: Sketch, carbon: int) -> str:
    fluorines, state = _fluorines(sketch, carbon), sketch.state[carbon]
    if state == "ar":
        return "aryl_1J"
    if state != "sp3":
        return "acyl_fluoride_1J" if sketch.double_to(carbon, "O") else "vinyl_1J"
    if fluorines == 3:
        other = [n for n in sketch.around[carbon] if sketch.element[n] != "F"]
        aryl = bool(other) and sketch.state[other[0]] == "ar"
        oxygen = bool(other) and sketch.element[other[0]] == "O"
        return "CF3_1J_on_aryl" if aryl else "OCF3_1J" if oxygen else "CF3_1J_aliphatic"
    return "CF2_1J" if fluorines == 2 else "alkyl_1J"


def carbon_fluorine_path(sketch: Sketch, path: tuple[int, ...]) -> Verdict:
    """C at the start, F at the end of ``path``."""
    bonds, carbon = len(path) - 1, path[-2]
    if bonds == 1:
        return f"cf.{_carbon_fluorine_one(sketch, carbon)}", REQUIRED
    if bonds > CARBON_FAR:
        return NOTHING
    if bonds == CARBON_FAR:
        return "cf.far", OPTIONAL
    if _fluorines(sketch, carbon) == 3:
        aryl = sketch.state[path[-3]] == "ar"
        if bonds == 2:
            return ("cf.CF3_2J_on_aryl" if aryl else "cf.CF3_2J_aliphatic"), REQUIRED
        return "cf.CF3_3J_on_aryl", OPTIONAL
    family = {"ar": "aryl", "sp3": "alkyl"}.get(sketch.state[carbon], "vinyl")
    if family == "vinyl":
        return ("cf.vinyl_2J", REQUIRED) if bonds == 2 else ("cf.aryl_3J", OPTIONAL)
    return f"cf.{family}_{bonds}J", REQUIRED if bonds == 2 else OPTIONAL


def _carbon_phosphorus_one(sketch: Sketch, carbon: int, kind: str) -> str:
    aryl = sketch.state[carbon] == "ar"
    if kind == "III":
        return "phosphine_1J_aryl" if aryl else "phosphine_1J_alkyl"
    if kind == "onium":
        return "phosphonium_1J_aryl" if aryl else "phosphonium_1J_alkyl"
    if kind == "oxide":
        if sketch.state[carbon] == "sp2":
            return "ylide_1J"
        return "phosphine_oxide_1J_aryl" if aryl else "phosphine_oxide_1J_alkyl"
    return "phosphonate_1J" if sketch.state[carbon] == "sp3" else "phosphonate_aryl_1J"


def carbon_phosphorus_path(sketch: Sketch, path: tuple[int, ...]) -> Verdict:
    """C at the start, P at the end of ``path``."""
    bonds, kind = len(path) - 1, _phosphorus(sketch, path[-1])
    if bonds == 1:
        label = f"cp.{_carbon_phosphorus_one(sketch, path[0], kind)}"
        return label, OPTIONAL if kind == "III" else REQUIRED
    if bonds > CARBON_FAR:
        return NOTHING
    if sketch.element[path[-2]] == "O":
        return ("cp.phosphate_2J" if bonds == 2 else "cp.phosphate_3J" if bonds == 3 else "cp.far"), OPTIONAL
    if bonds == CARBON_FAR:
        return "cp.far", OPTIONAL
    if sketch.state[path[-2]] == "ar":
        family = "phosphine" if kind == "III" else "phosphine_oxide"
        return f"cp.{family}_{bonds}J_aryl", OPTIONAL
    family = "P_III" if kind == "III" else "P_V"
    return ("cp.P_V_3J_alkyl" if bonds == 3 else f"cp.{family}_2J_alkyl"), OPTIONAL


def hetero_pair(path: tuple[int, ...], nuclei: tuple[str, str]) -> Verdict:
    """F-F, P-F and P-P couplings."""
    bonds = len(path) - 1
    if nuclei == ("19F", "19F"):
        label = "ff.geminal_2J" if bonds == 2 else "ff.vicinal_3J" if bonds == 3 else "ff.far"
        return label, OPTIONAL
    if nuclei == ("31P", "31P"):
        return "pp.any", OPTIONAL
    return ("pf.one_bond_1J", REQUIRED) if bonds == 1 else ("pf.far", OPTIONAL)
