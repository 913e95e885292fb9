"""Cuts expectations into the pieces that an assignment moves: whole groups, or one carrier's nuclei each."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass

from verify.environments.model import Environment
from verify.expectations.model import Expectation

# Price in nats of leaving an exchangeable hydrogen unlisted, by what the solvent does to it
# (measured on 602 published lists: listed in DMSO 80 %, CDCl3 75 %, CD3OD and D2O 5 % of them).
LEFT_OUT_EXCHANGED = 0.1
LEFT_OUT_APROTIC = 0.7
LEFT_OUT_SLOW = 1.4
MISSING_GROUP = 9.0
MISSING_SINGLE = 6.5  # below the price of a signal too small by one: where a CH is lost, it is named
MISSING_DOUBTFUL = 1.5
EXCHANGING_SOLVENTS = frozenset({"D2O", "CD3OD", "TFA-d", "CD3CO2D", "TFE-d3"})
SLOW_SOLVENTS = frozenset({"DMSO-d6", "DMF-d7"})


@dataclass(frozen=True, slots=True)
class Piece:
    """``nuclei`` of one environment that move together. ``left_out`` is the price in nats of finding them nowhere;
    ``optional`` says that a reader would not miss them. ``weight`` scales the prices of a large group, so that a
    9H group does not outvote nine single hydrogens. ``kin`` numbers pieces of equal constitution alike."""

    environment: int
    nuclei: int
    left_out: float
    optional: bool
    weight: float
    kin: int


def group_weight(nuclei: float) -> float:
    """Weight of a group's price: 1 for one nucleus, 1.75 at most."""
    return min(1.0 + 0.25 * (nuclei - 1.0), 1.75)


def exchanges(solvent: str | None) -> bool:
    """True where the solvent's own deuterons replace OH, NH, SH and COOH."""
    return solvent is not None and any(part in EXCHANGING_SOLVENTS for part in solvent.split("/"))


def left_out_price(environment: Environment, solvent: str | None) -> float:
    """Price in nats of a whole environment being absent from the list."""
    if environment.exchangeable:
        if exchanges(solvent):
            price = LEFT_OUT_EXCHANGED
        elif solvent in SLOW_SOLVENTS:
            price = LEFT_OUT_SLOW
        else:
            price = LEFT_OUT_APROTIC
        return price * group_weight(environment.count)
    if environment.may_vanish:
        return MISSING_DOUBTFUL
    return MISSING_SINGLE if environment.count < 1.5 else MISSING_GROUP


def whole_groups(expectations: tuple[Expectation, ...], solvent: str | None) -> tuple[Piece, ...]:
    """One piece for each environment; fractional stoichiometry is rounded up to whole nuclei."""
    pieces = []
    for expectation in expectations:
        environment = expectation.environment
        nuclei = max(1, round(environment.count))
        optional = bool(environment.exchangeable or environment.may_vanish)
        pieces.append(
            Piece(environment.index, nuclei, left_out_price(environment, solvent), optional,
                  group_weight(nuclei), environment.constitution)
        )
    return tuple(pieces)


def carrier_groups(expectations: tuple[Expectation, ...], solvent: str | None) -> tuple[Piece, ...]:
    """One piece for the nuclei on each carrier atom (each CH3, CH2, CH), for lists in which a group is cut."""
    pieces: list[Piece] = []
    by_index = {e.environment.index: e.environment for e in expectations}
    for piece in whole_groups(expectations, solvent):
        environment = by_index[piece.environment]
        parts = len(environment.carriers)
        if parts < 2 or piece.nuclei % parts:
            pieces.append(piece)
            continue
        share = piece.nuclei // parts
        part = Piece(piece.environment, share, piece.left_out / parts, piece.optional, group_weight(share), piece.kin)
        pieces.extend([part] * parts)
    return tuple(pieces)


def kin_weights(pieces: tuple[Piece, ...]) -> tuple[float, ...]:
    """Share of each piece in its constitution, so that a diastereotopic pair counts as one group."""
    sizes = Counter(piece.kin for piece in pieces)
    return tuple(1.0 / sizes[piece.kin] for piece in pieces)
