"""Path classes of couplings between hydrogens of one aromatic ring."""

from __future__ import annotations

from verify.expectations.sketch import Sketch

# What a reader expects to see of a path class.
REQUIRED, OPTIONAL, HIDDEN = "required", "optional", "hidden"
Verdict = tuple[str, str]

NOTHING: Verdict = ("", HIDDEN)
ONE_HETERO = {"O": "furan", "S": "thiophene", "Se": "thiophene", "Te": "thiophene", "N": "pyrrole"}


def _next_in_ring(ring: tuple[int, ...], atom: int) -> tuple[int, int]:
    place = ring.index(atom)
    return ring[place - 1], ring[(place + 1) % len(ring)]


def _beside(sketch: Sketch, ring: tuple[int, ...], atom: int) -> list[int]:
    """Ring heteroatoms directly bound to a ring atom."""
    return [n for n in _next_in_ring(ring, atom) if sketch.element[n] != "C"]


def _six_ortho(sketch: Sketch, ring: tuple[int, ...], first: int, second: int) -> Verdict:
    beside = [_beside(sketch, ring, first), _beside(sketch, ring, second)]
    if beside[0] and beside[1]:
        return "hh.pyrazine_23", REQUIRED
    if not beside[0] and not beside[1]:
        return "hh.benzene_ortho", REQUIRED
    hetero = (beside[0] or beside[1])[0]
    if len(sketch.around[hetero]) > 2 or sketch.element[hetero] != "N":
        return "hh.azine_NR_23", REQUIRED
    return "hh.pyridine_23", REQUIRED


def _six_ring(sketch: Sketch, ring: tuple[int, ...], inner: tuple[int, ...]) -> Verdict:
    if len(inner) == 2:
        return _six_ortho(sketch, ring, inner[0], inner[1])
    hetero = any(sketch.element[a] != "C" for a in ring)
    if len(inner) == 3:
        if sketch.element[inner[1]] != "C":
            return "hh.pyrimidine_24", HIDDEN
        return "hh.benzene_meta", OPTIONAL
    if len(inner) == 4:
        if not hetero:
            return "hh.benzene_para", HIDDEN
        both = _beside(sketch, ring, inner[0]) and _beside(sketch, ring, inner[-1])
        return ("hh.pyrazine_25" if both else "hh.azine_para"), OPTIONAL
    return NOTHING


def _azole(sketch: Sketch, heteros: list[int], bonds: int) -> Verdict:
    if bonds != 3:
        return "hh.azole_4J", OPTIONAL
    kinds = {sketch.element[a] for a in heteros}
    if "S" in kinds or "Se" in kinds:
        return "hh.azole_ortho_SN", OPTIONAL
    return ("hh.azole_ortho_ON" if "O" in kinds else "hh.azole_ortho_NN"), OPTIONAL


def _five_ring(sketch: Sketch, ring: tuple[int, ...], inner: tuple[int, ...]) -> Verdict:
    heteros = [a for a in ring if sketch.element[a] != "C"]
    bonds = len(inner) + 1
    if bonds not in (3, 4):
        return NOTHING
    if len(heteros) != 1:
        return _azole(sketch, heteros, bonds)
    family = ONE_HETERO.get(sketch.element[heteros[0]], "pyrrole")
    ends = sum(bool(_beside(sketch, ring, a)) for a in (inner[0], inner[-1]))
    if bonds == 3:
        return f"hh.{family}_{'23' if ends else '34'}", REQUIRED
    return f"hh.{family}_{'25' if ends == 2 else '24'}", OPTIONAL


def aromatic_path(sketch: Sketch, inner: tuple[int, ...]) -> Verdict:
    """Label and visibility for C-H hydrogens joined by ``inner``, aromatic atoms all."""
    ring = sketch.shared_ring(*inner)
    if len(ring) == 6:
        return _six_ring(sketch, ring, inner)
    if len(ring) == 5:
        return _five_ring(sketch, ring, inner)
    if len(inner) == 2 and ring:
        return "hh.cycloheptene_vinyl", REQUIRED
    return NOTHING
