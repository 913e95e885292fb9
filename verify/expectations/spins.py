"""Exact spectra of coupled spin-1/2 nuclei: line positions, intensities and line shape at a given field.

The Hamiltonian (in Hz) is H = sum v_i Iz_i + sum J_ij I_i.I_j. It is block-diagonal in the total z spin. A
group of magnetically equivalent nuclei acts as composite particles of spin n/2, n/2 - 1, ... with known
multiplicities (textbook theory of high-resolution NMR); couplings inside a group drop out.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import product
from math import comb

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Index = NDArray[np.int64]

SMALLEST_LINE = 1e-7  # relative to one nucleus; weaker lines are left out
LARGEST_BLOCK = 1000  # states; twelve different nuclei have 924
LINES_AT_ONCE = 4096


@dataclass(frozen=True, slots=True)
class Lines:
    """``frequency_hz`` from 0 ppm (positive to higher shift), ascending; ``intensity`` sums to the number of
    nuclei. Both have shape (lines,)."""

    frequency_hz: Array
    intensity: Array


def composite_spins(nuclei: int) -> list[tuple[int, int]]:
    """Twice the spin, and the multiplicity, of every composite particle that ``nuclei`` spins 1/2 form."""
    return [
        (nuclei - 2 * k, comb(nuclei, k) - (comb(nuclei, k - 1) if k else 0)) for k in range(nuclei // 2 + 1)
    ]


class _Basis:
    """Product states of a few particles, sorted into blocks by the z spin of each weakly coupled cluster."""

    def __init__(self, twice: tuple[int, ...], clusters: Index) -> None:
        sizes = [t + 1 for t in twice]
        self.strides = [int(np.prod(sizes[k + 1 :], dtype=np.int64)) for k in range(len(sizes))]
        self.spin = np.array(twice) / 2.0
        grid = np.indices(sizes).reshape(len(sizes), -1)
        self.m: Array = self.spin[:, None] - grid  # shape (particles, states)
        square = (self.spin * (self.spin + 1.0))[:, None]
        self.up = np.sqrt(np.maximum(square - self.m * (self.m + 1.0), 0.0))
        self.down = np.sqrt(np.maximum(square - self.m * (self.m - 1.0), 0.0))
        self.clusters = clusters
        count = int(clusters.max()) + 1
        lowered = np.zeros((count, grid.shape[1]), dtype=np.int64)
        for particle, cluster in enumerate(clusters):
            lowered[cluster] += grid[particle]
        keys, self.block = np.unique(lowered, axis=1, return_inverse=True)
        self.block = self.block.reshape(-1)
        self.keys = [tuple(int(v) for v in column) for column in keys.T]
        self.members = [np.flatnonzero(self.block == n) for n in range(len(self.keys))]
        self.place = np.zeros(grid.shape[1], dtype=np.int64)
        for members in self.members:
            self.place[members] = np.arange(len(members))

    def largest(self) -> int:
        """Number of states in the largest block."""
        return max(len(members) for members in self.members)


def _hamiltonian(basis: _Basis, states: Index, hz: Array, couplings: Array) -> Array:
    """Dense block of the Hamiltonian; flip-flop terms only inside a cluster."""
    size = len(states)
    m = basis.m[:, states]
    diagonal = hz @ m + 0.5 * np.einsum("is,ij,js->s", m, couplings, m)
    block = np.zeros((size, size))
    block[np.arange(size), np.arange(size)] = diagonal
    for first in range(len(hz)):
        for second in range(first + 1, len(hz)):
            j = couplings[first, second]
            if j == 0.0 or basis.clusters[first] != basis.clusters[second]:
                continue
            strength = 0.5 * j * basis.up[first, states] * basis.down[second, states]
            source = np.flatnonzero(strength)
            if len(source) == 0:
                continue
            target = basis.place[states[source] - basis.strides[first] + basis.strides[second]]
            block[target, source] += strength[source]
            block[source, target] += strength[source]
    return block


def _lowering(basis: _Basis, upper: Index, lower: Index, cluster: int) -> Array:
    """Matrix of the lowering operator of a cluster from one block to the next, shape (lower, upper)."""
    matrix = np.zeros((len(lower), len(upper)))
    columns = np.arange(len(upper))
    for particle in np.flatnonzero(basis.clusters == cluster):
        strength = basis.down[particle, upper]
        source = np.flatnonzero(strength)
        target = basis.place[upper[source] + basis.strides[particle]]
        matrix[target, columns[source]] += strength[source]
    return matrix


def _lines_of(basis: _Basis, hz: Array, couplings: Array, weight: float) -> list[tuple[Array, Array]]:
    """Frequencies and intensities of one choice of particle spins."""
    solved = [np.linalg.eigh(_hamiltonian(basis, states, hz, couplings)) for states in basis.members]
    number = {key: n for n, key in enumerate(basis.keys)}
    found = []
    for key, upper in number.items():
        for cluster in range(len(key)):
            lower = number.get((*key[:cluster], key[cluster] + 1, *key[cluster + 1 :]))
            if lower is None:
                continue
            energies, vectors = solved[upper]
            energies_low, vectors_low = solved[lower]
            moment = _lowering(basis, basis.members[upper], basis.members[lower], cluster)
            amplitude = vectors_low.T @ (moment @ vectors)
            intensity = weight * amplitude * amplitude
            seen = intensity > SMALLEST_LINE
            frequency = energies[None, :] - energies_low[:, None]
            found.append((frequency[seen], intensity[seen]))
    return found


def _joined(linked: NDArray[np.bool_]) -> Index:
    """Numbers of the connected parts of a symmetric relation, in order of first appearance."""
    size = len(linked)
    part = np.full(size, -1, dtype=np.int64)
    number = 0
    for start in range(size):
        if part[start] >= 0:
            continue
        waiting = [start]
        part[start] = number
        while waiting:
            for other in np.flatnonzero(linked[waiting.pop()]):
                if part[other] < 0:
                    part[other] = number
                    waiting.append(int(other))
        number += 1
    return part


def _component(
    hz: Array, couplings: Array, groups: tuple[int, ...], clusters: Index
) -> list[tuple[Array, Array]]:
    nuclei = sum(groups)
    found: list[tuple[Array, Array]] = []
    for choice in product(*(composite_spins(n) for n in groups)):
        twice = tuple(t for t, _ in choice)
        multiplicity = 1
        for _, times in choice:
            multiplicity *= times
        if not any(twice):
            continue
        basis = _Basis(twice, clusters)
        if basis.largest() > LARGEST_BLOCK:
            raise ValueError(f"{nuclei} coupled nuclei are too many to simulate exactly")
        found.extend(_lines_of(basis, hz, couplings, multiplicity / 2.0 ** (nuclei - 1)))
    return found


def simulate(
    shifts_ppm: Sequence[float], couplings_hz: Array, groups: Sequence[int], field_mhz: float,
    weak_above: float | None = None,
) -> Lines:
    """Lines of groups of equivalent nuclei. ``couplings_hz`` is symmetric, shape (groups, groups), its
    diagonal is ignored. With ``weak_above``, pairs whose shift difference exceeds that many J are coupled
    through their z spins only, which splits the work into smaller blocks; without it the result is exact.
    Raises ValueError if a block would hold more than ``LARGEST_BLOCK`` states or the arguments do not fit
    together."""
    hz = np.asarray(shifts_ppm, dtype=np.float64) * field_mhz
    couplings = np.array(couplings_hz, dtype=np.float64)
    size = len(hz)
    if couplings.shape != (size, size) or len(groups) != size or not np.allclose(couplings, couplings.T):
        raise ValueError("shifts, couplings and groups do not fit together")
    if min(groups, default=0) < 1:
        raise ValueError("every group holds at least one nucleus")
    np.fill_diagonal(couplings, 0.0)
    parts = _joined(couplings != 0.0)
    strong = couplings != 0.0
    if weak_above is not None:
        strong &= np.abs(hz[:, None] - hz[None, :]) <= weak_above * np.abs(couplings)
    found: list[tuple[Array, Array]] = []
    for part in range(int(parts.max()) + 1):
        rows = np.flatnonzero(parts == part)
        clusters = _joined(strong[np.ix_(rows, rows)])
        chosen = tuple(groups[int(n)] for n in rows)
        found.extend(_component(hz[rows], couplings[np.ix_(rows, rows)], chosen, clusters))
    frequency = np.concatenate([f for f, _ in found])
    intensity = np.concatenate([i for _, i in found])
    order = np.argsort(frequency, kind="stable")
    return Lines(frequency[order], intensity[order])


def merged(lines: Lines, resolution_hz: float = 0.05) -> Lines:
    """Lines within one resolution of each other joined at their centre of gravity; the total and the first
    moment are kept."""
    if len(lines.frequency_hz) == 0:
        return lines
    starts, begin = [0], float(lines.frequency_hz[0])
    for number, frequency in enumerate(lines.frequency_hz.tolist()):
        if frequency - begin > resolution_hz:
            starts.append(number)
            begin = frequency
    intensity = np.add.reduceat(lines.intensity, starts)
    moment = np.add.reduceat(lines.intensity * lines.frequency_hz, starts)
    return Lines(moment / intensity, intensity)


def lineshape(lines: Lines, grid_hz: Array, width_hz: float) -> Array:
    """Sum of Lorentzians of full width ``width_hz`` at half height, shape of ``grid_hz``; its area is the sum
    of the intensities."""
    half = width_hz / 2.0
    spectrum = np.zeros(len(grid_hz))
    for start in range(0, len(lines.frequency_hz), LINES_AT_ONCE):
        frequency = lines.frequency_hz[start : start + LINES_AT_ONCE, None]
        intensity = lines.intensity[start : start + LINES_AT_ONCE]
        spectrum += intensity @ (half / np.pi / ((grid_hz[None, :] - frequency) ** 2 + half * half))
    return spectrum
