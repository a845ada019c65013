"""Truncated Taylor series against those of closed forms."""

from __future__ import annotations

from math import comb, factorial

import numpy as np
import pytest

from pulseprop.numerics.series import compose, power, product, quotient, reciprocal, root, variable

COUNT = 7
CENTRES = np.array([0.3, 1.7 + 0.4j, -2.0])


def exponential(rate):
    return np.stack([rate**m * np.exp(rate * CENTRES) / factorial(m) for m in range(COUNT)])


def close(found, expected):
    return np.abs(found - expected).max() < 1e-13 * np.abs(expected).max()


def test_exponentials_multiply_and_divide_by_adding_rates():
    assert close(product(exponential(0.7), exponential(1.1)), exponential(1.8))
    assert close(quotient(exponential(0.7), exponential(1.1)), exponential(-0.4))
    assert close(reciprocal(exponential(0.7)), exponential(-0.7))


def test_the_root_of_an_exponential_has_half_its_rate_on_either_branch():
    leading = np.exp(0.35 * CENTRES)
    assert close(root(exponential(0.7), leading), exponential(0.35))
    assert close(root(exponential(0.7), -leading), -exponential(0.35))


@pytest.mark.parametrize("exponent", [0, 1, 2, 5, -1, -3])
def test_powers_follow_the_binomial_series(exponent):
    def binomial(m):
        return comb(exponent, m) if exponent >= 0 else (-1) ** m * comb(-exponent + m - 1, m)

    expected = np.stack(
        [binomial(m) * CENTRES ** (exponent - m) if binomial(m) else 0 * CENTRES for m in range(COUNT)]
    )
    assert close(power(variable(CENTRES, COUNT), exponent), expected)


def test_composition_of_exponential_and_square():
    """exp(w^2): coefficients by hand, c_m = e^(w0^2) sum_j (2 w0)^(m-2j) / (j! (m-2j)!)."""
    square = product(variable(CENTRES, COUNT), variable(CENTRES, COUNT))
    outer = np.stack([np.exp(square[0]) / factorial(m) for m in range(COUNT)])
    expected = np.stack(
        [
            np.exp(CENTRES**2)
            * sum(
                (2 * CENTRES) ** (m - 2 * j) / (factorial(j) * factorial(m - 2 * j))
                for j in range(m // 2 + 1)
            )
            for m in range(COUNT)
        ]
    )
    assert close(compose(outer, square), expected)


def test_real_series_stay_real_and_a_single_term_is_a_plain_product():
    assert np.isrealobj(product(variable(np.array(2.0), 3), variable(np.array(3.0), 3)))
    assert product(np.array([[2.0]]), np.array([[3.0]]))[0, 0] == 6.0
    assert variable(np.array(2), 1).dtype == float
