"""B-splines: partition of unity, support, transforms against those of one density at a time."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.numerics.bspline_cauchy import cauchy, density
from pulseprop.numerics.spline_basis import basis_pieces, basis_transforms, basis_values

RNG = np.random.default_rng(3)
KNOTS = 0.2 + np.cumsum(RNG.random(25) ** 3 + 0.01)
PIECES = basis_pieces(KNOTS)


def test_the_splines_are_a_partition_of_unity_between_the_outer_knots():
    inner = np.linspace(KNOTS[3], KNOTS[-4], 50)
    assert basis_values(KNOTS, PIECES, inner).sum(axis=1) == pytest.approx(np.ones(50), abs=1e-13)


def test_the_splines_are_non_negative_and_span_four_pieces():
    omega = np.linspace(KNOTS[0], KNOTS[-1], 2001)
    values = basis_values(KNOTS, PIECES, omega)
    assert values.min() > -1e-14
    for j in range(values.shape[1]):
        outside = (omega < KNOTS[j]) | (omega > KNOTS[j + 4])
        assert np.abs(values[outside, j]).max() < 1e-13
        assert values[~outside, j].max() > 0.2


def test_even_knots_give_the_published_spline_and_its_transform():
    """I. J. Schoenberg's cardinal cubic spline: 2/3 and 1/6 on its knots; its transform in closed form."""
    knots = np.arange(10.0, 17.0)
    pieces = basis_pieces(knots)
    omega = np.linspace(10, 16, 61)
    assert basis_values(knots, pieces, omega)[:, 1] == pytest.approx(density(omega - 13), abs=1e-14)
    places = np.array([3.0, 10.7, 13.0, 14.9, 40.0])
    expected = (cauchy(places - 13) + cauchy(-places - 13)).real / np.pi
    assert basis_transforms(knots, pieces, places)[:, 1] == pytest.approx(expected, abs=1e-14)
