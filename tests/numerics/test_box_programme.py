"""Boxed linear programmes: solved by hand, against another solver (HiGHS in scipy), and stiff."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.optimize import linprog

from pulseprop.errors import NumericalLimit
from pulseprop.numerics.box_programme import solve_box


def test_two_numbers_that_one_column_cannot_meet():
    """x = 1 +- t and 2 x = 4 +- 3 t: t = 1/2 - ... by hand from 1 + t = (4 - 3 t)/2: t = 2/5, x = 7/5."""
    target = np.array([1.0, 4.0])
    found = solve_box(np.array([[1.0], [2.0]]), target, target, stretch=np.array([1.0, 3.0]))
    assert found.t == pytest.approx(0.4, rel=1e-5)
    assert found.x == pytest.approx([1.4], rel=1e-5)
    # the proof: 2 f_1 - f_2 = 0 for every x, so t (2 + 3) >= 4 - 2
    assert found.dual == pytest.approx([-0.4, 0.2], rel=1e-4)
    assert found.bound == pytest.approx(0.4, rel=1e-5)


def test_a_cost_over_a_box_with_a_row_of_one_limit():
    """min x + 3 y, 2 <= x + y <= 4, y >= 1 as a lower limit only: x = y = 1 by hand."""
    matrix = np.array([[1.0, 1.0], [0.0, 1.0]])
    found = solve_box(matrix, np.array([2.0, 1.0]), np.array([4.0, np.inf]), cost=np.array([1.0, 3.0]))
    assert found.value == pytest.approx(4.0, rel=1e-5)
    assert found.x == pytest.approx([1.0, 1.0], rel=1e-4)
    assert found.dual == pytest.approx([1.0, 2.0], rel=1e-4)


@pytest.mark.parametrize("seed", range(20))
def test_badly_scaled_programmes_against_another_solver(seed):
    source = np.random.default_rng(seed)
    rows, columns = source.integers(3, 30), source.integers(3, 40)
    matrix = source.normal(size=(rows, columns)) * 10 ** source.uniform(-4, 4, columns)
    size = np.max(np.abs(matrix), axis=0)
    target = matrix @ (np.maximum(source.normal(size=columns), 0) / size)
    width = 10 ** source.uniform(-3, 0, rows)
    upper = np.where(source.random(rows) < 0.2, np.inf, target + width)
    cost = source.uniform(0, 1, columns) * size
    two = np.isfinite(upper)
    scaled = np.concatenate([matrix[two], -matrix]) / size
    other = linprog(cost / size, A_ub=scaled, b_ub=np.concatenate([upper[two], width - target]))
    found = solve_box(matrix, target - width, upper, cost=cost, accuracy=1e-7)
    assert found.value == pytest.approx(other.fun, rel=1e-6)
    assert found.bound == pytest.approx(other.fun, rel=1e-6)
    assert np.all(found.dual @ matrix <= cost + 1e-5 * size)


def test_columns_that_differ_in_the_ninth_digit():
    """A Cauchy matrix, condition beyond 1e15, numbers a millionfold of their uncertainty."""
    rows = np.linspace(1.0, 2.0, 40)
    places = np.concatenate([1 - np.geomspace(1e-3, 0.9, 40), 2 + np.geomspace(1e-3, 1e3, 60)])
    matrix = 1 / (places - rows[:, None])
    exact = matrix[:, 70] + matrix[:, 95] - 0.1 * matrix[:, 20] * -1
    rounded = np.round(exact, 6)
    found = solve_box(matrix, rounded, rounded, stretch=np.full(40, 5e-7), accuracy=1e-6)
    left = np.max(np.abs(matrix @ found.x - rounded)) / 5e-7
    assert left == pytest.approx(found.t, rel=1e-4)
    assert 0.5 < found.bound <= found.value < 1
    assert np.max(found.dual @ matrix) * 5e-7 < 1e-9


def test_conditions_that_exclude_each_other_are_a_limit_not_an_answer():
    matrix = np.array([[1.0], [1.0]])
    with pytest.raises(NumericalLimit, match="not solved"):
        solve_box(matrix, np.array([1.0, 3.0]), np.array([2.0, 4.0]), cost=np.array([1.0]))
