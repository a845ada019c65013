"""Least squares with one matrix and many weights: w near given values, and A' w near given values.

    minimise  sum (w - near)^2 / D + sum R (A' w - far)^2

An interior point solves one such problem a step. Rows of A with a few neighbouring entries only are
eliminated first (`band_elimination`). D and R grow apart without limit on the way, and normal equations
square their ratio. A Cholesky factor of them serves all the same, as long as conjugate gradients converge on
top of it: it may even be that of slightly stiffer equations, which costs them a step for each direction that
rounding has hidden. Where they do not converge, an orthogonal factorisation is taken, at five times the
price (A. Bjorck, Numerical Methods for Least Squares Problems, SIAM 1996).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.numerics.band_elimination import BandElimination, BandLayout

__all__ = ["Factored", "WeightedSquares"]

Real = NDArray[np.float64]

NARROW = 6
"""Most columns that a row may span to count as narrow."""
WORTHWHILE = 16
"""Narrow rows below which they are treated like the others."""
ITERATIONS = 120
"""Most conjugate gradients on top of a Cholesky factor. An orthogonal one costs as much as some 75 at
1,000 unknowns and 1,000 at 2,000."""
CONVERGED = ((1e-9, np.inf), (1e-7, 1e-10))
"""Fall of the gradient, and last change of w over the largest w, at which they stop: either pair will do, as
rounding lets the gradient rise again."""
HIDDEN = ((1e-9, 1e-8), (1e-7, 1e-10))
"""The same on a stiffer factor: there the gradient of hidden directions is small from the start."""
STIFFER = (0.0, 1e-15, 3e-15, 1e-14, 1e-13, 1e-11, 1e-9)
"""Shares by which the diagonal is enlarged in turn, until there is a Cholesky factor."""


class WeightedSquares:
    """matrix: A, (rows, columns), entries about 1 at most; it is not kept."""

    def __init__(self, matrix: Real) -> None:
        narrow = _narrow_rows(matrix)
        self.narrow, self.wide = np.flatnonzero(narrow), np.flatnonzero(~narrow)
        self.shape = matrix.shape
        shared = np.any(matrix[narrow] != 0, axis=0)
        self.shared, self.private = np.flatnonzero(shared), np.flatnonzero(~shared)
        self.dense = np.ascontiguousarray(matrix[self.wide].T)
        self.layout = None
        if len(self.narrow):
            self.layout = BandLayout(matrix[np.ix_(self.narrow, self.shared)])

    def factored(self, stiffness: Real, ratio: Real) -> Factored:
        """D: (rows,), R: (columns,), both above 0."""
        return Factored(self, stiffness, ratio)

    def of_columns(self, x: Real) -> Real:
        """A x, (rows,)."""
        result = np.empty(self.shape[0])
        result[self.wide] = x @ self.dense
        if self.layout is not None:
            result[self.narrow] = self.layout.of_equations(x[self.shared])
        return result

    def of_rows(self, w: Real) -> Real:
        """A' w, (columns,)."""
        result = self.dense @ w[self.wide]
        if self.layout is not None:
            result[self.shared] += self.layout.of_unknowns(w[self.narrow])
        return np.asarray(result)


def _narrow_rows(matrix: Real) -> NDArray[np.bool_]:
    """Rows that span few columns, where those of all of them can be put in one order."""
    touched = matrix != 0
    first = np.argmax(touched, axis=1)
    span = matrix.shape[1] - np.argmax(touched[:, ::-1], axis=1) - first
    narrow = (span <= NARROW) & np.any(touched, axis=1)
    ordered = bool(np.all(np.diff(first[narrow]) >= 0))
    return narrow if ordered and np.sum(narrow) >= WORTHWHILE else np.zeros(len(narrow), dtype=bool)


class Factored:
    """One pair of weights: what is left after the elimination, and its Cholesky or orthogonal factor."""

    def __init__(self, squares: WeightedSquares, stiffness: Real, ratio: Real) -> None:
        self.squares = squares
        self.near, self.far = 1 / np.sqrt(stiffness), np.sqrt(ratio)
        self.of_wide = self.near[squares.wide]
        self.rows = squares.dense * self.far[:, None]
        self.band = None
        if squares.layout is not None:
            self.band = BandElimination(
                squares.layout, self.near[squares.narrow], self.far[squares.shared], self.rows[squares.shared]
            )
            self.rows = np.concatenate((self.rows[squares.private], self.band.left))
        self.factor: _Normal | _Orthogonal = _Normal(self.of_wide, self.rows)

    def solve(self, near: Real, far: Real) -> tuple[Real, Real, Real]:
        """w (rows,), (near - w)/D (rows,) and R (A' w - far) (columns,), for near (rows,), far (columns,)."""
        squares = self.squares
        near, far = self.near * near, self.far * far
        right, of_band = far[squares.private], np.zeros(0)
        if self.band is not None:
            of_band, left = self.band.reduced(near[squares.narrow], far[squares.shared])
            right = np.concatenate((right, left))
        z, rest_near, rest = self._solved(near[squares.wide], right)
        w, of_near, of_far = np.empty(len(near)), np.empty(len(near)), np.empty(len(far))
        w[squares.wide], of_near[squares.wide] = z, rest_near
        count = len(squares.private)
        of_far[squares.private] = rest[:count]
        if self.band is not None:
            w[squares.narrow] = self.band.unknowns(of_band, z)
            of_near[squares.narrow], of_far[squares.shared] = self.band.restored(rest[count:])
        return w, self.near * of_near, -self.far * of_far

    def _solved(self, near: Real, right: Real) -> tuple[Real, Real, Real]:
        """z, and what of_wide z = near and rows z = right leave."""
        found = self.factor.solve(near, right)
        if found is None:
            self.factor = _Orthogonal(self.of_wide, self.rows)
            found = self.factor.solve(near, right)
        return found


class _Normal:
    """near^2 + rows' rows = L L', nearly: good enough to make conjugate gradients short (those of A.
    Bjorck, section 7.4, which never form the product)."""

    def __init__(self, near: Real, rows: Real) -> None:
        from scipy.linalg.blas import dsyrk
        from scipy.linalg.lapack import dpotrf

        self.near, self.rows = near, rows
        full = dsyrk(1.0, rows.T, lower=1)
        diagonal = np.diag_indices(len(near))
        size = full[diagonal] + near**2
        self.lower, self.failed, self.converged = full, True, CONVERGED
        for more in STIFFER:
            full[diagonal] = size * (1 + more)
            self.lower, failed = dpotrf(full, lower=1)
            self.failed, self.converged = failed != 0, HIDDEN if more > 0 else CONVERGED
            if not self.failed:
                break

    def solve(self, near: Real, right: Real) -> tuple[Real, Real, Real] | None:
        """None where there is no Cholesky factor, or the gradients do not converge on it."""
        if self.failed:
            return None
        z, direction = np.zeros_like(near), np.zeros_like(near)
        size, first, change = np.inf, np.inf, 0.0
        for _ in range(ITERATIONS):
            slope = self._half(self.near * near + right @ self.rows, 0)
            last, size = size, float(slope @ slope)
            first = min(first, size) if np.isinf(first) else first
            if any(size <= fall**2 * first and change <= still for fall, still in self.converged):
                return z, near, right
            direction = self._half(slope, 1) + direction * (size / last)
            of_near, of_rows = self.near * direction, self.rows @ direction
            step = size / float(of_near @ of_near + of_rows @ of_rows)
            z = z + step * direction
            near, right = near - step * of_near, right - step * of_rows
            change = step * float(np.max(np.abs(direction)) / np.max(np.abs(z)))
        return None

    def _half(self, right: Real, transposed: int) -> Real:
        from scipy.linalg.lapack import dtrtrs

        return np.asarray(dtrtrs(self.lower, right, lower=1, trans=transposed)[0])


class _Orthogonal:
    """Rows sorted by size, as the largest must be eliminated first; Q stays as its reflections."""

    def __init__(self, near: Real, rows: Real) -> None:
        from scipy.linalg.lapack import dgeqrf

        size = np.concatenate((near, np.max(np.abs(rows), axis=1)))
        self.order = np.argsort(-size)
        self.count = len(near)
        full = np.zeros((len(size), self.count), order="F")
        place = np.empty_like(self.order)
        place[self.order] = np.arange(len(size))
        full[place[: self.count], np.arange(self.count)] = near
        full[place[self.count :]] = rows
        self.reflections, self.tau, _, _ = dgeqrf(full, overwrite_a=1)

    def solve(self, near: Real, right: Real) -> tuple[Real, Real, Real]:
        from scipy.linalg import solve_triangular
        from scipy.linalg.lapack import dormqr

        both = np.concatenate((near, right))[self.order][:, None]
        turned = dormqr("L", "T", self.reflections, self.tau, both, 64 * self.count)[0]
        z = solve_triangular(self.reflections[: self.count], turned[: self.count, 0], check_finite=False)
        turned[: self.count] = 0.0
        rest = np.empty(len(both))
        rest[self.order] = dormqr("L", "N", self.reflections, self.tau, turned, 64 * self.count)[0][:, 0]
        return z, rest[: self.count], rest[self.count :]
