"""Non-negative absorption that explains numbers: least uncertainty factor, then smoothest among equals.

Among x >= 0 with |matrix x - target| <= t uncertainty, first the smallest t; then, up to one per cent above
that t or up to a share of the uncertainties that the caller allows, the smallest roughness . x + sum |bends
x|. Both are linear programmes (Q. Huangfu and J. A. J. Hall, Math. Program. Comput. 10, 119 (2018)).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import NumericalLimit

__all__ = ["PassiveFit", "passive_fit"]

Real = NDArray[np.float64]

EQUAL = 1.01
"""Solutions up to this many least factors count as equals: room enough for the solver, and for smoothness."""
SMOOTHER = 1e-3
"""Roughness of the smoothest over that of the first solution, about as met: with it as the unit of cost, the
solver's absolute tolerance stays below what counts."""
PATIENCE = 60.0
"""Seconds for one linear programme."""
SOLVED = 0
"""The solver's status for an optimum; at its limits it may hand out a point that is none."""


@dataclass(frozen=True, eq=False)
class PassiveFit:
    """weights: x, shape (columns,). factor: the least t."""

    weights: Real
    factor: float


def passive_fit(
    matrix: Real, target: Real, uncertainty: Real, roughness: Real, bends: Real, *, within: float
) -> PassiveFit:
    """matrix (N, columns), target and uncertainty (N,), roughness (columns,), bends (any, columns).

    within: share of the uncertainties that smoothness may use up in any case.

    Raises NumericalLimit where the solver finds no solution.
    """
    scaled, goal = matrix / uncertainty[:, None], target / uncertainty
    # badly scaled columns make the solver fail: each is brought to a largest entry of 1
    unit = np.max(np.abs(scaled), axis=0)
    scaled = scaled / unit
    start = _least_factor(scaled, goal)
    factor = float(start[-1])
    allowed = max(EQUAL * factor, within)
    roughness, bends = roughness / unit, bends / unit
    cost = SMOOTHER * float(roughness @ start[:-1] + np.sum(np.abs(bends @ start[:-1]))) or 1.0
    weights = _smoothest(scaled, goal, allowed, roughness / cost, bends / cost)
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
    return _solve(cost, rows, limit)[: matrix.shape[1]]


def _solve(cost: Real, rows: Real, limit: Real) -> Real:
    from scipy.optimize import linprog

    result = linprog(
        cost, A_ub=rows, b_ub=limit, bounds=(0, None), method="highs-ds", options={"time_limit": PATIENCE}
    )
    if result.status != SOLVED:
        raise NumericalLimit(
            "the linear programme for a passive causal model was not solved",
            value=result.message,
            remedy="Give fewer rows (some 300 where k is given), or the uncertainty of the numbers",
        )
    return np.asarray(result.x)
