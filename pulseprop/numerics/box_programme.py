"""Linear programmes of few hard shapes: non-negative columns, rows held between two limits.

    minimise cost . x + t   with   lower - t stretch <= matrix x <= upper + t stretch,   x >= 0

and their dual vectors: of all w with matrix' w <= cost and sum |w| stretch = 1 the one of the largest

    sum over w > 0 of w lower + sum over w < 0 of w upper.

Without a stretch t is 0 and the second condition falls away. Solved by the primal-dual interior point of S.
Mehrotra, SIAM J. Optim. 2, 575 (1992), in scaled variables; what comes out is as good as its `value` and
`bound` are close, and is not proven: callers check it against the numbers they mean.
"""

from __future__ import annotations

from contextlib import suppress
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import NumericalLimit
from pulseprop.numerics.interior_point import Gaps, Point, Problem, improved, start, value_and_bound

__all__ = ["BoxSolution", "solve_box"]

Real = NDArray[np.float64]

STEPS = 150
"""Most steps; 20 to 40 are usual."""


@dataclass(frozen=True, eq=False, kw_only=True)
class BoxSolution:
    """x (columns,) and t; dual (rows,), positive on lower limits; value of the programme and of its dual."""

    x: Real
    t: float
    dual: Real
    value: float
    bound: float


def solve_box(
    matrix: Real,
    lower: Real,
    upper: Real,
    *,
    cost: Real | None = None,
    stretch: Real | None = None,
    accuracy: float = 1e-6,
    floor: float = 1e-9,
    tolerable: float | None = None,
) -> BoxSolution:
    """The minimum over x >= 0 (and t, where `stretch` is given).

    matrix: (rows, columns), any scale of either. lower, upper: (rows,), -inf and inf where a row has one
    limit only. cost: (columns,), 0 unless given. stretch: (rows,), 0 or more. accuracy, floor: largest
    difference of value and bound, over the value and by itself. tolerable: what is accepted in place of
    accuracy where rounding stops the way there.

    Raises NumericalLimit where that is not reached: the programme may have no solution, or the numbers are
    beyond double precision.
    """
    unit = _row_units(matrix, lower, upper, stretch)
    rows = matrix / unit[:, None]
    column = np.max(np.abs(rows), axis=0)
    column = np.where(column > 0, column, 1.0)
    problem = Problem(
        matrix=rows / column,
        lower=lower / unit,
        upper=upper / unit,
        cost=np.zeros(len(column)) if cost is None else cost / column,
        stretch=None if stretch is None else stretch / unit,
    )
    point = _solved(problem, accuracy, floor, accuracy if tolerable is None else tolerable)
    value, bound = value_and_bound(problem, point)
    dual = (point.from_lower - point.from_upper) / unit
    return BoxSolution(x=point.x / column, t=point.t, dual=dual, value=value, bound=bound)


def _row_units(matrix: Real, lower: Real, upper: Real, stretch: Real | None) -> Real:
    """What one in a row means: its stretch, else half its width, else its largest entry."""
    width = (upper - lower) / 2
    unit = np.where(np.isfinite(width) & (width > 0), width, np.max(np.abs(matrix), axis=1))
    if stretch is not None:
        unit = np.where(stretch > 0, stretch, unit)
    return np.where(unit > 0, unit, 1.0)


def _solved(problem: Problem, accuracy: float, floor: float, tolerable: float) -> Point:
    best: tuple[float, Point | None] = (np.inf, None)
    # where there is no solution the duals grow without limit, until a factorisation fails
    with np.errstate(all="ignore"), suppress(np.linalg.LinAlgError):
        point = start(problem)
        for _ in range(STEPS):
            gaps = problem.gaps(point)
            best = min(best, (_left(problem, point, gaps, floor), point), key=lambda one: one[0])
            if best[0] <= accuracy:
                break
            point = improved(problem, point, gaps)
    left, found = best
    if found is not None and left <= tolerable:
        return found
    raise NumericalLimit(
        "a linear programme was not solved",
        value=f"{left:.2g} of its value left",
        allowed=f"{accuracy:.2g}",
        remedy="Give fewer rows, or the uncertainty of the numbers",
    )


def _left(problem: Problem, point: Point, gaps: Gaps, floor: float) -> float:
    """Difference of value and bound, with what the conditions still miss, over the value."""
    value, bound = value_and_bound(problem, point)
    return (abs(value - bound) + gaps.missing(point)) / max(abs(value), floor)
