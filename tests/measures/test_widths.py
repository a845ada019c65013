"""Widths of fields whose widths are known otherwise."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from pulseprop.errors import InputError, NumericalLimit
from pulseprop.measures.profile import half_maximum
from pulseprop.measures.widths import (
    energy_share_after,
    energy_share_before,
    field_widths,
    fwhm,
    peak,
    rms_width,
)

GAUSS = np.sqrt(2 * np.log(2))  # FWHM of exp(-t^2 / (2 s^2))^2 is 2 s sqrt(ln2)


def gaussian(time, centre, width, turn=0.0):
    """Intensity FWHM `width`."""
    return np.exp(-2 * np.log(2) * ((time - centre) / width) ** 2 + 1j * turn * time)


@settings(max_examples=40, deadline=None)
@given(
    st.floats(0, 1024),
    st.floats(6.5, 60),
    st.floats(-3, 3),
)
def test_fwhm_between_samples_and_across_the_edge_of_the_window(centre, width, turn):
    points = 1024
    time = np.arange(points)
    field = sum(gaussian(time + shift, centre, width) for shift in (-points, 0, points)) * np.exp(
        1j * turn * time
    )
    # A turn that does not close at the window's edge would be a jump there.
    turn_closed = 2 * np.pi * round(turn * points / (2 * np.pi)) / points
    field = field * np.exp(1j * (turn_closed - turn) * time)
    assert fwhm(field, 1.0) == pytest.approx(width, rel=1e-10)
    found = peak(field)
    assert found.power == pytest.approx(1.0, rel=1e-10)
    assert min(abs(found.position - centre), points - abs(found.position - centre)) < 1e-5 * width


@settings(max_examples=30, deadline=None)
@given(st.floats(0.3, 1.0), st.floats(2.5, 8.0))
def test_outermost_points_of_two_pulses(height, apart):
    width = 12.0
    time = np.arange(2048) - 1024.0
    assume(abs(height**2 - 0.5) > 1e-3)

    def field(at):
        return gaussian(at, -0.5 * apart * width, width) + height * gaussian(at, 0.5 * apart * width, width)

    fine = np.linspace(-120, 120, 240_001)
    power = field(fine).real ** 2 + field(fine).imag ** 2
    above = np.flatnonzero(power >= power.max() / 2)
    expected = fine[above[-1]] - fine[above[0]]
    found = half_maximum(field(time).astype(complex))
    assert found.width == pytest.approx(expected, abs=2.5e-3)  # two cells of the reference
    assert found.split == bool((np.diff(above) > 1).any())


@settings(max_examples=60, deadline=None)
@given(st.integers(0, 10**9), st.integers(3, 64), st.floats(15, 50))
def test_random_fields_against_samples_128_times_finer(seed, half_band, length):
    points, finer = 256, 128
    random = np.random.default_rng(seed)
    order = np.arange(-half_band, half_band)
    weight = random.normal(size=order.size) + 1j * random.normal(size=order.size)
    spectrum = np.zeros(points, complex)
    spectrum[order] = weight * np.exp(-2 * (order / half_band) ** 2)
    gate = np.exp(-(((np.arange(points) - 128) / length) ** 2))
    field = np.roll(np.fft.ifft(spectrum) * gate, int(random.integers(points)))
    padded = np.zeros(points * finer, complex)
    padded[: points // 2], padded[-points // 2 :] = np.split(np.fft.fft(field), 2)
    power = np.abs(np.fft.ifft(padded) * finer) ** 2
    above = np.flatnonzero(power >= power.max() / 2)
    gaps = np.diff(above, append=above[0] + power.size)
    turns = power[(power >= np.roll(power, 1)) == (power >= np.roll(power, -1))]
    assume(np.min(np.abs(turns / power.max() - 0.5)) > 1e-4)
    found = half_maximum(field * np.exp(2j * np.pi * random.integers(points) * np.arange(points) / points))
    assert found.width == pytest.approx((power.size - gaps.max()) / finer, abs=0.03)
    assert found.split == bool((gaps > 1).sum() > 1)
    assert found.peak.power == pytest.approx(power.max(), rel=1e-4)


def test_a_side_peak_above_half_only_between_samples_is_not_missed():
    # Oversampled twice, the satellite's samples stay under half of the peak and its crest lies between them.
    time = np.arange(512) - 256.0
    width = 2.6

    def field(at):
        return gaussian(at, 0.0, width) + 0.725 * gaussian(at, 40.5, width)

    assert (np.abs(field(40.0)) ** 2) < 0.5 < (np.abs(field(40.5)) ** 2)
    found = half_maximum(field(time))
    assert found.split
    assert found.width > 41


@settings(max_examples=30, deadline=None)
@given(st.floats(5, 40), st.floats(-3, 3), st.floats(1e-3, 1e3))
def test_widths_scale_with_the_step_and_not_with_strength(width, chirp, scale):
    time = np.arange(2048) - 1024.0
    field = gaussian(time, 0.3, width) * np.exp(1j * chirp * (time / width) ** 2 / 4)
    one, other = field_widths(field, 1.0), field_widths(scale * field, 2e-15)
    assert other.fwhm == pytest.approx(2e-15 * one.fwhm, rel=1e-9)
    assert other.equivalent == pytest.approx(2e-15 * one.equivalent, rel=1e-9)
    assert other.peak_power == pytest.approx(scale**2 * one.peak_power, rel=1e-9)


def test_a_sample_at_exactly_half_height_is_no_dip():
    time = np.arange(256) - 128.0
    found = half_maximum(gaussian(time, 0.0, 12.0))
    assert not found.split
    assert found.width == pytest.approx(12.0, rel=1e-12)


def test_rms_and_equivalent_width_of_a_gaussian():
    time = np.arange(1024) - 512.0
    found = field_widths(gaussian(time, 2.2, 30.0), 1.0, -512.0)
    assert found.rms == pytest.approx(30 / (2 * GAUSS), rel=1e-12)
    assert rms_width(gaussian(time, 2.2, 30.0), 1.0) == found.rms
    assert found.equivalent == pytest.approx(30 * np.sqrt(np.pi / (4 * np.log(2))), rel=1e-12)
    assert found.peak_time == pytest.approx(2.2, abs=1e-6)
    assert found.right - found.left == pytest.approx(found.fwhm, rel=1e-12)
    assert not found.split


def test_energy_after_the_pulse_of_a_ringing_field():
    # exp(-t/T) after a short pulse: the share later than three FWHM is known from the sum of exponentials.
    time = np.arange(1 << 15) - 2000.0
    main = gaussian(time, 0.0, 20.0)
    tail = 0.05 * np.exp(-time / 800) * (0.5 * (1 + np.tanh((time - 150) / 15)))
    tail = np.where(time > 0, tail, 0)
    field = (main + tail).astype(complex)
    found = field_widths(field, 1.0, -2000.0)
    later = np.abs(field) ** 2
    expected = later[time > 3 * found.fwhm].sum() / later.sum()
    assert found.energy_after == pytest.approx(expected, rel=1e-3)
    # 0.05^2 exp(-t/400) from t = 150 on, over the energy of both.
    closed = 0.05**2 * 400 * np.exp(-150 / 400) / later.sum()
    assert found.energy_after == pytest.approx(closed, rel=0.03)
    assert found.energy_before < 1e-9


@given(st.floats(-0.5, 9.5))
def test_shares_before_and_after_add_up(position):
    power = np.array([0, 1, 4, 2, 0.5, 3, 1, 0, 0, 2.0])
    total = energy_share_after(power, position) + energy_share_before(power, position)
    assert total == pytest.approx(1.0, abs=1e-12)


def test_an_empty_field_is_refused():
    with pytest.raises(InputError, match="no energy"):
        fwhm(np.zeros(64, complex), 1.0)
    with pytest.raises(InputError, match="no energy"):
        rms_width(np.zeros(64, complex), 1.0)


def test_a_field_that_fills_its_window_has_no_width():
    with pytest.raises(NumericalLimit, match="never falls to half"):
        fwhm(np.ones(64, complex), 1.0)


def test_the_cost_between_samples_does_not_grow_with_a_flat_top():
    # A long flat pulse: its edges lie 2^18 samples apart.
    points = 1 << 19
    time = (np.arange(points) - points // 2) / (points / 4)
    field = np.exp(-0.5 * np.log(2) * (2 * time) ** 40).astype(complex)
    assert fwhm(field, 4 / points) == pytest.approx(1.0, rel=1e-9)
