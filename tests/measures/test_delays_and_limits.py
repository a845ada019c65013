"""Centroids, group delays and transform limits of pulses whose values follow from closed forms."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.errors import InputError
from pulseprop.measures.delays import centroid, delay_split, group_delay
from pulseprop.measures.limits import peak_ratio, transform_limit, two_photon_ratio
from pulseprop.pulse.pulse import Pulse
from pulseprop.pulse.shapes import shape_named
from pulseprop.pulse.source import launch

W0 = 2 * np.pi * 375e12
PULSE = Pulse(centre=W0, duration=30e-15, energy=2e-6)


def mean_over_spectrum(values, spectrum):
    """Average weighted with |A|^2 where the values are known."""
    seen = np.isfinite(values)
    return np.average(values[seen], weights=np.abs(spectrum[seen]) ** 2)


def test_group_delay_of_a_field_is_the_slope_of_its_phase():
    pulse = replace(PULSE, gdd=900e-30, tod=1e4 * 1e-45)
    grid, envelope = launch(pulse)
    detuning = grid.omega - W0
    expected = 900e-30 * detuning + 0.5e4 * 1e-45 * detuning**2
    delay = group_delay(grid, envelope)
    seen = np.isfinite(delay)
    assert seen.sum() > 50
    assert np.max(np.abs(delay[seen] - expected[seen])) < 1e-20
    spectrum = pulse.amplitude(grid.omega)
    assert mean_over_spectrum(expected, spectrum) == pytest.approx(
        centroid(envelope, grid.step, grid.start), abs=1e-24
    )
    # <tod d^2/2> over the Gaussian power spectrum of variance 2 ln2/T^2
    assert centroid(envelope, grid.step, grid.start) == pytest.approx(
        0.5e4 * 1e-45 * 2 * np.log(2) / 30e-15**2, rel=1e-9
    )


@settings(max_examples=20, deadline=None)
@given(st.floats(-2e3, 2e3), st.floats(0.1, 4.0), st.floats(-1.5, 1.5), st.floats(-200, 200))
def test_the_centroid_splits_exactly(chirp, depth, place, delay):
    """An absorbing band with a delay: the parts add up, and each is the average that defines it."""
    pulse = replace(PULSE, gdd=chirp * 1e-30)
    grid, _ = launch(replace(PULSE, gdd=3e-27))
    omega = grid.omega
    magnitude = np.exp(-depth * np.exp(-(((omega - W0) * 30e-15 - place) ** 2)))
    before = pulse.amplitude(omega)
    after = before * magnitude * np.exp(1j * delay * 1e-15 * (omega - W0))
    split = delay_split(grid, before, magnitude, grid.to_field(after))
    assert split.net_group_delay == pytest.approx(delay * 1e-15, abs=1e-22)
    own = chirp * 1e-30 * (omega - W0)
    reshaping = mean_over_spectrum(own, after) - mean_over_spectrum(own, before)
    assert split.reshaping == pytest.approx(reshaping, abs=1e-22)
    assert split.centroid == pytest.approx(split.net_group_delay + split.reshaping, abs=1e-24)


def test_an_unchirped_pulse_is_not_reshaped():
    grid, _ = launch(replace(PULSE, gdd=1e-27))
    spectrum = PULSE.amplitude(grid.omega)
    magnitude = np.exp(-3 / (1 + ((grid.omega - W0) * 50e-15 - 0.4) ** 2))
    split = delay_split(grid, spectrum, magnitude, grid.to_field(spectrum * magnitude))
    assert abs(split.reshaping) < 1e-23


@settings(max_examples=20, deadline=None)
@given(st.sampled_from(["gaussian", "sech2"]), st.floats(-5e3, 5e3), st.floats(-5e4, 5e4))
def test_no_phase_beats_the_transform_limit(shape, gdd, tod):
    pulse = replace(PULSE, shape=shape_named(shape), gdd=gdd * 1e-30, tod=tod * 1e-45)
    grid, envelope = launch(pulse)
    limit = transform_limit(grid, pulse.amplitude(grid.omega))
    assert limit.fwhm == pytest.approx(30e-15, rel=1e-8)
    assert limit.peak_power == pytest.approx(2e-6 / (30e-15 * pulse.shape.energy), rel=1e-9)
    assert peak_ratio(envelope, limit) <= 1 + 1e-9
    assert two_photon_ratio(envelope, grid.step, limit) <= 1 + 1e-9


def test_ratios_of_a_chirped_gaussian_in_closed_form():
    # Stretched by b = sqrt(1 + (4 ln2 GDD/T^2)^2), peak power and int P^2 both fall as 1/b.
    gdd = 1000e-30
    stretch = np.sqrt(1 + (4 * np.log(2) * gdd / 30e-15**2) ** 2)
    pulse = replace(PULSE, gdd=gdd)
    grid, envelope = launch(pulse)
    limit = transform_limit(grid, pulse.amplitude(grid.omega))
    assert peak_ratio(envelope, limit) == pytest.approx(1 / stretch, rel=1e-10)
    assert two_photon_ratio(envelope, grid.step, limit) == pytest.approx(1 / stretch, rel=1e-10)


def test_an_empty_field_has_no_centroid():
    with pytest.raises(InputError, match="no energy"):
        centroid(np.zeros(8, complex), 1.0)
