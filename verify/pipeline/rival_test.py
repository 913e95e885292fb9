"""Holds near relatives of a structure against the same lists: does another structure explain them better?

A relative test sees far more wrong isomers than any absolute limit, because what is odd about a list is odd
for every relative too.
"""

from __future__ import annotations

from verify.assignment.model import RivalFit
from verify.assignment.stage import list_cost
from verify.environments.stage import find_environments
from verify.expectations.model import Expectation
from verify.expectations.stage import expect
from verify.pipeline.reach import solvent_and_field
from verify.record.model import StructureText
from verify.rulebook.model import RecordCase, SpectrumCase
from verify.structure.isomers import CHEAP, Relative, isomers
from verify.structure.stage import read_structure

MOST_RIVALS = 12
LEAST_ODD = 1.2  # nats; a 1H list explained this well cannot be explained better by much more
LARGEST = 60  # heavy atoms; beyond, isomers are too many to hold against a list
# Shifts of carbons vary more than their windows say when a group moves: what they win counts half and little,
# what they lose counts in full (measured on published lists and on isomers planted in them).
CARBON_SHARE, CARBON_MOST = 0.5, 2.0


def rival_fits(
    case: RecordCase, families: tuple[str, ...] = CHEAP, most: int = MOST_RIVALS, least_odd: float = LEAST_ODD
) -> tuple[RivalFit, ...]:
    """Relatives ranked by how much better they explain the lists, best first; empty where nothing was judged.

    ``least_odd``: records whose lists cost less than this (nats) are not tried, since no relative can win more.
    """
    structure = case.structure
    if structure is None or len([c for c in structure.components if c.role == "compound"]) != 1:
        return ()
    judged = tuple(s for s in case.spectra if s.assignment is not None and s.assignment.status == "explained")
    own = {s.number: s.assignment.cost for s in judged if s.assignment is not None}
    proton = sum(own[s.number] for s in judged if s.spectrum.nucleus == "1H")
    if not judged or structure.heavy > LARGEST or (proton < least_odd and least_odd > 0.0):
        return ()
    fits = []
    for relative in isomers(structure.smiles, families, most):
        gain = _gain(relative, judged, own)
        if gain is not None:
            fits.append(RivalFit(relative.smiles, relative.family, relative.words, gain))
    return tuple(sorted(fits, key=lambda fit: (-fit.gain, fit.smiles)))


def _gain(relative: Relative, judged: tuple[SpectrumCase, ...], own: dict[int, float]) -> float | None:
    """Nats won over all judged lists; None where the relative cannot be read."""
    read = read_structure(StructureText("smiles", relative.smiles, ""), ()).structure
    if read is None:
        return None
    environments = find_environments(read)
    shared: dict[tuple[str | None, float | None], tuple[Expectation, ...]] = {}
    total = 0.0
    for spectrum in judged:
        conditions = solvent_and_field(spectrum.spectrum, spectrum.peaks)
        if conditions not in shared:
            shared[conditions] = expect(read, environments, *conditions)
        cost = list_cost(read, shared[conditions], spectrum.peaks, conditions[0])
        if cost is None:
            return None
        won = own[spectrum.number] - cost
        if spectrum.spectrum.nucleus != "1H":
            won = min(CARBON_MOST, CARBON_SHARE * won) if won > 0.0 else won
        total += won
    return total
