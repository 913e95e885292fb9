"""The spin simulation against closed forms, sum rules and diagonalisation without blocks."""

from __future__ import annotations

from math import atan2, comb, cos, sin, sqrt

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from verify.expectations.spins import Lines, composite_spins, lineshape, merged, simulate

FIELD = 400.0


def matrix(size: int, values: dict[tuple[int, int], float]) -> np.ndarray:
    couplings = np.zeros((size, size))
    for (first, second), j in values.items():
        couplings[first, second] = couplings[second, first] = j
    return couplings


def run(hz: list[float], values: dict[tuple[int, int], float], groups: list[int]) -> Lines:
    shifts = [v / FIELD for v in hz]
    return merged(simulate(shifts, matrix(len(hz), values), groups, FIELD), 1e-5)


def test_ab_quartet() -> None:
    # closed form of two coupled spins (any textbook of high-resolution NMR; from memory)
    a, b, j = 440.0, 425.0, 9.0
    d = sqrt((a - b) ** 2 + j**2)
    mid = (a + b) / 2
    expected = sorted([mid - (d + j) / 2, mid - (d - j) / 2, mid + (d - j) / 2, mid + (d + j) / 2])
    lines = run([a, b], {(0, 1): j}, [1, 1])
    assert lines.frequency_hz == pytest.approx(expected, abs=1e-6)
    outer, inner = 0.5 * (1 - j / d), 0.5 * (1 + j / d)
    assert lines.intensity == pytest.approx([outer, inner, inner, outer], abs=1e-9)


def test_ab2_positions() -> None:
    # Pople, Schneider, Bernstein, High-resolution Nuclear Magnetic Resonance (1959); from memory
    a, b, j = 520.0, 500.0, 8.0
    plus = 0.5 * sqrt((a - b) ** 2 + (a - b) * j + 9 * j * j / 4)
    minus = 0.5 * sqrt((a - b) ** 2 - (a - b) * j + 9 * j * j / 4)
    mid = (a + b) / 2
    closed = [
        mid + 0.75 * j + plus, b + plus + minus, a, mid - 0.75 * j + minus, b + plus - minus,
        mid + 0.75 * j - plus, b - plus + minus, mid - 0.75 * j - minus,
    ]
    lines = run([a, b], {(0, 1): j}, [1, 2])
    strong = lines.frequency_hz[lines.intensity > 1e-3]
    assert strong == pytest.approx(sorted(closed), abs=1e-6)
    combination = b - plus - minus  # the ninth line is forbidden in first order and very weak
    assert np.min(np.abs(lines.frequency_hz - combination)) < 1e-4


def test_abx_lines_of_x() -> None:
    # closed form of ABX, X far away (Emsley, Feeney, Sutcliffe 1965; from memory)
    a, b, x, j_ab, j_ax, j_bx = 410.0, 400.0, 4.0e7, 12.0, 7.0, 3.0
    half = (j_ax - j_bx) / 2
    plus, minus = (0.5 * sqrt((a - b + s * half) ** 2 + j_ab**2) for s in (1, -1))
    twist = 0.5 * (atan2(j_ab, a - b + half) - atan2(j_ab, a - b - half))
    closed = {
        x + (j_ax + j_bx) / 2: 0.25, x - (j_ax + j_bx) / 2: 0.25,
        x + plus - minus: 0.25 * cos(twist) ** 2, x - plus + minus: 0.25 * cos(twist) ** 2,
        x + plus + minus: 0.25 * sin(twist) ** 2, x - plus - minus: 0.25 * sin(twist) ** 2,
    }
    lines = run([a, b, x], {(0, 1): j_ab, (0, 2): j_ax, (1, 2): j_bx}, [1, 1, 1])
    near = lines.frequency_hz > x / 2
    for (frequency, intensity), found, height in zip(
        sorted(closed.items()), lines.frequency_hz[near], lines.intensity[near], strict=True
    ):
        assert found == pytest.approx(frequency, abs=1e-3)
        assert height == pytest.approx(intensity, abs=1e-4)


def test_aa_xx_half_spectrum() -> None:
    # ten lines of the AA' part in terms of N, K, L, M (textbook closed form, from memory)
    j_aa, j_xx, j_ax, j_other = 2.4, 1.9, 8.6, 0.4
    n, k, m, ell = j_ax + j_other, j_aa + j_xx, j_aa - j_xx, j_ax - j_other
    a, x = 2800.0, 1.0e7
    root_k, root_m = sqrt(k * k + ell * ell), sqrt(m * m + ell * ell)
    half = [n / 2, (root_k + k) / 2, (root_k - k) / 2, (root_m + m) / 2, (root_m - m) / 2]
    values = {(0, 1): j_aa, (2, 3): j_xx, (0, 2): j_ax, (1, 3): j_ax, (0, 3): j_other, (1, 2): j_other}
    lines = run([a, a, x, x], values, [1, 1, 1, 1])
    own = lines.frequency_hz < x / 2
    near = merged(Lines(lines.frequency_hz[own], lines.intensity[own]), 1e-3)
    expected = sorted([a + h for h in half] + [a - h for h in half])
    assert near.frequency_hz == pytest.approx(expected, abs=1e-3)
    n_lines = near.intensity[np.isclose(np.abs(near.frequency_hz - a), n / 2, atol=1e-3)]
    assert n_lines == pytest.approx([0.5, 0.5], abs=1e-4)  # the two N lines hold half of the two nuclei


def test_ethyl_group_is_a_triplet_and_a_quartet() -> None:
    lines = merged(run([1200.0, 4.0e6], {(0, 1): 7.0}, [3, 2]), 1e-3)
    methyl = lines.intensity[lines.frequency_hz < 1e4]
    methylene = lines.intensity[lines.frequency_hz > 1e4]
    assert methyl == pytest.approx(3 * np.array([1, 2, 1]) / 4, abs=1e-4)
    assert methylene == pytest.approx(2 * np.array([1, 3, 3, 1]) / 8, abs=1e-4)


@pytest.mark.parametrize("partners", range(1, 9))
def test_lines_of_n_equal_partners_follow_pascal(partners: int) -> None:
    # common practice: n + 1 lines, 1:2:1 to the nonet
    lines = merged(run([0.0, 4.0e7], {(0, 1): 7.0}, [1, partners]), 1e-3)
    own = lines.frequency_hz < 1e6
    expected = [comb(partners, k) / 2**partners for k in range(partners + 1)]
    assert lines.intensity[own] == pytest.approx(expected, abs=1e-5)
    assert np.diff(lines.frequency_hz[own]) == pytest.approx([7.0] * partners, abs=1e-4)


def direct(hz: np.ndarray, couplings: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """All transitions from the full matrix, without blocks."""
    size = len(hz)
    half = [np.array([[0, 1], [1, 0]]) / 2, np.array([[0, -1j], [1j, 0]]) / 2, np.diag([0.5, -0.5])]

    def on(operator: np.ndarray, spin: int) -> np.ndarray:
        return np.kron(np.kron(np.eye(2**spin), operator), np.eye(2 ** (size - spin - 1)))

    spins = [[on(operator, n) for operator in half] for n in range(size)]
    hamiltonian = sum(hz[n] * spins[n][2] for n in range(size))
    for first in range(size):
        for second in range(first):
            product = sum(spins[first][k] @ spins[second][k] for k in range(3))
            hamiltonian = hamiltonian + couplings[first, second] * product
    energies, vectors = np.linalg.eigh(hamiltonian)
    lowering = sum(s[0] - 1j * s[1] for s in spins)
    amplitude = np.abs(vectors.conj().T @ lowering @ vectors) ** 2 / 2 ** (size - 1)
    frequency = energies[None, :] - energies[:, None]
    seen = amplitude > 1e-7
    return frequency[seen], amplitude[seen]


@pytest.mark.parametrize("size", [3, 5, 8])
def test_blocks_agree_with_the_full_matrix(size: int) -> None:
    rng = np.random.default_rng(size)
    couplings = np.triu(rng.uniform(0.5, 12.0, (size, size)), 1)
    couplings = couplings + couplings.T
    shifts = rng.uniform(1.0, 1.4, size)
    lines = simulate(shifts.tolist(), couplings, [1] * size, FIELD)
    frequency, intensity = direct(shifts * FIELD, couplings)
    grid = np.linspace(380.0, 580.0, 801)
    plain = lineshape(Lines(frequency, intensity), grid, 1.0)
    assert lineshape(lines, grid, 1.0) == pytest.approx(plain, abs=2e-4)
    assert plain.max() > 0.01


def test_composite_particles_agree_with_single_spins() -> None:
    values = {(n, m): 6.5 for n in range(3) for m in (3, 4)}
    single = run([480.0] * 3 + [500.0] * 2, values, [1] * 5)
    composite = run([480.0, 500.0], {(0, 1): 6.5}, [3, 2])
    grid = np.linspace(440.0, 540.0, 1001)
    assert lineshape(single, grid, 0.8) == pytest.approx(lineshape(composite, grid, 0.8), abs=1e-5)


@settings(max_examples=25, deadline=None)
@given(st.lists(st.tuples(st.floats(0.5, 8.0), st.integers(1, 3)), min_size=1, max_size=4), st.randoms())
def test_total_and_first_moment(groups: list[tuple[float, int]], random: object) -> None:
    # sum rules: the intensities add up to the nuclei, the first moment to the shifts, whatever the couplings
    size = len(groups)
    values = {(n, m): random.uniform(-15, 15) for n in range(size) for m in range(n)}  # type: ignore[attr-defined]
    lines = simulate([s for s, _ in groups], matrix(size, values), [n for _, n in groups], FIELD)
    assert lines.intensity.sum() == pytest.approx(sum(n for _, n in groups), rel=1e-3)
    moment = sum(shift * n for shift, n in groups) * FIELD
    assert (lines.intensity * lines.frequency_hz).sum() == pytest.approx(moment, rel=1e-3)


def test_weak_split_is_close_to_exact_where_shifts_are_far_apart() -> None:
    values = {(0, 1): 7.2, (1, 2): 7.4}
    shifts, groups = [0.94, 1.66, 4.05], [3, 2, 2]
    exact = simulate(shifts, matrix(3, values), groups, 600.0)
    split = simulate(shifts, matrix(3, values), groups, 600.0, weak_above=20.0)
    assert split.intensity.sum() == pytest.approx(7.0, rel=1e-6)
    grid = np.linspace(2380.0, 2480.0, 501)
    assert lineshape(split, grid, 1.5) == pytest.approx(lineshape(exact, grid, 1.5), abs=0.05)


def test_composite_spins_count_every_state() -> None:
    for nuclei in range(1, 10):
        assert sum((twice + 1) * times for twice, times in composite_spins(nuclei)) == 2**nuclei


def test_arguments_that_do_not_fit_are_refused() -> None:
    with pytest.raises(ValueError, match="fit together"):
        simulate([1.0, 2.0], np.zeros((3, 3)), [1, 1], FIELD)
    with pytest.raises(ValueError, match="at least one"):
        simulate([1.0], np.zeros((1, 1)), [0], FIELD)
    with pytest.raises(ValueError, match="too many"):
        simulate([1.0 + 0.1 * n for n in range(14)], np.ones((14, 14)), [1] * 14, FIELD)
