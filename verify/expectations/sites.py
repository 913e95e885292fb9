"""Names an environment in the words of the trade: its site, and a short name for messages."""

from __future__ import annotations

from verify.environments.model import Environment
from verify.expectations.sketch import Sketch

HETERO_SITES = {"Si": "silane", "P": "phosphine", "B": "borane", "Ge": "silane", "Sn": "silane"}
NUCLEUS_SITES = {"13C": "carbon", "19F": "fluorine", "31P": "phosphorus"}


def proton_site(sketch: Sketch, environment: Environment) -> str:
    """Kind of place a hydrogen sits at: "alkyl", "aryl", "alkene", "alkyne", "aldehyde", "imine",
    "exchangeable", or a name for hydrogen on another element."""
    carrier = environment.carriers[0]
    if environment.exchangeable:
        return "exchangeable"
    if sketch.element[carrier] != "C":
        return HETERO_SITES.get(sketch.element[carrier], "hydride")
    state = sketch.state[carrier]
    if state == "sp2":
        if sketch.double_to(carrier, "O"):
            return "aldehyde"
        return "imine" if sketch.double_to(carrier, "N") else "alkene"
    if state == "sp":
        allene = not any(sketch.bond(carrier, n) == 3.0 for n in sketch.around[carrier])
        return "alkene" if allene else "alkyne"
    return {"ar": "aryl"}.get(state, "alkyl")


def _hydrogens(count: int) -> str:
    return "" if count == 0 else "H" if count == 1 else f"H{count}"


def _prefix(sketch: Sketch, carbon: int) -> str:
    """What an sp3 carbon hangs on: heteroatoms first, then a ring or carbonyl."""
    around = [n for n in sketch.around[carbon] if sketch.element[n] != "H"]
    heteros = sorted({sketch.element[n] for n in around if sketch.element[n] != "C"})
    if heteros:
        return "".join(heteros)
    if any(sketch.state[n] == "ar" for n in around):
        return "Ar"
    if any(sketch.state[n] == "sp2" and sketch.double_to(n, "OS") for n in around):
        return "C(O)"
    return "ring " if sketch.ring_of[carbon] else ""


def _carbon_words(sketch: Sketch, carbon: int, hydrogens: int) -> str:
    state = sketch.state[carbon]
    group = "C" + _hydrogens(hydrogens)
    if state == "ar":
        heteros = {sketch.element[a] for number in sketch.ring_of[carbon] for a in sketch.rings[number]}
        return f"{'heteroaryl' if heteros != {'C'} else 'aryl'} {group}"
    if state == "sp2":
        if sketch.double_to(carbon, "O"):
            return "CHO" if hydrogens else "C=O"
        return f"N={group}" if sketch.double_to(carbon, "N") else f"={group}"
    if state == "sp":
        triple = [n for n in sketch.around[carbon] if sketch.bond(carbon, n) == 3.0]
        return "C≡N" if any(sketch.element[n] == "N" for n in triple) else f"≡{group}"
    return _prefix(sketch, carbon) + group


def words(sketch: Sketch, environment: Environment) -> str:
    """Short name such as "OCH3", "aryl CH", "NH (amide)", "one H of NCH2"."""
    carrier = environment.carriers[0]
    if environment.nucleus in ("19F", "31P"):
        return sketch.element[carrier]
    hydrogens = sketch.hydrogens(carrier)
    if environment.nucleus == "13C":
        return _carbon_words(sketch, carrier, hydrogens)
    if environment.exchangeable:
        group = sketch.element[carrier] + _hydrogens(hydrogens)
        return f"{group} ({environment.exchangeable})"
    if sketch.element[carrier] != "C":
        return sketch.element[carrier] + _hydrogens(hydrogens)
    name = _carbon_words(sketch, carrier, hydrogens)
    halved = hydrogens == 2 and len(environment.atoms) == len(environment.carriers)
    return f"one H of {name}" if halved else name
