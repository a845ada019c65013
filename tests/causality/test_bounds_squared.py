"""Index and derivatives from chi, to first order with remainder: mpmath, and materials in closed form."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest

from pulseprop.causality.bounds_functionals import mass_derivatives, quantity_weights
from pulseprop.causality.bounds_squared import Squared, index_of_chi, squared_rows
from pulseprop.causality.passive_data import Knowledge, PassiveData

OMEGA = 0.7


def chi_derivatives(strengths, s):
    return mass_derivatives(OMEGA, np.asarray(s) - OMEGA**2) @ np.asarray(strengths)


def test_index_of_chi():
    strengths, s = (0.9, 0.3), (1.6, 0.05)

    def index(w):
        return mpmath.sqrt(1 + sum(a / (q - w**2) for a, q in zip(strengths, s, strict=True)))

    with mpmath.workdps(40):
        expected = [float(mpmath.diff(index, mpmath.mpf(OMEGA), order)) for order in range(4)]
    expected[0] -= 1
    assert index_of_chi(chi_derivatives(strengths, s)) == pytest.approx(expected, rel=1e-12)


def family(spread, count=200):
    """chi and its derivatives of materials whose strengths and places differ by up to `spread`."""
    random = np.random.default_rng(5)
    chi = []
    for _ in range(count):
        strengths = np.array([0.9, 0.3]) * (1 + random.uniform(-spread, spread, 2))
        chi.append(
            chi_derivatives(strengths, np.array([1.6, 0.05]) * (1 + random.uniform(-spread, spread, 2)))
        )
    return np.array(chi)


@pytest.mark.parametrize("spread", [1e-4, 1e-3, 1e-2])
def test_remainder_holds_all_materials(spread):
    """From the extremes of what is linear in chi to intervals of the quantities: tight, and none outside."""
    weights = quantity_weights(OMEGA)
    chi = family(spread)
    values = np.array([weights @ index_of_chi(one) for one in chi])
    squared = Squared(weights, values[0])
    found = chi @ squared.of_chi.T
    linear = squared.linear(np.stack((found.min(axis=0), found.max(axis=0)), axis=1))
    room = squared.settled(linear)
    assert room is not None
    assert np.all(np.abs(values - values[0]) < room)
    intervals = squared.intervals(linear, room)
    assert np.all((values > intervals[:, 0]) & (values < intervals[:, 1]))
    exact = np.max(values, axis=0) - np.min(values, axis=0)
    assert np.all(np.diff(intervals, axis=1)[:, 0] < (1 + 100 * spread) * exact)
    assert np.all(squared.shares(linear, room) < 100 * spread)


def test_no_room_settles_where_the_remainder_is_as_large_as_the_rest():
    weights = quantity_weights(OMEGA)
    squared = Squared(weights, weights @ index_of_chi(family(0.0, 1)[0]))
    assert squared.settled(np.array([[-2.0, 2.0]] * 4)) is None


def test_rows_of_chi():
    """n = 1.5 +- 0.1: chi between 0.96 and 1.56; twice the strength of k."""
    data = PassiveData(
        omega=np.array([1.0]),
        index=np.array([1.5]),
        index_error=np.array([0.1]),
        knowledge=Knowledge(strength=3.0),
    )
    rows = squared_rows(data)
    assert rows.index - 1 - rows.index_error == pytest.approx(0.96)
    assert rows.index - 1 + rows.index_error == pytest.approx(1.56)
    assert rows.knowledge.strength == 6.0


def test_an_index_that_may_be_negative_has_no_rows_of_chi():
    data = PassiveData(omega=np.array([1.0]), index=np.array([0.05]), index_error=np.array([0.1]))
    assert squared_rows(data) is None
