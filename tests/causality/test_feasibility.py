"""The uncertainty factor: closed forms, published and invented materials, known mistakes, random truths."""

from __future__ import annotations

from pathlib import Path

import mpmath
import numpy as np
import pytest
from scipy.optimize import brentq

from pulseprop.causality.conflict import suspects, without_rows
from pulseprop.causality.feasibility import feasibility
from pulseprop.causality.passive_data import Knowledge, PassiveData
from pulseprop.causality.proof_check import check_conflict
from tests.causality.passive_examples import (
    MICROMETRES,
    absorber,
    omega_of,
    random_data,
    rows,
    silica,
)

OMEGA = omega_of(MICROMETRES)
WATER = Path(__file__).parents[2] / "shared" / "water_hale_querry_1973.csv"


def checked(data, found):
    """The conflict by hand, by the checker on the whole axis, and by 40 digits on many places."""
    conflict = found.conflict
    assert sum(abs(row.weight) for row in conflict.rows) == pytest.approx(1)
    missed = sum(row.weight * row.value for row in conflict.rows) - conflict.most
    size = sum(abs(row.weight) * row.error for row in conflict.rows)
    assert missed / size == pytest.approx(found.factor, rel=2e-3)
    anew = check_conflict(data, conflict)
    assert anew.holds
    assert anew.factor == pytest.approx(missed / size, rel=1e-9)
    assert worst_of_many(data, conflict) <= 0


def worst_of_many(data, conflict):
    """Largest sum over w f of a mass at some place outside the rows, with 40 digits."""
    first, last = data.omega[0], data.omega[-1]
    with mpmath.workdps(40):
        weights = [mpmath.mpf(row.weight) for row in conflict.rows if row.quantity == "n"]
        places = [mpmath.mpf(data.omega[row.row]) ** 2 for row in conflict.rows if row.quantity == "n"]
        distance = [mpmath.mpf(float(x)) for x in np.geomspace(1e-7, 1e4, 150)]
        above = [mpmath.mpf(last) ** 2 * (1 + x) for x in distance]
        below = [mpmath.mpf(first) ** 2 * (1 - x) for x in distance if x <= 1]
        return max(
            sum(
                w * abs(s - places[-1 if s > places[-1] else 0]) / (s - p)
                for w, p in zip(weights, places, strict=True)
            )
            for s in above + below
        )


@pytest.mark.parametrize("index", [(1.5, 1.4), (0.8, 0.7)])
def test_two_rows_that_fall_with_frequency(index):
    """By hand: masses above and below the rows span f0 <= f1, or (w0/w1)^2 f0 <= f1 where f0 is negative; the
    factor is the excess over the uncertainties, weighted alike."""
    omega, error = np.array([2e15, 4e15]), np.array([0.01, 0.03])
    found = feasibility(PassiveData(omega=omega, index=np.array(index), index_error=error))
    ratio = 1.0 if index[0] > 1 else 0.25
    expected = (ratio * (index[0] - 1) - (index[1] - 1)) / (ratio * error[0] + error[1])
    assert found.factor == pytest.approx(expected, rel=1e-3)
    assert found.certified <= expected <= found.factor
    checked(PassiveData(omega=omega, index=np.array(index), index_error=error), found)


def test_three_rows_with_all_absorption_above():
    """By hand: the reciprocal of m/(p - s) is linear in s, and of all materials this one bends upwards least:
    at equal steps of s the middle row is at most the harmonic mean of the outer two."""
    omega, error = 1e15 * np.sqrt(np.array([1.0, 2.0, 3.0])), np.array([1e-3, 2e-3, 4e-3])

    def missed(t):
        outer = 0.50 + error[0] * t, 0.60 + error[2] * t
        return 2 / (1 / outer[0] + 1 / outer[1]) - (0.56 - error[1] * t)

    data = PassiveData(
        omega=omega,
        index=np.array([1.50, 1.56, 1.60]),
        index_error=error,
        knowledge=Knowledge(transparent=(0.0, omega[-1])),
    )
    found = feasibility(data)
    assert found.factor == pytest.approx(brentq(missed, 0, 10), rel=1e-3)
    assert {row.row: np.sign(row.weight) for row in found.conflict.rows} == {0: -1, 1: 1, 2: -1}


def test_a_limit_on_the_strength_bounds_how_flat_an_index_can_be():
    """By hand: of mass pi m at p a row has m/(p - s). Two equal rows of n need all of it at one place (what
    one row has is convex in what the other has), where both uncertainties are used up."""
    omega, index = np.array([2e15, 4e15]), np.array([1.5, 1.5])
    m = 1e31 / np.pi

    def missed(t):
        place = omega[1] ** 2 + m / (0.5 + 0.01 * t)
        return m / (place - omega[0] ** 2) - (0.5 - 0.01 * t)

    limited = PassiveData(
        omega=omega, index=index, index_error=np.full(2, 0.01), knowledge=Knowledge(strength=1e31)
    )
    found = feasibility(limited)
    assert found.factor == pytest.approx(brentq(missed, 0, 50), rel=1e-3)
    assert found.conflict.most > 0
    assert check_conflict(limited, found.conflict).holds
    free = feasibility(PassiveData(omega=omega, index=index, index_error=np.full(2, 0.01)))
    assert free.factor == pytest.approx(0, abs=1e-4)


@pytest.mark.parametrize("decimals", [3, 5, 7])
def test_rounded_silica_is_possible(decimals):
    """Malitson's formula over 61 rows, rounded: at most 0.98 (prototype)."""
    found = feasibility(rows(OMEGA, np.round(silica(), decimals), 0.5 * 10.0**-decimals))
    assert 0.5 < found.certified <= found.factor <= 0.98
    assert found.gap <= 1e-3
    assert found.conflict is None
    missed = np.abs(found.material.index(OMEGA) - np.round(silica(), decimals))
    assert np.max(missed) <= 1.000001 * found.factor * 0.5 * 10.0**-decimals


def test_a_table_in_reverse_order():
    """267 at 5e-5 (prototype); the two end rows alone prove it."""
    data = rows(OMEGA, np.round(silica(), 5)[::-1], 5e-5)
    found = feasibility(data)
    assert found.factor == pytest.approx(267, rel=2e-3)
    assert [(row.row, row.weight) for row in found.conflict.rows] == [
        (0, pytest.approx(0.5, rel=1e-2)),
        (60, pytest.approx(-0.5, rel=1e-2)),
    ]
    assert found.unresolved is None
    assert suspects(data, found.conflict) is None


def test_a_displaced_row_is_named():
    """1e-3 on 5e-5: 9.5 to 10 (prototype, another table), a second difference of 1 : -2 : 1 about it."""
    index = silica()
    index[30] += 1e-3
    data = rows(OMEGA, index, 5e-5)
    found = feasibility(data)
    assert found.factor == pytest.approx(9.98, abs=0.05)
    checked(data, found)
    weights = {row.row: row.weight for row in found.conflict.rows}
    assert weights[30] == pytest.approx(0.5, abs=0.01)
    assert weights[29] == pytest.approx(-0.25, abs=0.01)
    assert found.unresolved is None or found.unresolved.windows > 1
    blamed = suspects(data, found.conflict)
    assert blamed.rows == (("n", 30),)
    assert blamed.factor < 0.1
    assert len(without_rows(data, blamed.rows).omega) == 60


def test_a_three_term_cauchy_fit_of_silica_held_at_5e_5():
    """25.6 (prototype): no passive matter has a printed polynomial."""
    terms = np.stack([MICROMETRES**0, MICROMETRES**-2, MICROMETRES**-4]).T
    data = rows(OMEGA, terms @ np.linalg.lstsq(terms, silica(), rcond=None)[0], 5e-5)
    found = feasibility(data)
    assert found.factor == pytest.approx(25.6, rel=0.01)
    checked(data, found)


@pytest.fixture(scope="module")
def sampled():
    omega = np.linspace(2e15, 4e15, 80)
    return omega, 1 + absorber(omega).real, absorber(omega).imag


def test_absorbing_truth_and_the_wrong_logarithm_and_a_flat_index(sampled):
    """k too large by ln 10: above 3; absorption with a flat index: above 3 (prototypes 3 to 21, 3 to 17)."""
    omega, index, k = sampled
    true = feasibility(rows(omega, np.round(index, 5), 5e-6, np.round(k, 5), 5e-6))
    assert true.factor <= 1
    assert true.coarse == ()
    assert np.max(np.abs(true.material.k(omega) - k)) < 2e-5
    for wrong in (
        rows(omega, np.round(index, 5), 1e-4, np.log(10) * k, 1e-4),
        rows(omega, np.full(80, 1.2), 1e-4, k, 1e-4),
    ):
        found = feasibility(wrong)
        assert found.factor > 3
        assert found.unresolved is None
        assert check_conflict(wrong, found.conflict).holds


def test_rows_at_a_ceiling_are_lower_limits(sampled):
    """k cut off at 0.004 contradicts the index, and as lower limits agrees with it."""
    omega, index, k = sampled
    cut = np.minimum(k, 0.004)
    data = rows(omega, np.round(index, 5), 5e-6, cut, 5e-6)
    assert feasibility(data, thorough=False).certified > 3
    limits = PassiveData(
        omega=omega,
        index=data.index,
        index_error=data.index_error,
        k_omega=omega,
        k=cut,
        k_error=data.k_error,
        least=k > 0.004,
    )
    assert feasibility(limits, thorough=False).factor <= 1


def test_water_of_hale_and_querry_at_one_per_cent():
    """G. M. Hale and M. R. Querry, Appl. Opt. 12, 555 (1973), 1 % of both: 0.38 with hats (prototype)."""
    micrometres, index, k = np.loadtxt(WATER, delimiter=",", skiprows=6).T[:, ::-1]
    omega = omega_of(micrometres)
    data = PassiveData(
        omega=omega, index=index, index_error=0.01 * index, k_omega=omega, k=k, k_error=0.01 * k
    )
    assert feasibility(data).factor == pytest.approx(0.38, abs=0.04)


@pytest.mark.parametrize("seed", range(60))
def test_random_passive_materials_are_never_refuted(seed):
    """Transparent (even seeds) and with lines of eight rows or more over their width (odd)."""
    found = feasibility(random_data(seed), thorough=False)
    assert found.certified <= found.factor <= 1
    assert found.gap <= 1e-3
