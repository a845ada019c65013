"""Non-negative absorption that explains numbers: least uncertainty factor, then smoothest among equals.

Among x >= 0 with |matrix x - target| <= t uncertainty, first the smallest t, then at that t (1 at least) the
smallest roughness . x + sum |bends x|. Both are linear programmes (Q. Huangfu and J. A. J. Hall, Math.
Program. Comput. 10, 119 (2018)).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import NumericalLimit

__all__ = ["PassiveFit", "passive_fit"]

Real = NDArray[np.float64]

SLACK = 1e-6
"""Relative room above the least factor that the smoothest solution may use: the solver's own tolerance."""


@dataclass(frozen=True, eq=False)
class PassiveFit:
    """weights: x, shape (columns,). factor: the least t."""

    weights: Real
    factor: float


def passive_fit(matrix: Real, target: Real, uncertainty: Real, roughness: Real, bends: Real) -> PassiveFit:
    """matrix (N, columns), target and uncertainty (N,), roughness (columns,), bends (any, columns).

    Raises NumericalLimit where the solver finds no solution.
    """
    scaled, goal = matrix / uncertainty[:, None], target / uncertainty
    # badly scaled columns make the solver fail: each is brought to a largest entry of 1
    unit = np.max(np.abs(scaled), axis=0)
    scaled = scaled / unit
    factor = float(_least_factor(scaled, goal)[-1])
    allowed = max(factor, 1.0) * (1 + SLACK)
    weights = _smoothest(scaled, goal, allowed, roughness / unit, bends / unit)
    return PassiveFit(weights=np.maximum(weights, 0.0) / unit, factor=factor)


def _least_factor(matrix: Real, goal: Real) -> Real:
    column = -np.ones((len(goal), 1))
    rows = np.block([[matrix, column], [-matrix, column]])
    cost = np.zeros(matrix.shape[1] + 1)
    cost[-1] = 1.0
    return _solve(cost, rows, np.concatenate((goal, -goal)))


def _smoothest(matrix: Real, goal: Real, allowed: float, roughness: Real, bends: Real) -> Real:
    """Absolute values of the bends as extra variables v >= |bends x|."""
    count = len(bends)
    none, minus = np.zeros((len(goal), count)), -np.eye(count)
    rows = np.block([[matrix, none], [-matrix, none], [bends, minus], [-bends, minus]])
    limit = np.concatenate((goal + allowed, allowed - goal, np.zeros(2 * count)))
    cost = np.concatenate((roughness, np.ones(count)))
    return _solve(cost / np.max(cost), rows, limit)[: matrix.shape[1]]


def _solve(cost: Real, rows: Real, limit: Real) -> Real:
    from scipy.optimize import linprog

    result = linprog(cost, A_ub=rows, b_ub=limit, bounds=(0, None), method="highs")
    if result.x is None:
        raise NumericalLimit(
            "the linear programme for a passive causal model was not solved",
            value=result.message,
            remedy="give the uncertainty of the numbers, or fewer rows",
        )
    return np.asarray(result.x)
