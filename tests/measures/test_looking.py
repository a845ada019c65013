"""What instruments and plots show: autocorrelations, spectrograms, thinned profiles."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.grid import Grid
from pulseprop.measures.autocorrelation import (
    autocorrelation_fwhm,
    intensity_autocorrelation,
    interferometric_autocorrelation,
)
from pulseprop.measures.contrast import thinned
from pulseprop.measures.spectrogram import spectrogram
from pulseprop.measures.window import energy_window, quiet_start
from pulseprop.pulse.pulse import Pulse
from pulseprop.pulse.source import launch

W0 = 2 * np.pi * 375e12
PULSE = Pulse(centre=W0, duration=30e-15, energy=2e-6)


def test_intensity_autocorrelation_against_the_direct_sum():
    time = np.arange(400) - 150.0
    field = np.exp(-((time / 20) ** 2)) + 0.5j * np.exp(-(((time - 60) / 14) ** 2))
    power = np.abs(field) ** 2
    direct = np.correlate(power, power, "full")
    trace = intensity_autocorrelation(field, 1.0)
    assert np.interp(np.arange(-200, 201), trace.delay, trace.signal) == pytest.approx(
        direct[399 - 200 : 399 + 201] / direct[399], abs=1e-9
    )
    assert trace.signal == pytest.approx(trace.signal[::-1], abs=1e-12)


def test_autocorrelation_of_a_field_that_wraps_around():
    grid, envelope = launch(PULSE)
    rolled = np.roll(np.pad(envelope, 300), 290 + envelope.size // 2 + 17)
    assert autocorrelation_fwhm(rolled, grid.step) == pytest.approx(np.sqrt(2) * 30e-15, rel=1e-9)


def test_interferometric_autocorrelation_of_a_gaussian_in_closed_form():
    # 1 + 2 G2 + 4 Re[G1 cos] + Re[G0 cos 2]: J.-C. Diels, W. Rudolph, Ultrashort Laser Pulse Phenomena (form:
    # memory; for a Gaussian exp(-a t^2) each integral is elementary).
    grid, envelope = launch(PULSE)
    carrier = W0 / (2 * np.pi)
    trace = interferometric_autocorrelation(envelope, grid.step, grid.carrier)
    rate = 2 * np.log(2) / 30e-15**2
    x, turn = rate * trace.delay**2, 2 * np.pi * carrier * trace.delay
    expected = 1 + 2 * np.exp(-x) + 4 * np.exp(-0.75 * x) * np.cos(turn) + np.exp(-x) * np.cos(2 * turn)
    assert trace.signal == pytest.approx(expected, abs=1e-8)
    assert trace.signal.max() == pytest.approx(8.0, abs=1e-9)


def test_interferometric_autocorrelation_of_a_chirped_field_against_its_definition():
    pulse = replace(PULSE, gdd=600e-30, tod=5e3 * 1e-45)
    grid, envelope = launch(pulse, oversampling=4)
    delays = grid.step * np.arange(-40, 41)
    trace = interferometric_autocorrelation(envelope, grid.step, grid.carrier, delays)
    field = np.pad(grid.carrier_resolved(envelope), 64)
    direct = [np.sum(np.abs(field + np.roll(field, j)) ** 4) for j in range(-40, 41)]
    floor = 2 * np.sum(np.abs(field) ** 4)
    assert trace.signal == pytest.approx(np.array(direct) / floor, rel=1e-8)


def test_spectrogram_of_a_chirped_pulse_follows_its_group_delay_and_holds_its_energy():
    pulse = replace(PULSE, gdd=3000e-30)
    grid, _ = launch(pulse)
    found = spectrogram(grid, pulse.amplitude(grid.omega))
    assert found.density.shape == (200, 256)
    cell = (found.time[1] - found.time[0]) * (found.frequency[1] - found.frequency[0])
    assert found.density.sum() * cell == pytest.approx(2e-6, rel=1e-3)
    # The Gaussian gate's power spectrum and the chirp's: mean time at a frequency is gdd (w - w0) s, s from
    # the gate.
    mean = (found.density @ found.time) / found.density.sum(axis=1)
    strong = found.density.sum(axis=1) > 0.05 * found.density.sum(axis=1).max()
    slope = np.polyfit(2 * np.pi * found.frequency[strong], mean[strong], 1)[0]
    deviation = found.gate / np.sqrt(8 * np.log(2))
    variance = 2 * np.log(2) / 30e-15**2
    blur = 1 / (4 * deviation**2)
    assert slope == pytest.approx(3000e-30 * variance / (variance + blur), rel=1e-3)


def test_spectrogram_crops_a_huge_window():
    small, _ = launch(PULSE)
    grid = Grid(points=1 << 18, step=small.step, start=-1e-12, carrier=small.carrier)
    found = spectrogram(grid, PULSE.amplitude(grid.omega))
    assert -150e-15 < found.time[0] < -30e-15
    assert 30e-15 < found.time[-1] < 150e-15
    middle = np.unravel_index(np.argmax(found.density), found.density.shape)
    assert abs(found.time[middle[1]]) < 2e-15
    assert found.frequency[middle[0]] == pytest.approx(375e12, rel=5e-3)
    with pytest.raises(InputError, match="no energy"):
        spectrogram(grid, np.zeros(grid.points, complex))


def test_a_thinned_profile_keeps_every_peak_of_its_stretch():
    power = np.full(100_003, 1e-9)
    power[[77, 5_000, 100_002]] = [1.0, 1e-4, 1e-6]
    time, kept = thinned(10.0, 2.0, power, 1000)
    assert time.size <= 1000
    for index in (77, 5_000, 100_002):
        assert kept[np.flatnonzero(time == 10.0 + 2.0 * index)] == [power[index]]


def test_windows_hold_the_energy():
    power = np.zeros(1000)
    power[[0, 1, 999]] = 1.0
    start = quiet_start(power)
    rolled = np.roll(power, -start)
    window = energy_window(rolled, 1e-6)
    assert rolled[window].sum() == 3.0
    assert window.stop - window.start <= 6
    assert quiet_start(np.roll(power, 500)) == 0
