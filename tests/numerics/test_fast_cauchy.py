"""The fast sum against the same closed forms added one by one in 90 digits, on uneven rows."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest

from pulseprop.numerics.cauchy import piecewise_cauchy, piecewise_value

RNG = np.random.default_rng(20)
EDGES = 1e-3 + np.sort(RNG.random(201) ** 4)
PIECES = RNG.random((200, 4))
PLACES = np.concatenate((RNG.random(20) * 1.3, 1e-3 + RNG.random(10) ** 4, -RNG.random(5), [0.0, 50.0]))


def exact(z):
    """Sum of the closed forms: p(u) log + remainder for each piece."""
    with mpmath.workdps(90):
        total = mpmath.mpf(0)
        for left, right, piece in zip(EDGES[:-1], EDGES[1:], PIECES, strict=True):
            a, b, place = mpmath.mpf(float(left)), mpmath.mpf(float(right)), mpmath.mpmathify(z)
            u = (place - a) / (b - a)
            logarithm = mpmath.log((b - place) / (a - place))
            c = [mpmath.mpf(float(value)) for value in piece]
            value = c[0] + u * (c[1] + u * (c[2] + u * c[3]))
            remainder = c[1] + c[2] * (u + 0.5) + c[3] * (u * u + u / 2 + mpmath.mpf(1) / 3)
            total += value * (logarithm if isinstance(z, complex) else logarithm.real) + remainder
        return complex(total) if isinstance(z, complex) else float(total.real)


def weight(z):
    """int |density| / |w - z| dw outside the nearest hundredth: what a relative error refers to."""
    w = np.linspace(EDGES[0], EDGES[-1], 20001)
    away = np.abs(w - z) > 1e-2
    return np.sum((piecewise_value(EDGES, PIECES, w) / np.abs(w - z))[away]) * (w[1] - w[0])


def test_on_the_axis_the_error_stays_at_rounding():
    found = piecewise_cauchy(EDGES, PIECES, PLACES)
    error = [abs(f - exact(float(z))) / weight(z) for f, z in zip(found, PLACES, strict=True)]
    assert max(error) < 1e-12


@pytest.mark.parametrize("height", [1e-9, 1e-4, 0.05, 3.0])
def test_above_the_axis_the_error_stays_at_rounding(height):
    places = PLACES[::3] + 1j * height
    found = piecewise_cauchy(EDGES, PIECES, places)
    error = [abs(f - exact(complex(z))) / weight(z) for f, z in zip(found, places, strict=True)]
    assert max(error) < 1e-12


def test_shape_is_kept_and_one_piece_is_enough():
    places = np.array([[0.3, 4.0], [-1.0, 2.5]])
    found = piecewise_cauchy(np.array([1.0, 2.0]), np.array([[1.0, 0.0, 0.0, 0.0]]), places)
    assert found == pytest.approx(np.log(np.abs((2 - places) / (1 - places))), rel=1e-13)


def test_the_density_is_zero_outside_its_edges():
    edges, pieces = np.array([1.0, 2.0, 4.0]), np.array([[1.0, 1.0, 0.0, 0.0], [2.0, 0.0, 4.0, 0.0]])
    assert piecewise_value(edges, pieces, np.array([0.5, 1.5, 2.0, 3.0, 4.0, 4.1])).tolist() == [
        0,
        1.5,
        2,
        3,
        6,
        0,
    ]
