"""Least squares with one matrix and many weights: w near given values, and A' w near given values.

    minimise  sum (w - near)^2 / D + sum R (A' w - far)^2

An interior point solves one such problem a step. D and R grow apart without limit on the way: as long as
their ratio fits into double precision the normal equations serve (one Cholesky), then an orthogonal
factorisation, which does not square it (A. Bjorck, Numerical Methods for Least Squares Problems, SIAM 1996).
"""

from __future__ import annotations

from typing import Any, Protocol

import numpy as np
from numpy.typing import NDArray

__all__ = ["Factored", "WeightedSquares"]

Real = NDArray[np.float64]

RANGE = 1e11
"""Largest ratio of the weights for which the normal equations are used; entries of A are about 1."""
REFINEMENTS = 1


class Factored(Protocol):
    """Weights and A in a form that solves quickly."""

    def solve(self, near: Real, far: Real) -> tuple[Real, Real, Real]:
        """w (rows,), (near - w)/D (rows,) and R (A' w - far) (columns,), for near (rows,), far (columns,)."""
        ...


class WeightedSquares:
    """matrix: A, (rows, columns)."""

    def __init__(self, matrix: Real) -> None:
        self.matrix = matrix

    def factored(self, stiffness: Real, ratio: Real) -> Factored:
        """D: (rows,), R: (columns,), both above 0."""
        from scipy.linalg import LinAlgError

        if float(np.max(ratio)) * float(np.max(stiffness)) < RANGE:
            try:
                return _Normal(self.matrix, stiffness, ratio)
            except LinAlgError:
                pass
        return _Orthogonal(self.matrix, stiffness, ratio)


class _Normal:
    """1/D + A R A' = L L'."""

    def __init__(self, matrix: Real, stiffness: Real, ratio: Real) -> None:
        from scipy.linalg import cho_factor
        from scipy.linalg.blas import dsyrk

        self.matrix, self.stiffness, self.ratio = matrix, stiffness, ratio
        rooted = matrix * np.sqrt(ratio)
        full = dsyrk(1.0, rooted.T, trans=1, lower=1)
        full[np.diag_indices(len(stiffness))] += 1 / stiffness
        self.factor: Any = cho_factor(full, lower=True, overwrite_a=True, check_finite=False)

    def solve(self, near: Real, far: Real) -> tuple[Real, Real, Real]:
        from scipy.linalg import cho_solve

        w = np.zeros_like(near)
        for _ in range(1 + REFINEMENTS):
            close = (near - w) / self.stiffness
            distant = self.ratio * (w @ self.matrix - far)
            w = w + cho_solve(self.factor, close - self.matrix @ distant, check_finite=False)
        return w, (near - w) / self.stiffness, self.ratio * (w @ self.matrix - far)


class _Orthogonal:
    """Rows sorted by size, as the largest must be eliminated first."""

    def __init__(self, matrix: Real, stiffness: Real, ratio: Real) -> None:
        self.near, self.far = 1 / np.sqrt(stiffness), np.sqrt(ratio)
        rows = np.concatenate((np.diag(self.near), self.far[:, None] * matrix.T))
        self.order = np.argsort(-np.max(np.abs(rows), axis=1))
        self.q, self.r = np.linalg.qr(rows[self.order])

    def solve(self, near: Real, far: Real) -> tuple[Real, Real, Real]:
        from scipy.linalg import solve_triangular

        right = np.concatenate((self.near * near, self.far * far))
        inside = right[self.order] @ self.q
        w = solve_triangular(self.r, inside, check_finite=False)
        rest = np.empty_like(right)
        rest[self.order] = right[self.order] - self.q @ inside
        of_near, of_far = np.split(rest, [len(near)])
        return w, self.near * of_near, -self.far * of_far
