"""Turns the coupling network of a structure into blocks of partners with a window in Hz each."""

from __future__ import annotations

from verify.environments.model import Environment, EnvironmentSet, Neighbour
from verify.expectations.coupling_aromatic import HIDDEN, NOTHING, OPTIONAL, Verdict
from verify.expectations.coupling_hetero import (
    carbon_fluorine_path,
    carbon_phosphorus_path,
    fluorine_path,
    hetero_pair,
    phosphorus_path,
)
from verify.expectations.coupling_paths import exchangeable_path, exchanges, hydrogen_path
from verify.expectations.coupling_table import coupling_table
from verify.expectations.model import CouplingBlock
from verify.expectations.sketch import Sketch, draw_sketch
from verify.structure.model import Structure

Blocks = tuple[CouplingBlock, ...]
AVERAGED_KINDS = frozenset({"homotopic", "enantiotopic"})
ACYL = frozenset({"C", "S", "P"})


def _averaged(sketch: Sketch, environment: Environment) -> bool:
    """True where all nuclei of a carrier are alike, so that conformers average to one J."""
    if environment.kind in AVERAGED_KINDS:
        return True
    carriers = environment.carriers
    return len(environment.atoms) == len(carriers) * sketch.hydrogens(carriers[0])


def _classify(
    sketch: Sketch, owner: Environment, partner: Environment, neighbour: Neighbour, solvent: str | None
) -> Verdict:
    path, nuclei = neighbour.path, (owner.nucleus, partner.nucleus)
    averaged = _averaged(sketch, owner) and _averaged(sketch, partner)
    if nuclei == ("1H", "1H"):
        kind = owner.exchangeable or partner.exchangeable
        if kind:
            return exchangeable_path(sketch, path, kind, solvent)
        return hydrogen_path(sketch, path, averaged)
    if owner.nucleus == "13C":
        if partner.nucleus == "19F":
            return carbon_fluorine_path(sketch, path)
        return carbon_phosphorus_path(sketch, path) if partner.nucleus == "31P" else NOTHING
    if "1H" in nuclei:
        turned = path if owner.nucleus == "1H" else path[::-1]
        fluorine = "19F" in nuclei
        label, seen = fluorine_path(sketch, turned, averaged) if fluorine else phosphorus_path(sketch, turned)
        hydrogen = owner if owner.nucleus == "1H" else partner
        if hydrogen.exchangeable and exchanges(solvent):
            return label, HIDDEN
        if owner.nucleus == "31P":  # phosphorus spectra are run with hydrogen decoupled, as a rule
            return label, HIDDEN
        return label, OPTIONAL if owner.nucleus == "19F" else seen
    return hetero_pair(path, nuclei) if "13C" not in nuclei else NOTHING


def _block(neighbour: Neighbour, verdict: Verdict) -> CouplingBlock:
    label, visibility = verdict
    row = coupling_table()[label]
    return CouplingBlock(
        neighbour.environment, neighbour.nucleus, neighbour.count, row.low, row.high, row.typical, visibility,
        neighbour.bonds, label, row.source,
    )


def _basic_nitrogen(sketch: Sketch, atom: int) -> bool:
    """Amine nitrogen that an acid protonates: sp3, no acyl or sulfonyl, no conjugated ring beside it."""
    if sketch.element[atom] != "N" or sketch.state[atom] != "sp3" or sketch.charge[atom] > 0:
        return False
    return all(
        sketch.state[n] in ("sp3", "ar") and (sketch.element[n] in ("C", "H")) for n in sketch.around[atom]
    ) and any(sketch.state[n] == "sp3" for n in sketch.around[atom])


def _salt_partner(sketch: Sketch, owner: Environment) -> CouplingBlock | None:
    """The NH+ of a salt drawn as base and acid: it splits the hydrogens of an N-CH, seen or not."""
    if owner.nucleus != "1H" or owner.exchangeable:
        return None
    if not any(_basic_nitrogen(sketch, n) for carrier in owner.carriers for n in sketch.around[carrier]):
        return None
    row = coupling_table()["xh.CH_NH3plus_slow"]
    return CouplingBlock(-1, "1H", 1, row.low, row.high, row.typical, OPTIONAL, 3, row.label, row.source)


def _of_one(
    sketch: Sketch, owner: Environment, environments: EnvironmentSet, solvent: str | None, salt: bool
) -> Blocks:
    blocks = []
    for neighbour in owner.neighbours:
        if neighbour.same or len(neighbour.path) < 2:
            continue
        verdict = _classify(sketch, owner, environments.all[neighbour.environment], neighbour, solvent)
        if verdict[0]:
            blocks.append(_block(neighbour, verdict))
    extra = _salt_partner(sketch, owner) if salt else None
    return tuple(blocks) if extra is None else (*blocks, extra)


def coupling_blocks(
    structure: Structure, environments: EnvironmentSet, solvent: str | None, sketch: Sketch | None = None
) -> tuple[Blocks, ...]:
    """Partners of every environment, aligned with ``EnvironmentSet.all``; windows are absolute J in Hz.
    ``sketch`` saves drawing the molecule again."""
    sketch = sketch or draw_sketch(structure.mol)
    salt = "salt" in structure.flags or any(c.role == "counter-ion" for c in structure.components)
    return tuple(_of_one(sketch, e, environments, solvent, salt) for e in environments.all)


def inner_blocks(structure: Structure, environments: EnvironmentSet) -> dict[int, Blocks]:
    """Couplings inside environments of magnetically inequivalent nuclei (AA'XX'), by environment index.

    They do not split first-order patterns and are left out of ``coupling_blocks``; a simulation needs them.
    """
    sketch = draw_sketch(structure.mol)
    found: dict[int, Blocks] = {}
    for owner in environments.all:
        inside = [n for n in owner.neighbours if n.same and len(n.path) >= 2]
        verdicts = [(n, _classify(sketch, owner, owner, n, None)) for n in inside]
        blocks = tuple(_block(n, verdict) for n, verdict in verdicts if verdict[0])
        if blocks:
            found[owner.index] = blocks
    return found
