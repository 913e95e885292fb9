"""The spectrum a structure should give: spin systems from expectations, simulated exactly where possible."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from math import comb

import numpy as np
from numpy.typing import NDArray
from rdkit import Chem

from verify.environments.model import EnvironmentSet
from verify.expectations.couplings import Blocks, inner_blocks
from verify.expectations.model import Expectation
from verify.expectations.spins import Lines, simulate
from verify.structure.model import Structure

Array = NDArray[np.float64]
# Weakly coupled parts are split off in steps, the exact treatment first (None); with the largest number of states
# (of whole groups) for which a step is worth its time.
STEPS = ((None, 1100.0), (30.0, 2500.0), (10.0, 2500.0))
MOST_LINES = 4096
SMALLEST_J_HZ = 1.1


@dataclass(frozen=True, slots=True)
class SpinSystem:
    """Groups of equivalent nuclei that couple with one another. ``environments[g]`` is the environment of group
    ``g``; ``shifts`` in ppm, ``couplings`` in Hz with shape (groups, groups), ``sizes`` in nuclei."""

    environments: tuple[int, ...]
    shifts: tuple[float, ...]
    couplings: Array
    sizes: tuple[int, ...]


@dataclass(frozen=True, slots=True)
class Simulated:
    """``lines`` of one spin system and how they were found: "exact", "weak couplings beyond 30 J first order" ..."""

    system: SpinSystem
    lines: Lines
    how: str


Nucleus = tuple[Expectation, int]


def _equivalent(nuclei: Sequence[Nucleus], couplings: Array) -> list[list[int]]:
    """Nuclei of one environment with equal couplings to every nucleus outside it stay together as one group."""
    owner = np.array([expectation.environment.index for expectation, _ in nuclei])
    groups: dict[tuple[int, bytes], list[int]] = {}
    for number in range(len(nuclei)):
        outside = couplings[number] * (owner != owner[number])
        groups.setdefault((int(owner[number]), outside.tobytes()), []).append(number)
    return list(groups.values())


def _coupling(one: Expectation, other: int, bonds: int, inner: Mapping[int, Blocks]) -> float:
    """Typical J in Hz between a nucleus and one of environment ``other`` that many bonds away."""
    same = one.environment.index == other
    couplings = inner.get(other, ()) if same else one.couplings
    blocks = [b for b in couplings if b.environment == other and b.bonds == bonds]
    return next((b.typical for b in blocks if same or b.visibility != "hidden"), 0.0)


def spin_systems(
    structure: Structure, environments: EnvironmentSet, expectations: Sequence[Expectation], nucleus: str
) -> tuple[SpinSystem, ...]:
    """Coupled groups of one nucleus, each system connected; exchanging hydrogen is left out of couplings."""
    mine = [e for e in expectations if e.environment.nucleus == nucleus and e.window.judged]
    nuclei: list[Nucleus] = [(e, atom) for e in mine for atom in e.environment.atoms]
    distances = Chem.GetDistanceMatrix(structure.mol)
    inner = inner_blocks(structure, environments)
    couplings = np.zeros((len(nuclei), len(nuclei)))
    for first, (one, atom) in enumerate(nuclei):
        for second in range(first + 1, len(nuclei)):
            other, partner = nuclei[second]
            if one.environment.exchangeable or other.environment.exchangeable:
                continue
            bonds = round(float(distances[atom, partner]))
            j = _coupling(one, other.environment.index, bonds, inner)
            if j >= SMALLEST_J_HZ:
                couplings[first, second] = couplings[second, first] = j
    groups = _equivalent(nuclei, couplings)
    first_of = [group[0] for group in groups]
    between = couplings[np.ix_(first_of, first_of)]
    return tuple(_system(nuclei, groups, between, rows) for rows in _connected(between))


def _connected(couplings: Array) -> list[list[int]]:
    left = set(range(len(couplings)))
    found = []
    while left:
        part, waiting = [], [min(left)]
        left.discard(waiting[0])
        while waiting:
            here = waiting.pop()
            part.append(here)
            for other in np.flatnonzero(couplings[here]):
                if int(other) in left:
                    left.discard(int(other))
                    waiting.append(int(other))
        found.append(sorted(part))
    return found


def _system(nuclei: Sequence[Nucleus], groups: list[list[int]], between: Array, rows: list[int]) -> SpinSystem:
    chosen = [nuclei[groups[row][0]][0] for row in rows]
    return SpinSystem(
        tuple(e.environment.index for e in chosen),
        tuple(e.window.centre for e in chosen),
        between[np.ix_(rows, rows)],
        tuple(len(groups[row]) for row in rows),
    )


def _first_order(system: SpinSystem, field_mhz: float) -> Lines:
    """Every group split by every partner: n + 1 lines with binomial intensities, folded one after the other."""
    frequencies, intensities = [], []
    for group, size in enumerate(system.sizes):
        position, weight = np.array([system.shifts[group] * field_mhz]), np.array([float(size)])
        for other in np.flatnonzero(system.couplings[group]):
            n, j = system.sizes[int(other)], float(system.couplings[group, other])
            steps = (np.arange(n + 1) - n / 2.0) * j
            binomial = np.array([comb(n, k) for k in range(n + 1)]) / 2.0**n
            position = (position[:, None] + steps[None, :]).ravel()
            weight = (weight[:, None] * binomial[None, :]).ravel()
            if len(position) > MOST_LINES:
                break
        frequencies.append(position)
        intensities.append(weight)
    frequency, intensity = np.concatenate(frequencies), np.concatenate(intensities)
    order = np.argsort(frequency, kind="stable")
    return Lines(frequency[order], intensity[order])


def simulate_system(system: SpinSystem, field_mhz: float) -> Simulated:
    """Lines of one system at a 1H frequency in MHz, exact if small enough, else with weak couplings to first order."""
    states = float(np.prod([n + 1.0 for n in system.sizes]))
    for step, most in STEPS:
        if states > most:
            continue
        try:
            lines = simulate(system.shifts, system.couplings, system.sizes, field_mhz, step)
        except ValueError:
            continue
        how = "exact" if step is None else f"couplings below 1/{step:g} of the shift difference to first order"
        return Simulated(system, lines, how)
    return Simulated(system, _first_order(system, field_mhz), "first order")
