"""Faddeeva function and its Taylor coefficients, near and far, against 40 digits."""

from __future__ import annotations

import mpmath as mp
import numpy as np
import pytest

from pulseprop.numerics.faddeeva import faddeeva

# What the recurrence leaves of a library w that is good to 1e-14, order by order: 2 |z|^2 / m digits a step.
NEAR = (1e-13, 2e-12, 1e-10, 3e-9, 5e-8)
FAR = (1e-14, 1e-14, 1e-14, 2e-14, 1e-13)


def expected(z: complex) -> list[complex]:
    with mp.workdps(40):
        return mp.taylor(lambda v: mp.exp(-v * v) * mp.erfc(-1j * v), mp.mpc(z), 4)


@pytest.mark.parametrize(
    "z", [0j, 0.5 + 0.1j, 1 + 1j, 3 + 0.01j, -2 + 0.5j, 1 - 0.3j, 6 + 1e-3j, 6.9 + 0j, 6.5j]
)
def test_near(z):
    check(z, NEAR)


@pytest.mark.parametrize("z", [7.1 + 0j, 7.01j, 8 + 1j, -9 + 0.2j, 12 + 0j, -12.5 + 0.1j, 100 + 3j, 1e4 + 0j])
def test_far(z):
    check(z, FAR)


def check(z, tolerances):
    found = faddeeva(np.array([z]), 5)[:, 0]
    for m, (value, tolerance) in enumerate(zip(expected(z), tolerances, strict=True)):
        assert abs(found[m] - complex(value)) <= tolerance * abs(complex(value)), m


def test_shapes_are_kept():
    z = np.full((2, 3), 1 + 1j)
    assert faddeeva(z, 4).shape == (4, 2, 3)
    assert faddeeva(np.array(20.0), 2).shape == (2,)


def test_a_real_argument_absorbs_as_the_gaussian():
    x = np.linspace(-6.9, 6.9, 41)
    assert np.abs(faddeeva(x, 1)[0].real - np.exp(-(x**2))).max() < 1e-15
