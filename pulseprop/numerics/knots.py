"""Knots of cubic splines beside the rows of a table, and what the rows leave open between them."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

__all__ = ["between_rows", "outside_knots"]

Real = NDArray[np.float64]

KNOT_RATIO = 1.3
NEAREST_GAP = 0.5
"""First knot outside the rows, in spacings of the end rows; distances then grow by KNOT_RATIO."""
FARTHEST = 300.0
"""Last knot over the highest frequency, and half the lowest over the first knot."""


def outside_knots(rows: Real) -> tuple[Real, Real]:
    """Knots up to the first and from the last row (rad/s, both ascending), denser towards the rows."""
    first, last = float(rows[0]), float(rows[-1])
    near = min(NEAREST_GAP * float(rows[1] - rows[0]), first / 8)
    steps = 1 + int(np.log(first / 2 / near) / np.log(KNOT_RATIO))
    down = first - near * KNOT_RATIO ** np.arange(steps)
    rest = down[-1] * KNOT_RATIO ** -np.arange(1.0, int(np.log(FARTHEST) / np.log(KNOT_RATIO)))
    gap = NEAREST_GAP * float(rows[-1] - rows[-2])
    steps = 1 + int(np.log(FARTHEST * last / gap) / np.log(KNOT_RATIO))
    up = last + gap * KNOT_RATIO ** np.arange(steps)
    return np.concatenate(([first], down, rest))[::-1], np.concatenate(([last], up))


def between_rows(omega: Real, k: Real) -> Real:
    """What the row spacing leaves open: |fourth difference| of k / 60, with the largest of the four gaps.

    omega, k: five rows or more, omega ascending. A row has that of its neighbours where it is larger: where
    the difference passes through 0 the spline still misses what it misses beside.
    """
    first = np.clip(np.arange(len(k)) - 2, 0, len(k) - 5)
    x, y = (column[first[:, None] + np.arange(5)] for column in (omega, k))
    gap = np.max(np.diff(x, axis=1), axis=1)
    others = (x[:, :, None] - x[:, None, :]) / gap[:, None, None] + np.eye(5)
    own = np.pad(np.abs(np.sum(y / np.prod(others, axis=2), axis=1)) * 24 / 60, 1, mode="edge")
    return np.asarray(np.maximum(np.maximum(own[:-2], own[2:]), own[1:-1]))
