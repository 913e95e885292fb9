"""Joins shift windows, coupling partners and names into one expectation for each environment."""

from __future__ import annotations

from verify.environments.model import Environment, EnvironmentSet
from verify.expectations.couplings import Blocks, coupling_blocks
from verify.expectations.model import Expectation, Window
from verify.expectations.second_order import second_order_of
from verify.expectations.shift_windows import shift_windows
from verify.expectations.sites import NUCLEUS_SITES, proton_site, words
from verify.expectations.sketch import Sketch, draw_sketch
from verify.structure.model import Structure

SHARP_WHEN_SLOW = frozenset({"amide", "thiol"})


def _open_chain_sp3(sketch: Sketch, atom: int) -> bool:
    return sketch.element[atom] == "C" and sketch.state[atom] == "sp3" and not sketch.ring_of[atom]


def _strict(sketch: Sketch, environment: Environment, environments: EnvironmentSet, blocks: Blocks) -> bool:
    """True where a wrong letter is strong evidence: open-chain sp3, simple partners, nothing that
    exchanges."""
    if environment.nucleus != "1H" or environment.exchangeable or environment.may_double:
        return False
    if environment.kind == "diastereotopic":
        return False
    if not all(_open_chain_sp3(sketch, carrier) for carrier in environment.carriers):
        return False
    for block in blocks:
        if block.environment < 0 or block.nucleus != "1H" or block.label.startswith("xh."):
            return False
        partner = environments.all[block.environment]
        simple = block.bonds == 3 and partner.kind != "diastereotopic"
        if block.visibility == "hidden":
            continue
        if not simple or not all(_open_chain_sp3(sketch, carrier) for carrier in partner.carriers):
            return False
    return True


def _shape(environment: Environment) -> str:
    if environment.exchangeable:
        return "either" if environment.exchangeable in SHARP_WHEN_SLOW else "broad"
    return "either" if environment.may_double else "sharp"


def _expect_one(
    sketch: Sketch, environment: Environment, environments: EnvironmentSet, windows: tuple[Window, ...],
    blocks: Blocks, field_mhz: float | None,
) -> Expectation:
    proton = environment.nucleus == "1H"
    return Expectation(
        environment=environment,
        window=windows[environment.index],
        couplings=blocks,
        strict_splitting=_strict(sketch, environment, environments, blocks),
        second_order=second_order_of(environment, environments, windows, blocks, field_mhz),
        shape=_shape(environment),
        site=proton_site(sketch, environment) if proton else NUCLEUS_SITES[environment.nucleus],
        words=words(sketch, environment),
    )


def expect(
    structure: Structure, environments: EnvironmentSet, solvent: str | None, field_mhz: float | None
) -> tuple[Expectation, ...]:
    """Expectations aligned with ``EnvironmentSet.all``. ``field_mhz`` is that of 1H. Accepted splittings
    are left empty; ``accepted_splittings`` of the couplings gives them."""
    sketch = draw_sketch(structure.mol)
    windows = shift_windows(structure, environments, solvent)
    partners = coupling_blocks(structure, environments, solvent, sketch)
    return tuple(
        _expect_one(sketch, environment, environments, windows, blocks, field_mhz)
        for environment, blocks in zip(environments.all, partners, strict=True)
    )
