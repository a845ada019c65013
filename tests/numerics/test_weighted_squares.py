"""Weighted least squares against a dense solver, by both factorisations, with and without narrow rows."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.numerics import weighted_squares
from pulseprop.numerics.weighted_squares import WeightedSquares


def problem(wide, narrow, columns, seed):
    source = np.random.default_rng(seed)
    matrix = source.uniform(-1, 1, size=(wide + narrow, columns))
    matrix[wide:] = 0.0
    for row in range(narrow):
        matrix[wide + row, row : row + 3] = source.uniform(0.1, 1, 3)
    weights = 10 ** source.uniform(-2, 2, wide + narrow), 10 ** source.uniform(-2, 2, columns)
    return matrix, *weights, source.normal(size=wide + narrow), source.normal(size=columns)


@pytest.mark.parametrize("orthogonal", [False, True])
@pytest.mark.parametrize(
    ("wide", "narrow", "columns"), [(20, 0, 30), (20, 40, 57), (1, 33, 40), (5, 100, 102)]
)
def test_solution_and_both_residuals(monkeypatch, wide, narrow, columns, orthogonal):
    if orthogonal:
        monkeypatch.setattr(weighted_squares, "STIFFER", ())  # no Cholesky factor is tried
    matrix, stiffness, ratio, near, far = problem(wide, narrow, columns, seed=wide + narrow)
    squares = WeightedSquares(matrix)
    assert len(squares.narrow) >= narrow
    factored = squares.factored(stiffness, ratio)
    found = factored.solve(near, far)
    assert isinstance(factored.factor, weighted_squares._Orthogonal) is orthogonal
    whole = np.diag(1 / stiffness) + (matrix * ratio) @ matrix.T
    w = np.linalg.solve(whole, near / stiffness + matrix @ (ratio * far))
    assert found[0] == pytest.approx(w, rel=1e-7, abs=1e-9)
    assert found[1] == pytest.approx((near - w) / stiffness, rel=1e-7, abs=1e-7)
    assert found[2] == pytest.approx(ratio * (w @ matrix - far), rel=1e-7, abs=1e-7)


def test_weights_twenty_orders_apart():
    """Two equations of weight 1e20 for three unknowns hold to rounding."""
    matrix = np.array([[1.0, 0.0], [0.0, 1.0], [1.0, 1.0]])
    squares, near = WeightedSquares(matrix), np.array([3.0, 0.0, 0.0])
    w, *_ = squares.factored(np.ones(3), np.full(2, 1e20)).solve(near, np.array([1.0, 2.0]))
    # by hand: w0 = 1 - w2, w1 = 2 - w2, and (1 - w2 - 3)^2 + (2 - w2)^2 + w2^2 is least at w2 = 0
    assert w == pytest.approx([1.0, 2.0, 0.0], abs=1e-7)
