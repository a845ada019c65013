"""Piecewise cubics through rows, as coefficients in t = (x - left)/(right - left) on each piece."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

__all__ = ["cubic_pieces", "derivative_pieces", "linear_pieces"]

Real = NDArray[np.float64]


def linear_pieces(x: Real, y: Real) -> Real:
    """Straight lines between rows x (ascending), y, both (rows,): coefficients of shape (rows - 1, 4)."""
    pieces = np.zeros((len(x) - 1, 4))
    pieces[:, 0] = y[:-1]
    pieces[:, 1] = np.diff(y)
    return pieces


def cubic_pieces(x: Real, y: Real, first_slope: float | None, last_slope: float | None) -> Real:
    """The C2 interpolating cubic spline with knots at the rows: coefficients of shape (rows - 1, 4).

    x: ascending, y: both (rows,), at least four rows. At each end either the slope dy/dx is given, or None:
    then the two pieces next to that end are one cubic.
    """
    length, rise = np.diff(x), np.diff(y)
    slope = _slopes(length, rise / length, first_slope, last_slope)
    left, right = length * slope[:-1], length * slope[1:]
    return np.stack([y[:-1], left, 3 * rise - 2 * left - right, left + right - 2 * rise], axis=1)


def derivative_pieces(x: Real, pieces: Real) -> Real:
    """Coefficients (pieces, 4) of d/dx of a piecewise cubic; x: edges, (pieces + 1,)."""
    result = np.zeros_like(pieces)
    result[:, :3] = pieces[:, 1:] * np.array([1.0, 2.0, 3.0]) / np.diff(x)[:, None]
    return result


def _slopes(length: Real, steepness: Real, first: float | None, last: float | None) -> Real:
    """Slopes at the rows from continuity of the second derivative: a tridiagonal system."""
    from scipy.linalg import solve_banded

    bands = np.zeros((3, len(length) + 1))
    right = np.zeros(len(length) + 1)
    bands[0, 2:] = length[:-1]
    bands[1, 1:-1] = 2 * (length[:-1] + length[1:])
    bands[2, :-2] = length[1:]
    right[1:-1] = 3 * (length[1:] * steepness[:-1] + length[:-1] * steepness[1:])
    bands[1, 0], bands[0, 1], right[0] = _end(length, steepness, first)
    bands[1, -1], bands[2, -2], right[-1] = _end(length[::-1], steepness[::-1], last)
    return np.asarray(solve_banded((1, 1), bands, right))


def _end(length: Real, steepness: Real, slope: float | None) -> tuple[float, float, float]:
    """Diagonal, neighbour and right-hand side of an end row, counted from that end."""
    if slope is not None:
        return 1.0, 0.0, slope
    near, next_, both = length[0], length[1], length[0] + length[1]
    value = ((near + 2 * both) * next_ * steepness[0] + near**2 * steepness[1]) / both
    return float(next_), float(both), float(value)
