"""Derivatives in closed form, against mpmath to thirty digits and against a material known in closed form."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest

from pulseprop.causality.bounds_functionals import mass_derivatives, quantity_weights, spline_derivatives
from pulseprop.numerics.spline_basis import basis_pieces

FIFTH = np.arange(-2, 3)


def derivatives_of(function, omega, count=4):
    with mpmath.workdps(40):
        return [float(mpmath.diff(function, mpmath.mpf(omega), order)) for order in range(count)]


@pytest.mark.parametrize("s", [0.0, 0.3, 2.0, 900.0])
def test_a_point_mass(s):
    found = mass_derivatives(0.8, np.array([s - 0.8**2]))[:, 0]
    assert found == pytest.approx(derivatives_of(lambda w: 1 / (s - w**2), 0.8), rel=1e-12)


def spline_transform(centre, step):
    """(1/pi) PV of the odd cubic B-spline of height 2/3, from its fourth differences of y^3 log|y|."""

    def one(u):
        terms = ((m - u, w) for m, w in zip(FIFTH, (1, -4, 6, -4, 1), strict=True))
        return sum(w * y**3 * mpmath.log(abs(y)) for y, w in terms) / 6

    def both(omega):
        return (one((omega - centre) / step) + one((-omega - centre) / step)) / mpmath.pi

    return both


@pytest.mark.parametrize("omega", [1.03, 1.11, 1.24, 1.4, 2.0])
def test_a_spline_off_its_knots(omega):
    """Inside the spline (from 0.9 to 1.3), beside it and far from it."""
    centre, step = 1.1, 0.1
    knots = centre + step * FIFTH
    found = spline_derivatives(knots, basis_pieces(knots), omega)[:, 0]
    expected = derivatives_of(spline_transform(centre, step), omega)
    assert found == pytest.approx(expected, rel=1e-9, abs=1e-9)


def test_curvature_is_continuous_across_a_knot():
    """k is C2, so N'' exists at the knots too; closer and closer values run towards it as h log h."""
    knots = np.linspace(0.8, 1.4, 7)
    pieces = basis_pieces(knots)
    at = spline_derivatives(knots, pieces, knots[3])[:3]
    for h in (1e-6, 1e-9):
        for side in (-h, h):
            near = spline_derivatives(knots, pieces, knots[3] + side)[:3]
            assert np.max(np.abs(near - at)) < 3e3 * h * abs(np.log(h))


def test_quantities_of_a_lorentz_line():
    """N = 1/(1 - omega^2): c GVD = 2 N' + omega N'' and its derivative, by mpmath."""

    def line(w):
        return 1 / (1 - w**2)

    def group(w):
        return mpmath.diff(lambda v: v * line(v), w)

    omega = 0.6
    found = quantity_weights(omega) @ mass_derivatives(omega, np.array([1.0 - omega**2]))[:, 0]
    with mpmath.workdps(40):
        expected = [float(line(omega)), *(float(mpmath.diff(group, omega, m)) for m in range(3))]
    assert found == pytest.approx(expected, rel=1e-10)
