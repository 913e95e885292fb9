"""Path classes of couplings between hydrogens: which row of the coupling table, and whether it is seen."""

from __future__ import annotations

from itertools import pairwise

from verify.expectations.coupling_aromatic import HIDDEN, NOTHING, OPTIONAL, REQUIRED, Verdict, aromatic_path
from verify.expectations.sketch import Sketch, geometry

EXCHANGING = frozenset({"D2O", "CD3OD", "TFA-d", "CD3CO2D", "TFE-d3"})
SLOW = frozenset({"DMSO-d6", "DMF-d7", "acetone-d6"})
AMIDE_LIKE = frozenset({
    "amide", "sulfonamide", "carbamate", "urea", "thioamide", "hydrazide", "imide", "enamine", "amidine",
    "phosphoramide", "hydroxamic acid",
})
AMMONIUM = frozenset({"ammonium", "iminium"})
NEVER_SPLIT = frozenset({"acid", "phenol", "enol", "oxime", "hydroxylamine", "silanol", "boronic acid"})


def exchanges(solvent: str | None) -> bool:
    """True where the solvent's deuterons replace OH and NH, so that their couplings vanish."""
    return solvent is not None and any(part in EXCHANGING for part in solvent.split("/"))


def exchangeable_path(sketch: Sketch, path: tuple[int, ...], kind: str, solvent: str | None) -> Verdict:
    """Label and visibility where one end is an exchangeable H (``kind``: see ``Environment``)."""
    inner = path[1:-1]
    if len(inner) == 1:
        return ("xh.NH2_geminal_amide", HIDDEN) if sketch.element[inner[0]] == "N" else NOTHING
    hetero = inner[0] if sketch.element[inner[0]] in "NOSPSe" else inner[-1]
    if sketch.state[hetero] == "ar" and sketch.element[hetero] == "N":
        label = "hh.pyrrole_NH_2" if len(inner) == 2 else "hh.pyrrole_NH_3"
        return label, HIDDEN if exchanges(solvent) or len(inner) > 3 else OPTIONAL
    if len(inner) != 2:
        return NOTHING
    slow = solvent in SLOW
    if sketch.element[hetero] == "S":
        label, seen = "xh.CH_SH", OPTIONAL
    elif kind in NEVER_SPLIT:
        label, seen = "xh.CH_OH_fast_exchange_seen", HIDDEN
    elif sketch.element[hetero] == "O":
        label = "xh.CH_OH_slow_exchange" if slow else "xh.CH_OH_fast_exchange_seen"
        seen = OPTIONAL if slow else HIDDEN
    elif kind in AMIDE_LIKE:
        label, seen = "xh.CH_NH_amide", OPTIONAL
    elif kind in AMMONIUM or sketch.charge[hetero] > 0:
        label, seen = "xh.CH_NH3plus_slow", OPTIONAL
    else:
        label, seen = "xh.CH_NH_amine", OPTIONAL if slow else HIDDEN
    return label, HIDDEN if exchanges(solvent) else seen


def _geminal(sketch: Sketch, centre: int) -> Verdict:
    element, around = sketch.element, sketch.around[centre]
    if element[centre] != "C":
        return "xh.NH2_geminal_amide", HIDDEN
    if sketch.state[centre] != "sp3":
        imine = sketch.double_to(centre, "NOP")
        return ("hh.ketene_or_imine_gem", REQUIRED) if imine else ("hh.alkene_gem", OPTIONAL)
    heteros = [element[n] for n in around if element[n] in ("O", "N", "S")]
    ring = sketch.shared_ring(centre)
    if len(ring) == 3:
        kinds = {element[a] for a in ring}
        label = "hh.geminal_epoxide" if "O" in kinds or "S" in kinds else "hh.geminal_aziridine"
        return (label, REQUIRED) if kinds != {"C"} else ("hh.geminal_cyclopropane", REQUIRED)
    if heteros.count("O") == 2:
        return "hh.geminal_sp3_O_O", OPTIONAL
    if "O" in heteros:
        return "hh.geminal_OCH2", REQUIRED
    if len(ring) == 4:
        return "hh.geminal_cyclobutane", REQUIRED
    wide = any(sketch.state[n] in ("sp2", "sp") and element[n] == "C" for n in around)
    if wide and not heteros:
        return "hh.geminal_sp3_next_to_carbonyl", REQUIRED
    return "hh.geminal_sp3", REQUIRED


def _double_bond(sketch: Sketch, path: tuple[int, ...]) -> Verdict:
    near, first, second, far = path
    ring = sketch.shared_ring(first, second)
    if sketch.element[first] != "C" or sketch.element[second] != "C":
        return "hh.imine_CH_CH", OPTIONAL
    if 0 < len(ring) <= 7:
        size = {3: "cyclopropene", 4: "cyclobutene", 5: "cyclopentene", 6: "cyclohexene", 7: "cycloheptene"}
        return f"hh.{size[len(ring)]}_vinyl", OPTIONAL if len(ring) == 3 else REQUIRED
    sense = geometry(sketch, near, first, second, far)
    return f"hh.alkene_{sense or 'cis_or_trans'}", REQUIRED


def _aldehyde(sketch: Sketch, atom: int) -> bool:
    return sketch.state[atom] == "sp2" and sketch.double_to(atom, "O")


def _one_unsaturated_bond(sketch: Sketch, first: int, second: int) -> Verdict:
    """Single bond with at least one sp2 end."""
    unsaturated = [a for a in (first, second) if sketch.state[a] != "sp3"]
    ring = sketch.shared_ring(first, second)
    if any(_aldehyde(sketch, a) for a in unsaturated):
        return ("hh.enone_CH_CHO", REQUIRED) if len(unsaturated) == 2 else ("hh.aldehyde_CH_CHO", OPTIONAL)
    if any(sketch.double_to(a, "N") for a in unsaturated):
        return "hh.imine_CH_CH", OPTIONAL
    if any(sketch.state[a] == "sp" for a in unsaturated):
        return "hh.vicinal_any_sp3", OPTIONAL
    if len(unsaturated) == 2:
        return ("hh.ring_diene_single_bond", OPTIONAL) if ring else ("hh.diene_CH_CH_single_bond", REQUIRED)
    return ("hh.ring_vinyl_sp3", OPTIONAL) if ring else ("hh.vinyl_CH_sp3CH", REQUIRED)


def _saturated_ring(sketch: Sketch, ring: tuple[int, ...], averaged: bool) -> Verdict:
    size = len(ring)
    if size == 3:
        carbocycle = all(sketch.element[a] == "C" for a in ring)
        return "hh.ring_3_vicinal" if carbocycle else "hh.ring_3_hetero_vicinal", REQUIRED
    if averaged:
        return "hh.ring_flip_averaged", REQUIRED
    if size == 4:
        return "hh.ring_4_vicinal", OPTIONAL
    return f"hh.ring_{size if size in (5, 6) else 'large'}_vicinal", OPTIONAL


def _saturated(sketch: Sketch, first: int, second: int, averaged: bool) -> Verdict:
    ring = sketch.shared_ring(first, second)
    if ring and sketch.bond(first, second) == 1.0:
        return _saturated_ring(sketch, ring, averaged)
    counts = sorted((sketch.hydrogens(first), sketch.hydrogens(second)))
    if counts[-1] >= 3:
        other = first if sketch.hydrogens(first) == counts[0] else second
        return "hh.vicinal_isopropyl" if sketch.hydrogens(other) == 1 else "hh.vicinal_ethyl", REQUIRED
    if counts[0] == 1:
        return "hh.vicinal_CH2_CH" if counts[1] == 2 else "hh.vicinal_CH_CH", REQUIRED
    return ("hh.vicinal_free_rotation" if averaged else "hh.vicinal_CH2_CH"), REQUIRED


def _vicinal(sketch: Sketch, path: tuple[int, ...], averaged: bool) -> Verdict:
    first, second = path[1], path[2]
    elements = {sketch.element[first], sketch.element[second]}
    if elements != {"C"}:
        if "Si" in elements:
            return "xh.SiH_CH", OPTIONAL
        return ("xh.PH_CH", OPTIONAL) if "P" in elements else NOTHING
    states = {sketch.state[first], sketch.state[second]}
    if states == {"ar"}:
        return aromatic_path(sketch, path[1:-1])
    if sketch.bond(first, second) >= 2.0:
        return _double_bond(sketch, path)
    if states == {"sp3"}:
        return _saturated(sketch, first, second, averaged)
    return _one_unsaturated_bond(sketch, first, second)


def _four_bonds(sketch: Sketch, inner: tuple[int, ...]) -> Verdict:
    states = [sketch.state[a] for a in inner]
    orders = [sketch.bond(a, b) for a, b in pairwise(inner)]
    if any(sketch.element[a] != "C" for a in inner):
        return "hh.formate_or_amide_4J", HIDDEN
    if "ar" in states:
        return "hh.benzylic_ortho_4J", OPTIONAL if states.count("ar") == 2 else HIDDEN
    if orders == [2.0, 2.0]:
        return "hh.allene_4J", REQUIRED
    if 3.0 in orders:
        return "hh.alkyne_4J_propargylic", OPTIONAL
    if 2.0 in orders:
        return ("hh.allylic_4J" if "sp3" in states else "hh.diene_4J"), OPTIONAL
    if states.count("sp3") == 3 and sketch.shared_ring(*inner):
        return "hh.ring_4J", OPTIONAL
    return "hh.open_4J", HIDDEN


def _five_bonds(sketch: Sketch, inner: tuple[int, ...]) -> Verdict:
    orders = [sketch.bond(a, b) for a, b in pairwise(inner)]
    if any(sketch.element[a] != "C" for a in inner):
        return NOTHING
    if 3.0 in orders:
        return "hh.alkyne_5J", OPTIONAL
    if orders.count(2.0) == 2 and orders[1] == 2.0:
        return "hh.allene_5J", OPTIONAL
    if orders == [1.0, 2.0, 1.0]:
        return "hh.homoallylic_5J", OPTIONAL
    return NOTHING


def hydrogen_path(sketch: Sketch, path: tuple[int, ...], averaged: bool) -> Verdict:
    """Label and visibility for two C-H (or Si-H, P-H) hydrogens at the ends of ``path``; an empty label where
    no coupling is expected. ``averaged``: neither end is diastereotopic, so that conformers average to one
    J."""
    inner = path[1:-1]
    if len(inner) == 1:
        return _geminal(sketch, inner[0])
    if len(inner) == 2:
        return _vicinal(sketch, path, averaged)
    if all(sketch.state[a] == "ar" for a in inner) and sketch.shared_ring(*inner):
        return aromatic_path(sketch, inner)
    if len(inner) == 3:
        return _four_bonds(sketch, inner)
    return _five_bonds(sketch, inner) if len(inner) == 4 else NOTHING


__all__ = [
    "HIDDEN", "NOTHING", "OPTIONAL", "REQUIRED", "Verdict", "exchangeable_path", "exchanges", "hydrogen_path",
]
