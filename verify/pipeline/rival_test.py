"""Holds near relatives of a structure against the same lists: does another structure explain them better?

A relative test sees far more wrong isomers than any absolute limit, because what is odd about a list is odd
for every relative too.
"""

from __future__ import annotations

from verify.assignment.boxes import CROWDING, SLACK
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
LARGEST = 45  # heavy atoms; beyond, isomers are too many to hold against a list
# Shifts of carbons vary more than their windows say when a group moves: what they win counts half and little,
# what they lose counts in full (measured on published lists and on isomers planted in them).
CARBON_SHARE, CARBON_MOST = 0.5, 2.0
USUAL = 0.3


def rival_fits(
    case: RecordCase, families: tuple[str, ...] = CHEAP, most: int = MOST_RIVALS, least_gain: float = float("-inf")
) -> tuple[RivalFit, ...]:
    """Relatives ranked by how much better they explain the lists, best first; empty where nothing was judged.

    ``least_gain``: relatives that cannot win this much (nats) need not be tried; -inf tries all of them.
    """
    structure = case.structure
    if structure is None or len([c for c in structure.components if c.role == "compound"]) != 1:
        return ()
    judged = tuple(s for s in case.spectra if s.assignment is not None and s.assignment.status == "explained")
    if not judged or structure.heavy > LARGEST:
        return ()
    worthwhile = tuple(f for f in families if _most_to_win(f, judged) >= least_gain)
    fits = []
    for relative in isomers(structure.smiles, worthwhile, most):
        gain = _gain(relative, judged, least_gain)
        if gain is not None:
            fits.append(RivalFit(relative.smiles, relative.family, relative.words, gain))
    return tuple(sorted(fits, key=lambda fit: (-fit.gain, fit.smiles)))


def _most_to_win(family: str, judged: tuple[SpectrumCase, ...]) -> float:
    """No relative of a family can win much more than what the signals cost that its move can touch, and some carbons.

    What any structure pays (``USUAL`` nats a signal) is not to be won.
    """
    most = CARBON_MOST
    for spectrum in judged:
        if spectrum.assignment is None or spectrum.spectrum.nucleus != "1H":
            continue
        aryl = {e.environment.index for e in spectrum.expectations if e.site == "aryl"}
        for reading in spectrum.assignment.readings:
            if family == "ring-position" and not any(share.environment in aryl for share in reading.shares):
                continue
            paid = sum(share.shift_cost + share.splitting_cost for share in reading.shares)
            crowded = CROWDING * max(0, len(reading.shares) - 1)
            most += max(0.0, paid - USUAL) + crowded + SLACK * (reading.excess + reading.deficit)
        most += SLACK * sum(m.nuclei for m in spectrum.assignment.missing if not m.optional)
    return most


def _gain(relative: Relative, judged: tuple[SpectrumCase, ...], least_gain: float) -> float | None:
    """Nats won over all judged lists; None where the relative cannot be read or wins too little on 1H alone."""
    read = read_structure(StructureText("smiles", relative.smiles, ""), ()).structure
    if read is None:
        return None
    environments = find_environments(read)
    shared: dict[tuple[str | None, float | None], tuple[Expectation, ...]] = {}
    total = 0.0
    for spectrum in sorted(judged, key=lambda s: s.spectrum.nucleus != "1H"):
        if spectrum.spectrum.nucleus != "1H" and total + CARBON_MOST < least_gain:
            return None
        conditions = solvent_and_field(spectrum.spectrum, spectrum.peaks)
        if conditions not in shared:
            shared[conditions] = expect(read, environments, *conditions)
        if spectrum.assignment is None:
            return None
        enough = spectrum.assignment.cost + CARBON_MOST - least_gain
        cost = list_cost(read, shared[conditions], spectrum.peaks, conditions[0], enough)
        if cost is None:
            return None
        won = spectrum.assignment.cost - cost
        if spectrum.spectrum.nucleus != "1H":
            won = min(CARBON_MOST, CARBON_SHARE * won) if won > 0.0 else won
        total += won
    return total
