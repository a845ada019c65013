"""Interpolation between samples, against functions known everywhere."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.numerics.interpolation import band_limited, mean_turn

POINTS = 512


def harmonics(position, filling, seed):
    """A periodic band-limited function with content up to `filling` of the Nyquist frequency."""
    random = np.random.default_rng(seed)
    top = int(filling * POINTS / 2)
    order = np.arange(-top, top + 1)
    weight = random.normal(size=order.size) + 1j * random.normal(size=order.size)
    weight /= np.abs(weight).sum()
    return np.exp(2j * np.pi * np.outer(position, order) / POINTS) @ weight


@settings(max_examples=25, deadline=None)
@given(st.lists(st.floats(-600, 1200), min_size=1, max_size=20), st.floats(0.05, 0.6), st.integers(0, 10**6))
def test_periodic_functions_are_recovered_to_rounding(positions, filling, seed):
    positions = np.array(positions)
    samples = harmonics(np.arange(POINTS), filling, seed)
    found = band_limited(samples, positions, filling=0.6)
    assert np.max(np.abs(found - harmonics(positions, filling, seed))) < 1e-12


def test_a_band_away_from_zero_needs_its_turn():
    turn = 2.0
    positions = np.linspace(60, 200, 333)
    width = 20.0
    pulse = lambda x: np.exp(-((x - 130) ** 2) / (2 * width**2) + 1j * turn * x)  # noqa: E731
    samples = pulse(np.arange(POINTS))
    assert mean_turn(samples) == pytest.approx(turn, abs=1e-12)
    assert np.max(np.abs(band_limited(samples, positions, turn=turn) - pulse(positions))) < 1e-13
    wrong = band_limited(samples, positions, turn=-1.1)
    assert np.max(np.abs(wrong - pulse(positions))) > 1e-3


def test_samples_are_returned_where_they_stand_and_zero_lies_outside():
    samples = np.arange(1.0, 41.0)
    inside = np.arange(40.0)
    assert band_limited(samples, inside).real == pytest.approx(samples, abs=1e-12)
    assert np.abs(band_limited(samples, np.array([-200.0, 300.0]), wrap=False)).max() == 0


def test_an_origin_saves_the_digits_of_far_positions():
    samples = np.cos(0.5 * (np.arange(1 << 20) - (1 << 19)))
    offset = np.array([0.123456789012345])
    near = band_limited(samples, offset, origin=1 << 19)[0].real
    assert near == pytest.approx(np.cos(0.5 * offset[0]), abs=1e-15)
