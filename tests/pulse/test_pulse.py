"""Pulses from half a cycle of a terahertz field to the ultraviolet."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.errors import InputError, NumericalLimit
from pulseprop.measures.delays import group_delay
from pulseprop.measures.widths import field_widths, fwhm, peak
from pulseprop.pulse.pulse import Pulse
from pulseprop.pulse.shapes import SHAPES, shape_named
from pulseprop.pulse.source import PulseSource, launch, launch_grid

W0 = 2 * np.pi * 375e12


def a_pulse(**changes):
    return replace(Pulse(centre=W0, duration=30e-15, energy=2e-6), **changes)


@settings(max_examples=40, deadline=None)
@given(
    st.sampled_from(["gaussian", "sech2", "supergaussian", "finite"]),
    st.floats(0.1e12, 1.5e15),
    st.floats(2.5, 300),
    st.floats(1e-18, 1e3),
)
def test_energy_and_duration_from_terahertz_to_ultraviolet(shape, frequency, cycles, energy):
    duration = cycles / frequency
    pulse = Pulse(centre=2 * np.pi * frequency, duration=duration, energy=energy, shape=shape_named(shape))
    grid, envelope = launch(pulse)
    assert grid.energy(pulse.amplitude(grid.omega)) == pytest.approx(energy, rel=1e-9)
    cut = pulse.energy_below_zero
    assert fwhm(envelope, grid.step) == pytest.approx(duration, rel=1e-8 + 30 * np.sqrt(cut))
    assert isinstance(pulse, PulseSource)


@pytest.mark.parametrize("shape", SHAPES)
def test_the_field_is_the_shape(shape):
    pulse = a_pulse(shape=shape_named(shape), carrier_phase=0.7)
    grid, envelope = launch(pulse)
    field = grid.carrier_resolved(envelope) * np.exp(1j * W0 * grid.time)
    expected = pulse.shape.field(grid.time / 30e-15) * np.exp(0.7j)
    expected *= np.sqrt(2e-6 / (30e-15 * pulse.shape.energy))
    # A lorentzian's 1/t^2 wings fold back from outside the window.
    tolerance = 2e-8 if shape == "lorentzian" else 1e-9
    assert np.max(np.abs(field - expected)) < tolerance * np.abs(expected).max()


def test_orders_of_phase_are_those_of_the_field():
    pulse = a_pulse(gdd=500e-30, tod=4000e-45, fod=3e4 * 1e-60)
    grid, envelope = launch(pulse)
    d = grid.omega - W0
    delay = group_delay(grid, envelope)
    seen = np.isfinite(delay)
    expected = 500e-30 * d + 2000e-45 * d**2 + 5e3 * 1e-60 * d**3
    assert np.max(np.abs((delay - expected)[seen])) < 1e-20


def test_positive_gdd_is_red_first():
    grid, envelope = launch(a_pulse(gdd=2000e-30))
    turning = np.angle(envelope[1:] * envelope[:-1].conj())
    strong = np.abs(envelope[1:]) > 0.1 * np.abs(envelope).max()
    frequency = -turning[strong] / (2 * np.pi * grid.step)
    assert np.all(np.diff(frequency) > 0)


def test_nothing_lives_at_or_below_zero_frequency():
    pulse = a_pulse(centre=2 * np.pi * 0.8e12, duration=1.25e-12)
    assert (pulse.amplitude(2 * np.pi * 1e12 * np.array([-1.0, -1e-9, 0.0])) == 0).all()
    assert np.abs(pulse.amplitude(np.array([pulse.centre])))[0] > 0


def test_a_single_cycle_is_closed_smoothly_and_says_so():
    pulse = a_pulse(centre=2 * np.pi * 0.8e12, duration=1.25e-12)
    assert 1e-6 < pulse.energy_below_zero < 1e-5
    assert any("cut at zero frequency" in note for note in pulse.notes)
    grid, envelope = launch(pulse)
    assert grid.energy(pulse.amplitude(grid.omega)) == pytest.approx(2e-6, rel=1e-12)
    # Smooth: the field dies out faster than any power that a corner would leave.
    power = np.abs(envelope) ** 2
    far = np.abs(grid.time) > 30e-12
    assert far.any()
    assert power[far].max() < 1e-12 * power.max()
    low, high = pulse.spectral_extent(1e-9)
    assert low == 0.0
    assert high < 2 * np.pi * 2.5e12


def test_the_share_below_zero_against_the_error_function():
    # Without the closing, erfc(w0 T / (2 sqrt ln2))/2 of a Gaussian's energy lies below zero; the closing
    # takes more.
    from scipy.special import erfc

    pulse = a_pulse(centre=2 * np.pi * 1e12, duration=0.9e-12)
    below = 0.5 * erfc(2 * np.pi * 0.9 / (2 * np.sqrt(np.log(2))))
    upper = 0.5 * erfc(0.75 * 2 * np.pi * 0.9 / (2 * np.sqrt(np.log(2))))
    assert below < pulse.energy_below_zero < upper


def test_less_than_a_cycle_is_refused():
    with pytest.raises(
        InputError, match=r"below or near zero frequency.*0\.001 of the energy.*longer duration"
    ):
        a_pulse(centre=2 * np.pi * 1e12, duration=0.4e-12)


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"duration": 0.0}, "duration of a pulse must be positive"),
        ({"duration": float("nan")}, "duration of a pulse must be positive"),
        ({"energy": -1.0}, "energy of a pulse must be positive"),
        ({"centre": float("inf")}, "centre of a pulse must be positive"),
        ({"beam_radius": 0.0}, "beam radius of a pulse must be positive"),
        ({"gdd": float("nan")}, "gdd of a pulse must be a finite number"),
    ],
)
def test_impossible_numbers_are_refused(changes, message):
    with pytest.raises(InputError, match=message):
        a_pulse(**changes)


@settings(max_examples=15, deadline=None)
@given(st.floats(-3e3, 3e3), st.floats(-2e4, 2e4))
def test_peak_power_is_that_of_the_launched_pulse(gdd, tod):
    pulse = a_pulse(gdd=gdd * 1e-30, tod=tod * 1e-45).with_peak_power(5e6)
    grid, envelope = launch(pulse, oversampling=4)
    assert peak(envelope).power == pytest.approx(5e6, rel=1e-8)
    assert field_widths(envelope, grid.step).energy == pytest.approx(pulse.energy, rel=1e-9)


@settings(max_examples=25, deadline=None)
@given(st.floats(-5e3, 5e3), st.floats(-5e4, 5e4), st.sampled_from([1e-3, 1e-6, 1e-9]))
def test_extents_leave_out_less_than_they_promise(gdd, tod, share):
    pulse = a_pulse(shape=shape_named("sech2"), gdd=gdd * 1e-30, tod=tod * 1e-45)
    grid, envelope = launch(pulse, share=1e-13, oversampling=40)
    power = np.abs(envelope) ** 2
    first, last = pulse.field_extent(share)
    outside = power[(grid.time < first) | (grid.time > last)].sum() / power.sum()
    assert outside <= share
    low, high = pulse.spectral_extent(share)
    omega = W0 + np.linspace(-12, 12, 100_001) / 30e-15
    spectrum = np.abs(pulse.amplitude(omega)) ** 2
    assert spectrum[(omega < low) | (omega > high)].sum() / spectrum.sum() <= 1.001 * share


def test_an_absurd_chirp_is_a_numerical_limit_not_a_crash():
    with pytest.raises(NumericalLimit, match="too long for its bandwidth"):
        launch_grid(a_pulse(gdd=1e-18))


def test_flat_phase_of_a_shape_with_sign_changes_is_noted():
    assert any("changes sign" in note for note in a_pulse(shape=shape_named("finite")).notes)
    assert a_pulse().notes == ()
