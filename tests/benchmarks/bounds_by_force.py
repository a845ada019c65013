"""The optimum of guaranteed bounds by brute force: a fine grid of masses, HiGHS, approached from inside.

What it finds are values that materials of the class do reach, so true bounds can only be wider. Transparent
data are taken in chi with the remainder of second order followed in turns, absorbing data in k.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import linprog

from pulseprop.causality.passive_class import PassiveClass
from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.numerics.spline_basis import basis_transforms

__all__ = ["reached"]

Real = NDArray[np.float64]

TURNS = 3
STEP = 0.1
"""Of differences, in gaps of the rows: the transforms of splines are smooth between rows."""


def reached(data: PassiveData, omega: float) -> Real:
    """Lowest and highest index, group index and GVD (SI) at omega (rad/s): (3, 2).

    Raises ArithmeticError where HiGHS gives up, as on badly scaled columns it now and then does.
    """
    ends = _in_chi(data, omega) if data.k is None else _in_k(data, omega)
    scale = np.array([1.0, 1.0, SPEED_OF_LIGHT * np.max(data.omega)])
    return np.asarray(ends / scale[:, None])


def _places(rows: Real) -> Real:
    below = rows[0] ** 2 * (1 - np.geomspace(1e-8, 1, 500))
    above = rows[-1] ** 2 * (1 + np.geomspace(1e-8, 1e5, 800))
    return np.concatenate((below, above))


def _masses(s: Real, rows: Real, w: float) -> tuple[Real, Real]:
    """Of a constant and of masses at s: what they give at the rows, and the orders 0 to 2 at w."""
    size = np.minimum(np.abs(s - rows[0] ** 2), np.abs(s - rows[-1] ** 2))
    v = s - w**2
    orders = np.array([1 / v, 2 * w / v**2, 2 / v**2 + 8 * w**2 / v**3]) * size
    matrix = np.hstack([np.ones((len(rows), 1)), size / (s - rows[:, None] ** 2)])
    return matrix, np.hstack([[[1.0], [0.0], [0.0]], orders])


def _in_chi(data: PassiveData, omega: float) -> Real:
    rows, w = data.omega / data.omega[-1], omega / data.omega[-1]
    matrix, orders = _masses(_places(rows), rows, w)
    low, high = (data.index - data.index_error) ** 2 - 1, (data.index + data.index_error) ** 2 - 1
    found = np.zeros((3, 2))
    for quantity in range(3):
        for end, sign in enumerate((1, -1)):
            chi, best = orders @ _least(matrix, low, high, sign * orders[quantity]), np.inf
            for _ in range(TURNS):
                chi = orders @ _least(matrix, low, high, sign * _gradient(chi, w)[quantity] @ orders)
                best = min(best, sign * _of_chi(chi, w)[quantity])
            found[quantity, end] = sign * best
    return found


def _in_k(data: PassiveData, omega: float) -> Real:
    cls = PassiveClass(data)
    unit = np.max(data.omega)
    assert cls.splines is not None
    assert cls.unit == unit
    w, gap = omega / unit, float(np.min(np.diff(cls.k_rows)))
    masses, orders = _masses(_places(cls.rows), cls.rows, w)
    at = w + STEP * gap * np.arange(-2, 3)
    f = basis_transforms(cls.splines.knots, cls.splines.pieces, at)
    first = (f[0] - 8 * f[1] + 8 * f[3] - f[4]) / (12 * STEP * gap)
    second = (-f[0] + 16 * f[1] - 30 * f[2] + 16 * f[3] - f[4]) / (12 * (STEP * gap) ** 2)
    orders = np.hstack([np.array([f[2], first, second]), orders])
    matrix = np.hstack([cls.spline_columns, np.pad(masses, ((0, len(cls.k_rows)), (0, 0)))])
    low, high = cls.target - cls.error, np.where(cls.least, np.inf, cls.target + cls.error)
    weights = np.array([[1, 0, 0], [1, w, 0], [0, 2, w]])
    found = np.array(
        [[row @ _least(matrix, low, high, sign * row) for sign in (1, -1)] for row in weights @ orders]
    )
    return found + np.array([[1.0], [1.0], [0.0]])


def _least(matrix: Real, low: Real, high: Real, cost: Real) -> Real:
    """The non-negative x of least cost with low <= matrix x <= high."""
    half = np.where(np.isfinite(high), (high - low) / 2, np.maximum(np.abs(low), 1e-12))
    scaled = matrix / half[:, None]
    column = np.max(np.abs(scaled), axis=0)
    scaled, cost = scaled / column, cost / column
    capped = np.isfinite(high)
    found = linprog(
        cost / np.max(np.abs(cost)),
        A_ub=np.vstack((scaled[capped], -scaled)),
        b_ub=np.concatenate((high[capped] / half[capped], -low / half)),
        method="highs",
    )
    if found.status != 0:
        raise ArithmeticError(found.message)
    return np.asarray(found.x / column)


def _of_chi(chi: Real, w: float) -> Real:
    n = np.sqrt(1 + chi[0])
    slope, bend = chi[1] / (2 * n), chi[2] / (2 * n) - chi[1] ** 2 / (4 * n**3)
    return np.array([n, n + w * slope, 2 * slope + w * bend])


def _gradient(chi: Real, w: float) -> Real:
    """By chi and its two derivatives: (3 quantities, 3)."""
    steps = 1e-6 * np.maximum(np.abs(chi), 1e-3)
    rows = [(_of_chi(chi + d, w) - _of_chi(chi - d, w)) / (2 * d.sum()) for d in np.diag(steps)]
    return np.array(rows).T
