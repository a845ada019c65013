"""The class of passive causal materials as the programmes of bounds take it: rows between limits, columns.

Columns that are always there (splines of k, masses at the end rows and at infinity) are apart from the
continuum of masses between them. A place q of the continuum stands for a mass at the distance S beyond the
outermost row of n, |q| counted on the logarithm of S, positive above the rows and negative below.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.bounds_functionals import ORDERS, mass_derivatives, spline_derivatives
from pulseprop.causality.outside_masses import Side
from pulseprop.causality.passive_class import Masses, PassiveClass

__all__ = ["Functional", "Materials"]

Real = NDArray[np.float64]

CONSTANT = np.eye(ORDERS)[0]
"""A constant and its derivatives."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Functional:
    """fixed: of the fixed columns. continuum: of the columns at places q, (places,) to (places,)."""

    fixed: Real
    continuum: Callable[[Real], Real]

    def negative(self) -> Functional:
        """The functional with the other sign."""
        return Functional(fixed=-self.fixed, continuum=lambda q: -self.continuum(q))


class Materials:
    """Of one class.

    lower, upper: limits of the rows of n, of k and of the strength, where that is limited, (rows,). size:
    what one in each row means, above 0. fixed: (rows, columns). grid: places, ascending, with the ends of the
    stretch around each: least, most. coarse: some of them, to begin with.
    """

    def __init__(self, passive: PassiveClass) -> None:
        self.passive = passive
        limit = [] if passive.limit is None else [passive.limit]
        self.lower = np.concatenate((passive.target - passive.error, np.full(len(limit), -np.inf)))
        above = np.where(passive.least, np.inf, passive.target + passive.error)
        self.upper = np.concatenate((above, limit))
        self.size = np.concatenate((passive.error, limit))
        self._ends = [(side, _fixed_places(side, bool(limit))) for side in passive.sides]
        self.fixed = self._fixed()
        self._grid()

    def _fixed(self) -> Real:
        splines = self.passive.splines
        strengths = np.zeros(0) if splines is None else splines.strengths()
        inside = self._rows(self.passive.spline_columns, strengths)
        ends = [self._mass_rows(side, places) for side, places in self._ends]
        return np.concatenate((inside, *ends), axis=1)

    def _rows(self, columns: Real, strengths: Real) -> Real:
        return columns if self.passive.limit is None else np.vstack((columns, strengths))

    def _mass_rows(self, side: Side, distance: Real) -> Real:
        columns = np.pad(side.columns(distance), ((0, len(self.passive.k_rows)), (0, 0)))
        return self._rows(columns, np.pi * distance)

    def _grid(self) -> None:
        pieces = [
            (side.sign, places[np.isfinite(places) & (places > 0)])
            for side in self.passive.sides
            for places in side.grid
        ]
        nearest = min(float(np.min(places)) for _, places in pieces if len(places))
        self._shift = 1 - np.log(nearest)
        stretches = [np.sort(sign * (np.log(places) + self._shift)) for sign, places in pieces]
        stretches.sort(key=lambda stretch: float(stretch[0]))
        self.grid = np.concatenate(stretches)
        self.least = np.concatenate([np.append(q[:1], q[:-1]) for q in stretches])
        self.most = np.concatenate([np.append(q[1:], q[-1:]) for q in stretches])
        self.coarse = np.concatenate([np.union1d(q[::COARSE], q[[0, -1]]) for q in stretches])

    def continuum(self, q: Real) -> Real:
        """Columns of the masses at q: (rows, places)."""
        distance = np.exp(np.abs(q) - self._shift)
        below, above = self.passive.sides
        result = np.empty((len(self.lower), len(q)))
        result[:, q < 0] = self._mass_rows(below, distance[q < 0])
        result[:, q > 0] = self._mass_rows(above, distance[q > 0])
        return result

    def places(self, masses: Masses) -> Real:
        """q of these masses, those that are fixed columns left out."""
        below, above = (
            np.log(s[(s > 0) & np.isfinite(s)]) + self._shift for s in (masses.below, masses.above)
        )
        return np.concatenate((-below[::-1], above))

    def functional(self, omega: float, weights: Real) -> Functional:
        """weights: of n - 1 and its derivatives at omega, (ORDERS,), both in units of the class."""
        splines = self.passive.splines
        fixed = [np.zeros(0)]
        if splines is not None:
            fixed.append(weights @ spline_derivatives(splines.knots, splines.pieces, omega))
        fixed += [weights @ self._derivatives(side, omega, places) for side, places in self._ends]
        below, above = self.passive.sides

        def continuum(q: Real) -> Real:
            distance = np.exp(np.abs(q) - self._shift)
            result = np.empty(len(q))
            result[q < 0] = weights @ self._derivatives(below, omega, distance[q < 0])
            result[q > 0] = weights @ self._derivatives(above, omega, distance[q > 0])
            return result

        return Functional(fixed=np.concatenate(fixed), continuum=continuum)

    def _derivatives(self, side: Side, omega: float, distance: Real) -> Real:
        """Of the index that masses make: (ORDERS, places)."""
        edge = self.passive.rows[0 if side.sign < 0 else -1]
        away = side.sign * (edge - omega) * (edge + omega)
        far = np.isinf(distance)
        size = np.where(far, 1.0, distance)
        result = size * mass_derivatives(omega, side.sign * (size + away))
        result[:, far] = CONSTANT[:, None]
        return np.asarray(result)


COARSE = 4
"""Places of the grid from one mass to the next to begin with."""


def _fixed_places(side: Side, limited: bool) -> Real:
    """The ends of the continuum that have no logarithm: the end row, and infinity where nothing limits it."""
    ends = np.unique(np.array(side.allowed, dtype=np.float64).ravel())
    return np.asarray(ends[(ends == 0) | (np.isinf(ends) & (not limited))])
