"""Exponential and logarithm of series against closed forms."""

from __future__ import annotations

from math import factorial

import numpy as np
import pytest

from pulseprop.numerics.series import power, product, variable
from pulseprop.numerics.series_functions import exponential, logarithm

COUNT = 7
CENTRES = np.array([0.3, 1.7 + 0.4j, -2.0 + 0.1j])


def test_the_exponential_of_a_straight_line():
    rate = 0.7 - 0.2j
    expected = [rate**m * np.exp(rate * CENTRES) / factorial(m) for m in range(COUNT)]
    assert exponential(rate * variable(CENTRES, COUNT)) == pytest.approx(np.stack(expected), rel=1e-14)


def test_the_logarithm_of_the_variable():
    """ln z about c: ln c, then (-1)^(m-1) / (m c^m)."""
    found = logarithm(variable(CENTRES, COUNT), np.log(CENTRES) + 2j * np.pi)
    expected = [(-1) ** (m - 1) / (m * CENTRES**m) for m in range(1, COUNT)]
    assert found[0] == pytest.approx(np.log(CENTRES) + 2j * np.pi, rel=1e-15)
    assert found[1:] == pytest.approx(np.stack(expected), rel=1e-13)


def test_the_logarithm_of_a_product_is_the_sum_and_the_exponential_undoes_it():
    left, right = power(variable(CENTRES, COUNT), 2), exponential(0.4 * variable(CENTRES, COUNT))
    both = product(left, right)
    total = logarithm(left, np.log(left[0])) + logarithm(right, np.log(right[0]))
    assert logarithm(both, total[0]) == pytest.approx(total, rel=1e-12, abs=1e-12)
    assert exponential(logarithm(both, np.log(both[0]))) == pytest.approx(both, rel=1e-12, abs=1e-12)
