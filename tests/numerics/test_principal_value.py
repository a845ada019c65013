"""Closed forms against quadrature and arithmetic in 40 digits (mpmath)."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest

from pulseprop.numerics.principal_value import cubic_cauchy, inverse_power_cauchy, log_distance, polynomial

CUBIC = np.array([0.3, -1.2, 0.8, 0.5])


def cubic(t):
    return sum(mpmath.mpf(float(c)) * t**m for m, c in enumerate(CUBIC))


def quadrature(z, left, right, value):
    """int value(w)/(w - z) dw; inside the stretch the value at z is subtracted and its logarithm added."""
    if left < z.real < right:
        smooth = mpmath.quad(lambda w: (value(w) - value(z)) / (w - z), [left, z.real, right])
        logarithm = mpmath.log((right - z) / (left - z))
        return smooth + value(z) * (logarithm if z.imag else logarithm.real)
    return mpmath.quad(lambda w: value(w) / (w - z), [left, right])


@pytest.mark.parametrize("z", [1.1, 1.5, 2.9, 3.6, 1.7 + 0.2j, 2.5 + 1e-3j])
def test_a_cubic_stretch_agrees_with_quadrature(z):
    with mpmath.workdps(30):
        expected = quadrature(mpmath.mpmathify(z), 1, 3, lambda w: cubic((w - 1) / 2))
    found = cubic_cauchy(np.array([z]), np.array([1.0]), np.array([3.0]), CUBIC)[0]
    assert found == pytest.approx(complex(expected) if isinstance(z, complex) else float(expected), rel=1e-13)


def test_logarithms_of_neighbours_cancel_on_their_common_edge():
    # the density is 1 on [1, 3] in both cases: cut at 2 it must give the same at 2 as in one piece
    flat = np.array([1.0, 0.0, 0.0, 0.0])
    whole = cubic_cauchy(np.array([2.0]), np.array([1.0]), np.array([3.0]), flat)
    left = cubic_cauchy(np.array([2.0]), np.array([1.0]), np.array([2.0]), flat)
    right = cubic_cauchy(np.array([2.0]), np.array([2.0]), np.array([3.0]), flat)
    assert left + right == pytest.approx(whole, abs=1e-15)
    assert log_distance(np.array([0.0])) == 0


@pytest.mark.parametrize("power", [1, 2, 3, 4, 5])
@pytest.mark.parametrize("u", [0.0, 1e-6, 0.49, 0.51, -0.3, -0.7, -40.0, 0.999999, 1.5, 1e3])
def test_the_inverse_power_keeps_its_digits_from_zero_to_far_beyond(u, power):
    with mpmath.workdps(60):
        exact = mpmath.mpf(u)
        if u == 0:
            expected = mpmath.mpf(1) / power
        else:
            head = -mpmath.log(abs(1 - exact)) - sum(exact**m / m for m in range(1, power))
            expected = head / exact**power
    # at 1 + 1e-6 from the edge the logarithm itself moves by 1e-10 per rounding of 1 - u
    assert inverse_power_cauchy(np.array([u]), power)[0] == pytest.approx(
        float(expected), rel=2e-14, abs=1e-16
    )


def test_the_inverse_power_off_the_axis_agrees_with_quadrature():
    z = 1.3 + 0.4j
    with mpmath.workdps(30):
        expected = mpmath.quad(lambda v: v**-3 / (v - mpmath.mpc(z)), [1, 1.3, 3, mpmath.inf])
    assert inverse_power_cauchy(np.array([z]), 3)[0] == pytest.approx(complex(expected), rel=1e-14)


def test_polynomial_takes_one_set_of_coefficients_per_place():
    coefficients = np.array([[1.0, 2.0, 0.0, 0.0], [0.0, 0.0, 0.0, 1.0]])
    assert polynomial(np.array([3.0, 2.0]), coefficients).tolist() == [7.0, 8.0]
