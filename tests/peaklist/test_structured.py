"""Structured signals: numbers without their last zeros are read to the precision of the list."""

from __future__ import annotations

from verify.peaklist.stage import read_signals


def test_the_precision_is_that_of_the_list() -> None:
    peaks = read_signals([{"shift": 5.1}, {"shift": 1.68}, {"low": 1.3, "high": 1.4}], "1H", "/spectra/0/signals")
    assert [signal.decimals for signal in peaks.signals] == [2, 2, 2]


def test_a_coarse_list_stays_coarse() -> None:
    peaks = read_signals([{"shift": 5.1}, {"shift": 7}], "1H", "/spectra/0/signals")
    assert [signal.decimals for signal in peaks.signals] == [1, 1]
