"""Index, group index, GVD and TOD as linear functionals of the absorption that makes them.

All of them combine N = n - 1 and its first three derivatives with respect to omega:

    n = 1 + N,   n_g = 1 + N + omega N',   c GVD = 2 N' + omega N'',   c TOD = 3 N'' + omega N''',

and N is the sum over absorption: a point mass at s = omega'^2 gives 1/(s - omega^2), a B-spline B of k its
transform, whose derivatives are the transforms of the derivatives of B (odd and even ones in turn).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.numerics.cauchy import monomial_cauchy

__all__ = ["ORDERS", "QUANTITIES", "mass_derivatives", "quantity_weights", "spline_derivatives"]

Real = NDArray[np.float64]

QUANTITIES = ("index", "group_index", "gvd", "tod")
ORDERS = 4
"""N and its first three derivatives."""


def quantity_weights(omega: float) -> Real:
    """Weights of N … N''' in index - 1, group index - 1, c GVD and c TOD at omega: (quantities, ORDERS)."""
    return np.array(
        [[1.0, 0.0, 0.0, 0.0], [1.0, omega, 0.0, 0.0], [0.0, 2.0, omega, 0.0], [0.0, 0.0, 3.0, omega]]
    )


def mass_derivatives(omega: float, away: Real) -> Real:
    """1/(s - omega^2) and its derivatives with respect to omega, away = s - omega^2: (ORDERS, masses)."""
    inverse = 1 / away
    step = 2 * omega * inverse
    return np.stack(
        [
            inverse,
            step * inverse,
            (2 * inverse + 2 * step**2) * inverse,
            (12 * inverse + 6 * step**2) * step * inverse,
        ]
    )


def spline_derivatives(knots: Real, pieces: Real, omega: float) -> Real:
    """Transforms of B-splines and their derivatives with respect to omega: (ORDERS, splines).

    knots, pieces: as of `basis_pieces`; the splines odd in omega. The third derivative of a spline has steps
    at its knots, where that of the transform is infinite: the fourth row is good off the knots only.
    """
    unit = knots[-1]
    edges = knots / unit
    moments = monomial_cauchy(edges, np.array([omega, -omega]) / unit)
    result = np.empty((ORDERS, pieces.shape[2]))
    for order in range(ORDERS):
        here, mirrored = np.tensordot(moments, pieces, axes=([1, 2], [0, 1]))
        result[order] = (here + (-1) ** order * mirrored) / (np.pi * unit**order)
        pieces = _slopes(edges, pieces)
    return result


def _slopes(edges: Real, pieces: Real) -> Real:
    result = np.zeros_like(pieces)
    result[:, :3] = pieces[:, 1:] * np.arange(1, 4)[:, None] / np.diff(edges)[:, None, None]
    return result
