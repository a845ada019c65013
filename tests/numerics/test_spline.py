"""Cubic pieces: exact for cubics, smooth at the knots."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.numerics.cauchy import piecewise_value
from pulseprop.numerics.spline import cubic_pieces, derivative_pieces, linear_pieces

X = np.array([0.0, 0.3, 1.0, 1.1, 2.5, 3.0])
BETWEEN = np.linspace(0, 3, 31)


def cubic(x):
    return 1 - 2 * x + x**2 - 0.3 * x**3


def cubic_slope(x):
    return -2 + 2 * x - 0.9 * x**2


@pytest.mark.parametrize("ends", [(None, None), (-2.0, None), (None, -4.1), (-2.0, -4.1)])
def test_a_cubic_is_its_own_spline_with_either_kind_of_end(ends):
    pieces = cubic_pieces(X, cubic(X), *ends)
    assert piecewise_value(X, pieces, BETWEEN) == pytest.approx(cubic(BETWEEN), abs=1e-13)
    assert piecewise_value(X, derivative_pieces(X, pieces), BETWEEN) == pytest.approx(
        cubic_slope(BETWEEN), abs=1e-12
    )


def test_the_second_derivative_is_continuous_at_the_knots():
    pieces = cubic_pieces(X, np.sin(3 * X), None, 0.0)
    second = derivative_pieces(X, derivative_pieces(X, pieces))
    assert np.sum(second[:-1], axis=1) == pytest.approx(second[1:, 0], abs=1e-12)


def test_straight_lines_pass_through_the_rows():
    assert piecewise_value(X, linear_pieces(X, X**2), X) == pytest.approx(X**2)
    assert piecewise_value(X, linear_pieces(X, X**2), np.array([0.65])) == pytest.approx((0.09 + 1) / 2)
