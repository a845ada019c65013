"""Cauchy transform of the cubic B-spline against quadrature in 30 digits."""

from __future__ import annotations

import mpmath as mp
import numpy as np
import pytest

from pulseprop.numerics.bspline_cauchy import (
    FAR,
    VARIANCE,
    cauchy,
    cauchy_slope,
    density,
    far_from,
    moments_of,
)

KNOTS = [-2, -1, 0, 1, 2]


def spline(v):
    size = abs(v)
    return mp.mpf(2) / 3 - size**2 + size**3 / 2 if size < 1 else (2 - size) ** 3 / 6


def quadrature(u: complex, power: int = 1) -> complex:
    with mp.workdps(30):
        return complex(mp.quad(lambda v: spline(v) / (v - mp.mpc(u)) ** power, KNOTS))


@pytest.mark.parametrize(
    "u", [0.3 + 0.5j, -1.5 + 0.1j, 2.1 + 0j, -4.9 + 0j, 5.1 + 0j, 7 + 2j, 39 + 0j, 41 + 3j, 2e4 + 1j]
)
def test_value_and_slope(u):
    # The closed form near cancels as |u|^4: 1e-16 * 5^4.
    assert complex(cauchy(np.array(u))) == pytest.approx(quadrature(u), rel=2e-12)
    assert complex(cauchy_slope(np.array(u))) == pytest.approx(quadrature(u, 2), rel=2e-11)


@pytest.mark.parametrize("u", [-1.7, -0.4, 0.0, 1.0, 1.3])
def test_on_the_axis_the_limit_from_above_is_taken(u):
    """Im c(u + i0) = pi B(u); Re c is a principal value: (B(v) - B(u))/(v - u) is regular, the rest a
    logarithm.
    """
    with mp.workdps(30):
        there = spline(mp.mpf(u))
        edges = sorted({*KNOTS, u})
        regular = mp.quad(lambda v: (spline(v) - there) / (v - u), edges)
        real = regular + there * mp.log(abs((2 - mp.mpf(u)) / (-2 - mp.mpf(u))))
    found = complex(cauchy(np.array(u)))
    assert found.real == pytest.approx(float(real), abs=1e-14)
    assert found.imag == pytest.approx(np.pi * float(there), rel=1e-15)


def test_outside_its_support_the_band_is_exactly_transparent():
    u = np.array([-1e5, -50.0, -7.0, -2.0, 2.0, 3.3, 44.0])
    assert np.all(cauchy(u).imag == 0)


def test_area_and_variance():
    v = np.linspace(-2, 2, 4001)
    step = v[1] - v[0]
    assert density(v).sum() * step == pytest.approx(1, rel=1e-12)
    assert (density(v) * v**2).sum() * step == pytest.approx(VARIANCE, rel=1e-5)


@pytest.mark.parametrize("distance", [FAR * 3.0 + 1, -500.0, 200.0 + 30j])
def test_the_far_sum_of_concentric_bands_is_the_sum_of_bands(distance):
    strength, knot = np.array([1.0, 0.2]), np.array([0.5, 3.0])
    value, slope = far_from(np.array(distance), moments_of(strength, knot), 2)
    assert complex(value) == pytest.approx(
        complex((cauchy(distance / knot) * strength / knot).sum()), rel=1e-14
    )
    assert complex(slope) == pytest.approx(
        complex((cauchy_slope(distance / knot) * strength / knot**2).sum()), rel=1e-14
    )
