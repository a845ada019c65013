"""Least squares between bounds, in few unknowns, for many problems of one shape at once.

Each unknown is free, at 0 or at 1; for k unknowns the 3^k cases are solved outright, which is exact and,
for the few unknowns of a bench, quicker than an iteration that must be begun anew for every problem.
"""

from __future__ import annotations

from itertools import product

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError

__all__ = ["MOST_UNKNOWNS", "least_in_box"]

Real = NDArray[np.float64]

MOST_UNKNOWNS = 7
RIDGE = 1e-13
"""Added to the diagonal over its mean, so that two equal glasses have one answer."""
SLACK = 1e-9


def least_in_box(gram: Real, slope: Real) -> tuple[Real, Real]:
    """The least of u.G u + 2 h.u for u in [0, 1]^k: where, (m, k), and how much, (m,).

    gram: G, positive semidefinite, (m, k, k). slope: h, (m, k). Raises InputError beyond seven unknowns.
    """
    count, unknowns = slope.shape
    if unknowns > MOST_UNKNOWNS:
        raise InputError(
            "too many adjustments move together",
            value=f"{unknowns} in one design",
            allowed=f"{MOST_UNKNOWNS} continuous ones",
            remedy="Fix some of them, or give steps",
        )
    scale = np.trace(gram, axis1=1, axis2=2) / max(unknowns, 1)
    eased = gram + (RIDGE * scale)[:, None, None] * np.eye(unknowns)
    best, where = np.full(count, np.inf), np.zeros((count, unknowns))
    for state in product((None, 0.0, 1.0), repeat=unknowns):
        u = _solved(eased, slope, state)
        inside = np.all((u >= -SLACK) & (u <= 1 + SLACK), axis=1)
        u = np.clip(u, 0.0, 1.0)
        value = np.einsum("mi,mij,mj->m", u, gram, u) + 2 * np.einsum("mi,mi->m", slope, u)
        better = inside & (value < best)
        best[better], where[better] = value[better], u[better]
    return where, best


def _solved(gram: Real, slope: Real, state: tuple[float | None, ...]) -> Real:
    """The stationary point with some unknowns held, (m, k)."""
    u = np.zeros_like(slope)
    held = [index for index, value in enumerate(state) if value is not None]
    free = [index for index, value in enumerate(state) if value is None]
    u[:, held] = [value for value in state if value is not None]
    if free:
        right = slope[:, free] + np.einsum("mij,mj->mi", gram[:, free][:, :, held], u[:, held])
        matrix = gram[:, free][:, :, free]
        flat = np.abs(np.linalg.det(matrix)) == 0
        u[:, free] = np.linalg.solve(
            np.where(flat[:, None, None], np.eye(len(free)), matrix), -right[:, :, None]
        )[:, :, 0]
    return u
