"""Linear programmes of few hard shapes: non-negative columns, rows held between two limits.

    minimise cost . x + t   with   lower - t stretch <= matrix x <= upper + t stretch,   x >= 0

and their dual vectors: of all w with matrix' w <= cost and sum |w| stretch = 1 the one of the largest

    sum over w > 0 of w lower + sum over w < 0 of w upper.

Without a stretch t is 0 and the second condition falls away. Solved by the primal-dual interior point of S.
Mehrotra, SIAM J. Optim. 2, 575 (1992), in scaled variables; what comes out is as good as its `value` and
`bound` are close, and is not proven: callers check it against the numbers they mean.
"""

from __future__ import annotations

from collections.abc import Callable
from contextlib import suppress
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import NumericalLimit
from pulseprop.numerics.interior_point import Gaps, Point, Problem, improved, start, value_and_bound

__all__ = ["BoxSolution", "Stop", "solve_box"]

Real = NDArray[np.float64]

STEPS = 150
"""Most steps; 20 to 40 are usual."""
WORTH_A_LOOK = 0.02
"""Difference of value and bound, over the value, from which on a solution may be good enough."""


@dataclass(frozen=True, eq=False, kw_only=True)
class BoxSolution:
    """x (columns,) and t; dual (rows,), positive on lower limits; value of the programme and of its dual."""

    x: Real
    t: float
    dual: Real
    value: float
    bound: float


Stop = Callable[[BoxSolution], bool]


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
    stop: Stop | None = None,
) -> BoxSolution:
    """The minimum over x >= 0 (and t, where `stretch` is given).

    matrix: (rows, columns), any scale of either. lower, upper: (rows,), -inf and inf where a row has one
    limit only. cost: (columns,), 0 unless given. stretch: (rows,), 0 or more. accuracy, floor: largest
    difference of value and bound, over the value and by itself. tolerable: what is accepted in place of
    accuracy where rounding stops the way there. stop: is shown solutions on the way, from a difference of
    WORTH_A_LOOK on each time it has halved, and tells whether one is good enough.

    Raises NumericalLimit where that is not reached: the programme may have no solution, or the numbers are
    beyond double precision.
    """
    programme = _Programme(matrix, lower, upper, cost, stretch)
    point = _solved(programme, accuracy, floor, accuracy if tolerable is None else tolerable, stop)
    return programme.solution(point)


class _Programme:
    """The problem in units of its rows and columns."""

    def __init__(
        self, matrix: Real, lower: Real, upper: Real, cost: Real | None, stretch: Real | None
    ) -> None:
        self.unit = _row_units(matrix, lower, upper, stretch)
        scaled = matrix / self.unit[:, None]
        column = np.max(np.abs(scaled), axis=0)
        self.column = np.where(column > 0, column, 1.0)
        scaled /= self.column
        self.problem = Problem(
            matrix=scaled,
            lower=lower / self.unit,
            upper=upper / self.unit,
            cost=np.zeros(len(column)) if cost is None else cost / self.column,
            stretch=None if stretch is None else stretch / self.unit,
        )

    def solution(self, point: Point) -> BoxSolution:
        """In the units of the caller."""
        value, bound = value_and_bound(self.problem, point)
        dual = (point.from_lower - point.from_upper) / self.unit
        return BoxSolution(x=point.x / self.column, t=point.t, dual=dual, value=value, bound=bound)


def _row_units(matrix: Real, lower: Real, upper: Real, stretch: Real | None) -> Real:
    """What one in a row means: its stretch, else half its width, else its largest entry."""
    width = (upper - lower) / 2
    unit = np.where(np.isfinite(width) & (width > 0), width, np.max(np.abs(matrix), axis=1))
    if stretch is not None:
        unit = np.where(stretch > 0, stretch, unit)
    return np.where(unit > 0, unit, 1.0)


def _solved(
    programme: _Programme, accuracy: float, floor: float, tolerable: float, stop: Stop | None
) -> Point:
    problem, next_look = programme.problem, WORTH_A_LOOK
    best: tuple[float, Point | None] = (np.inf, None)
    # where there is no solution the duals grow without limit, until a factorisation fails
    with np.errstate(all="ignore"), suppress(np.linalg.LinAlgError):
        point = start(problem)
        for _ in range(STEPS):
            gaps = problem.gaps(point)
            left = _left(problem, point, gaps, floor)
            best = min(best, (left, point), key=lambda one: one[0])
            if stop is not None and left <= next_look:
                next_look = left / 2
                if stop(programme.solution(point)):
                    return point
            if left <= accuracy:
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
