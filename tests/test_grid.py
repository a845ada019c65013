"""The grid: sign, scale and offset of its transforms, against transforms known in closed form."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.grid import Grid

QUIET = settings(max_examples=15, deadline=None, derandomize=True)
SIZES = st.sampled_from([8, 64, 250, 1000])
SEEDS = st.integers(0, 1000)
STARTS = st.floats(-3e-12, 3e-12)


def a_grid(points: int = 1024, start: float = -512e-15) -> Grid:
    return Grid(points=points, step=1e-15, start=start, carrier=375e12)


def noise(points: int, seed: int) -> np.ndarray:
    generator = np.random.default_rng(seed)
    return generator.normal(size=points) + 1j * generator.normal(size=points)


def test_a_delayed_gaussian_has_the_transform_of_the_textbook():
    """int exp(-(t-t0)^2/2s^2) exp(i d t) dt = s sqrt(2 pi) exp(-d^2 s^2/2) exp(+i d t0): the sign of exp(-i
    omega t).
    """
    grid, delay, width = a_grid(), 37.3e-15, 20e-15
    spectrum = grid.to_spectrum(np.exp(-((grid.time - delay) ** 2) / (2 * width**2)).astype(complex))
    detuning = grid.omega - 2 * np.pi * grid.carrier
    expected = width * np.sqrt(2 * np.pi) * np.exp(-((detuning * width) ** 2) / 2 + 1j * detuning * delay)
    assert np.abs(spectrum - expected).max() < 1e-13 * np.abs(expected).max()


def test_a_wave_of_higher_frequency_stands_at_the_higher_place():
    grid = a_grid()
    above = 10 / grid.span
    spectrum = grid.to_spectrum(np.exp(-2j * np.pi * above * grid.time))
    assert np.abs(spectrum).argmax() == grid.points // 2 + 10
    assert grid.frequency[grid.points // 2 + 10] == pytest.approx(grid.carrier + above, rel=1e-15)


def test_the_carrier_resolved_field_turns_with_exp_of_minus_i_omega_t():
    grid = a_grid()
    turned = grid.carrier_resolved(np.ones(grid.points, complex))
    assert np.abs(turned - np.exp(-2j * np.pi * 375e12 * grid.time)).max() < 1e-12


@QUIET
@given(SIZES, SEEDS, STARTS)
def test_there_and_back(points, seed, start):
    grid, field = a_grid(points, start), noise(points, seed)
    assert np.abs(grid.to_field(grid.to_spectrum(field)) - field).max() < 1e-12


@QUIET
@given(SIZES, SEEDS, STARTS)
def test_parseval(points, seed, start):
    grid, field = a_grid(points, start), noise(points, seed)
    assert grid.energy(grid.to_spectrum(field)) == pytest.approx(
        grid.step * np.sum(np.abs(field) ** 2), rel=1e-13
    )


@QUIET
@given(SEEDS, st.integers(-40, 40))
def test_a_moved_window_shows_the_same_field_elsewhere(seed, places):
    grid, field = a_grid(), noise(1024, seed)
    moved = grid.moved(grid.start + places * grid.step)
    seen = moved.to_field(grid.to_spectrum(field))
    assert np.abs(seen - np.roll(field, -places)).max() < 1e-11


def test_positive_leaves_out_zero_and_what_is_below():
    grid = Grid(points=64, step=1e-15, start=0.0, carrier=0.0)
    assert grid.frequency[grid.positive][0] == pytest.approx(1 / grid.span)
    assert grid.frequency[grid.positive].size == 31
