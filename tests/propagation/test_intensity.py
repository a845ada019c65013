"""Peak power, B-integral and the shortest window that holds a pulse."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.grid import Grid
from pulseprop.propagation.intensity import b_integral, coarser, on_axis, peak_power

OMEGA = 2 * np.pi * 299792458.0 / 800e-9


def gaussian(grid: Grid, fwhm: float, power: float) -> np.ndarray:
    """Spectrum of a Gaussian pulse of that FWHM (s) and peak power (W) at t = 0."""
    return grid.to_spectrum(np.sqrt(power) * np.exp(-2 * np.log(2) * (grid.time / fwhm) ** 2) + 0j)


@pytest.fixture
def grid() -> Grid:
    return Grid(points=4096, step=4e-15, start=-2048.3 * 4e-15, carrier=OMEGA / (2 * np.pi))


def test_peak_of_a_gaussian_between_samples(grid):
    """The logarithm of a Gaussian is a parabola: exact but for rounding."""
    assert peak_power(grid, gaussian(grid, 30e-15, 5e6)) == pytest.approx(5e6, rel=1e-9)


def test_b_integral_of_the_definition(grid):
    """B = (2 pi/L) n2 I d: 10 mm, 2.7e-20 m^2/W, 1e15 W/m^2, 800 nm give 2.12057504117 rad (derived)."""
    radius = 1e-3
    power = 1e15 * np.pi * radius**2 / 2
    assert on_axis(power, radius) == pytest.approx(1e15)
    spectrum = gaussian(grid, 100e-15, power)
    found = b_integral(grid, spectrum, np.zeros(grid.points, complex), OMEGA, 2.7e-20, radius, 10e-3)
    assert found == pytest.approx(2.12057504117, rel=1e-9)


def test_b_integral_of_a_pulse_that_broadens(grid):
    """Peak power P0/sqrt(1 + (z/L)^2) of a Gaussian under GDD alone: the mean is asinh(d/L) L/d."""
    fwhm, gdd, radius = 20e-15, 2000e-30, 1e-3
    ratio = 4 * np.log(2) * gdd / fwhm**2
    spectrum = gaussian(grid, fwhm, 1e9)
    exponent = 0.5j * gdd * (2 * np.pi * (grid.frequency - grid.carrier)) ** 2
    found = b_integral(grid, spectrum, exponent, OMEGA, 3e-20, radius, 5e-3)
    whole = OMEGA / 299792458.0 * 3e-20 * on_axis(1e9, radius) * 5e-3
    assert found == pytest.approx(whole * np.arcsinh(ratio) / ratio, rel=1e-3)


def compressed(duration: float, gdd: float, at: float) -> tuple[float | None, float]:
    """B as found of a Gaussian that GDD compresses to `duration` inside an element, and in closed form.

    The peak power is P0/sqrt(1 + (r (share - at))^2), r = 4 ln2 GDD/duration^2: the mean is
    (asinh(r at) + asinh(r (1 - at)))/r.
    """
    wide = Grid(points=1 << 15, step=4e-15, start=-(1 << 14) * 4e-15, carrier=OMEGA / (2 * np.pi))
    turn = 0.5j * gdd * (2 * np.pi * (wide.frequency - wide.carrier)) ** 2
    spectrum = gaussian(wide, duration, 1e8) * np.exp(-at * turn)
    ratio = 4 * np.log(2) * gdd / duration**2
    mean = (np.arcsinh(ratio * at) + np.arcsinh(ratio * (1 - at))) / ratio
    whole = OMEGA / 299792458.0 * 3e-20 * on_axis(1e8, 1e-3) * 5e-3
    return b_integral(wide, spectrum, turn, OMEGA, 3e-20, 1e-3, 5e-3), whole * mean


def test_b_integral_of_a_pulse_that_is_short_inside_only():
    found, expected = compressed(20e-15, 1e-26, 0.37)
    assert found == pytest.approx(expected, rel=1e-3)


def test_a_b_integral_that_does_not_settle_is_none():
    """Short in a thousandth of the length: no figure rather than one that is 20 % off."""
    assert compressed(20e-15, 2e-25, 0.37)[0] is None


def test_a_coarser_window_keeps_the_peak(grid):
    spectrum = gaussian(grid, 60e-15, 2e6)
    coarse, every = coarser(grid, 300e-15)
    assert every > 1
    assert coarse.span >= 2 * 300e-15
    assert np.allclose(coarse.frequency, grid.frequency[::every])
    assert peak_power(coarse, spectrum[::every]) == pytest.approx(2e6, rel=1e-9)
