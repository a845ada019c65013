"""Chirp from a measured duration or autocorrelation."""

from __future__ import annotations

from dataclasses import replace
from types import SimpleNamespace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.errors import InputError, NumericalLimit
from pulseprop.pulse.chirp import (
    chirp_from_duration,
    gdd_from_autocorrelation,
    glass_that_tells_the_sign,
    launched_autocorrelation_fwhm,
    launched_fwhm,
)
from pulseprop.pulse.pulse import Pulse
from pulseprop.pulse.shapes import shape_named

PULSE = Pulse(centre=2 * np.pi * 375e12, duration=25e-15, energy=1e-9)


@settings(max_examples=10, deadline=None)
@given(st.floats(1.001, 30))
def test_a_gaussian_follows_the_textbook_root(ratio):
    positive, negative = chirp_from_duration(PULSE, ratio * 25e-15)
    expected = 25e-15**2 / (4 * np.log(2)) * np.sqrt(ratio**2 - 1)
    assert positive == pytest.approx(expected, rel=1e-6)
    assert negative == pytest.approx(-expected, rel=1e-6)


@pytest.mark.parametrize("shape", ["sech2", "supergaussian", "finite"])
def test_other_shapes_give_back_the_measured_duration(shape):
    pulse = replace(PULSE, shape=shape_named(shape))
    positive, negative = chirp_from_duration(pulse, 62e-15)
    for gdd in (positive, negative):
        assert launched_fwhm(replace(pulse, gdd=gdd)) == pytest.approx(62e-15, rel=1e-6)
    gaussian = 25e-15**2 / (4 * np.log(2)) * np.sqrt((62 / 25) ** 2 - 1)
    assert abs(positive / gaussian - 1) > 0.01


def test_fourth_order_makes_the_two_signs_differ():
    pulse = replace(PULSE, fod=1e5 * 1e-60)
    positive, negative = chirp_from_duration(pulse, 62e-15)
    assert positive < -negative
    assert launched_fwhm(replace(pulse, gdd=negative)) == pytest.approx(62e-15, rel=1e-6)


def test_a_duration_at_the_limit_has_no_chirp_and_below_it_is_refused():
    assert chirp_from_duration(PULSE, 25e-15) == (0.0, 0.0)
    with pytest.raises(
        InputError, match=r"20 fs, is shorter than the transform limit of the spectrum, 25 fs"
    ):
        chirp_from_duration(PULSE, 20e-15)


def gaussian_trace(delay, gdd):
    """The autocorrelation of a chirped Gaussian is a Gaussian sqrt 2 wider."""
    width = np.sqrt(2) * 25e-15 * np.sqrt(1 + (4 * np.log(2) * gdd / 25e-15**2) ** 2)
    return np.exp(-4 * np.log(2) * (delay / width) ** 2)


@pytest.mark.parametrize("gdd", [0.0, 200e-30, 900e-30])
def test_the_autocorrelation_gives_back_dispersion_place_height_and_floor(gdd):
    delay = np.linspace(-400e-15, 420e-15, 301)
    fit = gdd_from_autocorrelation(PULSE, delay, 7 * gaussian_trace(delay - 9e-15, gdd) + 0.3)
    # The trace is even in the dispersion: about zero it moves only with (4 ln2 GDD/T^2)^2.
    assert fit.gdd == pytest.approx(gdd, rel=1e-5, abs=1e-4 * 25e-15**2)
    assert fit.centre == pytest.approx(9e-15, rel=1e-6)
    assert (fit.scale, fit.background) == pytest.approx((7, 0.3), rel=1e-5)
    assert fit.residual < 1e-6
    assert fit.autocorrelation_fwhm == pytest.approx(np.sqrt(2) * fit.pulse_fwhm, rel=1e-7)


def test_the_residual_tells_the_noise_and_a_wrong_shape():
    delay = np.linspace(-400e-15, 400e-15, 401)
    noise = 0.02 * np.random.default_rng(5).normal(size=delay.size)
    fit = gdd_from_autocorrelation(PULSE, delay, gaussian_trace(delay, 500e-30) + noise)
    assert fit.residual == pytest.approx(0.02, rel=0.1)
    assert fit.gdd == pytest.approx(500e-30, rel=0.02)
    wings = gdd_from_autocorrelation(PULSE, delay, 1 / (1 + (delay / 60e-15) ** 2))
    assert wings.residual > 0.01


def test_unusable_traces_are_refused():
    delay = np.linspace(-1e-13, 1e-13, 20)
    with pytest.raises(InputError, match="8 rows or more"):
        gdd_from_autocorrelation(PULSE, delay[:5], delay[:5])
    with pytest.raises(InputError, match="row 3"):
        gdd_from_autocorrelation(PULSE, delay, np.where(np.arange(20) == 2, np.nan, 1.0))
    with pytest.raises(InputError, match="is constant"):
        gdd_from_autocorrelation(PULSE, delay, np.ones(20))


def test_a_fit_that_does_not_settle_is_told(monkeypatch):
    """The solver reports success by a flag; what it hands out without is no minimum."""
    stopped = SimpleNamespace(success=False, x=np.zeros(2), message="the limit of evaluations is reached")
    monkeypatch.setattr("scipy.optimize.least_squares", lambda *given, **more: stopped)
    delay = np.linspace(-400e-15, 400e-15, 101)
    with pytest.raises(NumericalLimit, match=r"does not settle.*limit of evaluations.*background"):
        gdd_from_autocorrelation(PULSE, delay, gaussian_trace(delay, 500e-30))


def silica(omega):
    """GDD per length of fused silica at 800 nm, 36.162 fs^2/mm by Malitson's formula, taken as constant."""
    return 36.162e-27


def gaussian_width(gdd):
    return np.sqrt(2) * 25e-15 * np.sqrt(1 + (4 * np.log(2) * gdd / 25e-15**2) ** 2)


def test_the_glass_that_tells_the_sign_of_a_gaussian():
    found = glass_that_tells_the_sign(PULSE, -500e-30, silica)
    assert found.clear
    assert found.ratio == pytest.approx(1.5, rel=2e-3)
    extra = found.thickness * 36.162e-27
    assert found.width_if_positive == pytest.approx(gaussian_width(500e-30 + extra), rel=1e-6)
    assert found.width_if_negative == pytest.approx(gaussian_width(extra - 500e-30), rel=1e-6)
    assert found.width_now == pytest.approx(gaussian_width(500e-30), rel=1e-6)
    thinner = glass_that_tells_the_sign(PULSE, 500e-30, silica, ratio=1.3)
    assert thinner.thickness < found.thickness
    assert launched_autocorrelation_fwhm(replace(PULSE, gdd=500e-30)) == pytest.approx(found.width_now)


def test_a_chirp_too_small_to_tell_is_admitted():
    found = glass_that_tells_the_sign(PULSE, 50e-30, silica)
    assert not found.clear
    assert 1 < found.ratio < 1.5
    with pytest.raises(InputError, match="no glass tells the sign"):
        glass_that_tells_the_sign(PULSE, 0.0, silica)
