"""One step of the primal-dual interior point for rows held between two limits.

Rows of both signs share one matrix, and the stretch t borders it without cancellation: for the change dw of
the dual vector and dt of the stretch

    (1/D + A X/Z A') dw - phi dt = ...,      phi . dw + kappa dt = ...

D = P + Q, phi = e (P - Q)/D and kappa = sum of e^2 4 P Q / D, where P and Q are dual over slack of the upper
and lower limits and e is the stretch of each row. The first is solved as the least squares that it is of
(`weighted_squares`), whose residuals are the changes of slacks and columns.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.numerics.weighted_squares import WeightedSquares

__all__ = ["Gaps", "Point", "Problem", "improved", "start", "value_and_bound"]

Real = NDArray[np.float64]

BACK_OFF = 0.995
"""Share of the way to the nearest zero that a step takes at most."""


@dataclass(frozen=True, eq=False, kw_only=True)
class Point:
    """x >= 0 with its duals `spare`; t; slacks below the upper and above the lower limit with their duals.

    Slack and dual of a limit that is not there are 1 and 0.
    """

    x: Real
    spare: Real
    t: float
    below: Real
    from_upper: Real
    above: Real
    from_lower: Real


class Problem:
    """minimise cost . x + t with lower - t e <= A x <= upper + t e; e None: no t."""

    def __init__(self, *, matrix: Real, lower: Real, upper: Real, cost: Real, stretch: Real | None) -> None:
        self.squares = WeightedSquares(matrix)
        self.has_lower, self.has_upper = np.isfinite(lower), np.isfinite(upper)
        self.lower = np.where(self.has_lower, lower, 0.0)
        self.upper = np.where(self.has_upper, upper, 0.0)
        self.cost = cost
        self.with_stretch = stretch is not None
        self.stretch = np.zeros(len(lower)) if stretch is None else stretch
        self.limits = int(np.sum(self.has_lower)) + int(np.sum(self.has_upper)) + len(cost)

    def gaps(self, point: Point) -> Gaps:
        """What every condition misses at the point."""
        value = self.squares.of_columns(point.x)
        below = self.upper + point.t * self.stretch - value - point.below
        above = value - self.lower + point.t * self.stretch - point.above
        weight = 1.0 - float(self.stretch @ (point.from_lower + point.from_upper))
        return Gaps(
            below=np.where(self.has_upper, below, 0.0),
            above=np.where(self.has_lower, above, 0.0),
            spare=self.cost - self.squares.of_rows(point.from_lower - point.from_upper) - point.spare,
            weight=weight if self.with_stretch else 0.0,
        )


@dataclass(frozen=True, eq=False, kw_only=True)
class Gaps:
    """What slacks below the upper and above the lower limits, and duals of x, should be less what they are;
    one less the duals over the stretch."""

    below: Real
    above: Real
    spare: Real
    weight: float

    def missing(self, point: Point) -> float:
        """All of it in units of the value."""
        primal = np.abs(self.below) @ point.from_upper + np.abs(self.above) @ point.from_lower
        dual = np.abs(self.spare) @ point.x + abs(self.weight) * abs(point.t)
        return float(primal + dual)


def value_and_bound(problem: Problem, point: Point) -> tuple[float, float]:
    """Of the programme and of its dual: equal at the solution."""
    value = float(problem.cost @ point.x) + (point.t if problem.with_stretch else 0.0)
    return value, float(problem.lower @ point.from_lower - problem.upper @ point.from_upper)


def start(problem: Problem) -> Point:
    """Columns from least squares, moved off zero; slacks and duals of one size."""
    middle = np.where(problem.has_lower, problem.lower, problem.upper)
    middle = np.where(problem.has_lower & problem.has_upper, (problem.lower + problem.upper) / 2, middle)
    rows, columns = problem.squares.shape
    factor = problem.squares.factored(np.ones(rows), np.ones(columns))
    x = factor.solve(middle, np.zeros(columns))[2]
    size = max(float(np.mean(np.abs(x))), 1e-6 * float(np.max(np.abs(middle))), 1e-6)
    x = np.maximum(np.abs(x), size)
    value = problem.squares.of_columns(x)
    off = np.maximum(value - problem.upper, 0) * problem.has_upper
    off = np.maximum(off, np.maximum(problem.lower - value, 0) * problem.has_lower)
    t = 1.5 * float(np.max(off)) + 1.0 if problem.with_stretch else 0.0
    below = np.maximum(problem.upper + t * problem.stretch - value, 1.0)
    above = np.maximum(value - problem.lower + t * problem.stretch, 1.0)
    weight = 1 / (float(np.sum(problem.stretch * (1.0 * problem.has_lower + problem.has_upper))) or 1.0)
    level = weight * t if problem.with_stretch else max(float(np.mean(np.abs(problem.cost) * x)), 1e-12)
    return Point(
        x=x,
        spare=level / x,
        t=t,
        below=np.where(problem.has_upper, below, 1.0),
        from_upper=np.where(problem.has_upper, level / below, 0.0),
        above=np.where(problem.has_lower, above, 1.0),
        from_lower=np.where(problem.has_lower, level / above, 0.0),
    )


@dataclass(frozen=True, eq=False, kw_only=True)
class _Step:
    x: Real
    spare: Real
    t: float
    below: Real
    from_upper: Real
    above: Real
    from_lower: Real


def improved(problem: Problem, point: Point, gaps: Gaps) -> Point:
    """The next point: a predictor step tells how far to aim, a corrector step goes there."""
    newton = _Newton(problem, point, gaps)
    pairs = (point.x * point.spare, point.below * point.from_upper, point.above * point.from_lower)
    now = _level(problem, point)
    aim = newton.step(-pairs[0], -pairs[1], -pairs[2])
    then = _level(problem, _moved(point, aim, *_lengths(point, aim, 1.0)))
    centre = (then / now) ** 3 * now
    step = newton.step(
        centre - pairs[0] - aim.x * aim.spare,
        np.where(problem.has_upper, centre - pairs[1] - aim.below * aim.from_upper, 0.0),
        np.where(problem.has_lower, centre - pairs[2] - aim.above * aim.from_lower, 0.0),
    )
    return _moved(point, step, *_lengths(point, step, BACK_OFF))


def _level(problem: Problem, point: Point) -> float:
    total = point.x @ point.spare + point.below @ point.from_upper + point.above @ point.from_lower
    return float(total) / problem.limits


class _Newton:
    """The linear system at a point, factored once for predictor and corrector."""

    def __init__(self, problem: Problem, point: Point, gaps: Gaps) -> None:
        self.problem, self.point, self.gaps = problem, point, gaps
        self.of_upper = point.from_upper / point.below
        self.of_lower = point.from_lower / point.above
        both = self.of_upper + self.of_lower
        self.both = both
        self.ratio = point.x / point.spare
        self.factor = problem.squares.factored(both, self.ratio)
        if problem.with_stretch:
            pull = problem.stretch * (self.of_upper - self.of_lower)
            self.lean = pull / both
            self.leaning = self.factor.solve(pull, np.zeros_like(point.x))
            stiff = float(np.sum(problem.stretch**2 * 4 * self.of_upper * self.of_lower / both))
            self.border = stiff + float(self.lean @ self.leaning[0])

    def step(self, of_x: Real, of_below: Real, of_above: Real) -> _Step:
        """Towards products x spare + of_x, below from_upper + of_below, above from_lower + of_above."""
        problem, point = self.problem, self.point
        below, above, spare, weight = self.gaps.below, self.gaps.above, self.gaps.spare, self.gaps.weight
        upper = (of_below - point.from_upper * below) / point.below
        lower = (of_above - point.from_lower * above) / point.above
        change, moved, dx = self.factor.solve(lower - upper, spare - of_x / point.x)
        dt = 0.0
        if problem.with_stretch:
            right = float(problem.stretch @ (upper + lower)) - weight + float(self.lean @ (lower - upper))
            dt = (right - float(self.lean @ change)) / self.border
            change, moved, dx = (a + b * dt for a, b in zip((change, moved, dx), self.leaning, strict=True))
        d_below = np.where(problem.has_upper, below - moved + dt * problem.stretch, 0.0)
        d_above = np.where(problem.has_lower, above + moved + dt * problem.stretch, 0.0)
        return _Step(
            x=dx,
            spare=spare - problem.squares.of_rows(change),
            t=dt,
            below=d_below,
            from_upper=(of_below - point.from_upper * d_below) / point.below,
            above=d_above,
            from_lower=(of_above - point.from_lower * d_above) / point.above,
        )


def _lengths(point: Point, step: _Step, share: float) -> tuple[float, float]:
    """How far primal and dual may go and stay above zero."""
    primal = min(_room(point.x, step.x), _room(point.below, step.below), _room(point.above, step.above))
    dual = min(
        _room(point.spare, step.spare),
        _room(point.from_upper, step.from_upper),
        _room(point.from_lower, step.from_lower),
    )
    return min(1.0, share * primal), min(1.0, share * dual)


def _room(value: Real, step: Real) -> float:
    falling = step < 0
    return float(np.min(-value[falling] / step[falling], initial=np.inf))


def _moved(point: Point, step: _Step, primal: float, dual: float) -> Point:
    return replace(
        point,
        x=point.x + primal * step.x,
        spare=point.spare + dual * step.spare,
        t=point.t + primal * step.t,
        below=point.below + primal * step.below,
        from_upper=point.from_upper + dual * step.from_upper,
        above=point.above + primal * step.above,
        from_lower=point.from_lower + dual * step.from_lower,
    )
