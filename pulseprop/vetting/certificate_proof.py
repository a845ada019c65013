"""A few printed numbers against all passive causal materials: can they be true together, what do they imply.

Each number is one row, linear in the masses (see `certificate_functionals`), which stand outside a
transparent band, at 0 and at infinity included. The least factor t with |row - value| <= t error is a
linear programme; so are the least and the greatest value of any further row. Masses are added where the
programme's own prices say that one would help, until none on the continuous axis does.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import NumericalLimit
from pulseprop.vetting.certificate_functionals import Term, constant_values, values

__all__ = ["KnownRow", "LeastFactor", "Printed"]

Real = NDArray[np.float64]
Interval = tuple[float, float]

NEAREST, FARTHEST = -7.0, 4.0
"""Decades of distance from the band, in units of its end, within which masses are tried; beyond: infinity."""
COARSE, FINE = 260, 4000
"""Places tried a side at first, and when looking where another would help."""
ROUNDS = 12
HELPS = 1e-6
"""A mass that betters a programme by less, per unit of its largest entry, is left out."""
RATIO_ROUNDS = 30
RATIO_ERROR = 1e-9
NO_LEAST = (2, 3)
"""The solver's words for a programme that is infeasible, or unbounded."""


@dataclass(frozen=True, kw_only=True)
class KnownRow:
    """sum of terms = value within error (above 0), SI."""

    terms: tuple[Term, ...]
    value: float
    error: float


@dataclass(frozen=True, kw_only=True, eq=False)
class LeastFactor:
    """factor, and the material that reaches it: constant, and masses at places. weights: of the rows in the
    proof, their sizes times the errors adding up to 1; empty where the factor is 0."""

    factor: float
    constant: float
    places: Real
    masses: Real
    weights: Real

    def value(self, terms: Sequence[Term]) -> float:
        """Of the material."""
        return self.constant * constant_values(terms) + float(values(terms, self.places) @ self.masses)


@dataclass(frozen=True, kw_only=True, eq=False)
class _Optimum:
    """x: of the columns, each divided by its size. prices: of the rows value + ..., less those of the rows
    with the other sign."""

    x: Real
    size: Real
    least: float
    prices: Real


class Printed:
    """Rows that are known, and the transparent band low to high, rad/s."""

    def __init__(self, rows: Sequence[KnownRow], band: Interval) -> None:
        self.rows, self.band = tuple(rows), band
        self._error = np.array([row.error for row in rows])
        self._value = np.array([row.value for row in rows]) / self._error
        self._places = np.concatenate(_sides(band, COARSE))
        self._fine = np.concatenate(_sides(band, FINE))
        self._fine_rows = self._rows_at(self._fine)

    @cached_property
    def least_factor(self) -> LeastFactor:
        """The least factor of the errors. Raises NumericalLimit where the solver gives no answer."""
        found = self._optimum(None, None)
        if found is None:
            raise NumericalLimit(
                "no least factor of the printed numbers was found",
                remedy="Look at the findings of each number alone: one is far from any material's",
            )
        x = found.x[:-1] / found.size
        return LeastFactor(
            factor=max(found.least, 0.0),
            constant=float(x[0]),
            places=self._places,
            masses=np.asarray(x[1:]),
            weights=np.asarray(-found.prices / self._error),
        )

    def interval(self, terms: Sequence[Term], factor: float) -> Interval | None:
        """Least and greatest value of the terms with all errors enlarged by the factor, which is at least
        the least one; None where there is no limit on a side."""
        low = self._least(terms, factor)
        high = self._least(_times(terms, -1.0), factor)
        return None if low is None or high is None else (low, -high)

    def ratio_interval(self, above: Sequence[Term], below: Sequence[Term], factor: float) -> Interval | None:
        """Least and greatest value of above/below; None where below is not kept above 0.

        Dinkelbach's iteration: with the least ratio r the least value of above - r below is 0.
        """
        size = self.interval(below, factor)
        if size is None or size[0] <= 0:
            return None
        ends = [self._least_ratio(_times(above, sign), below, size, factor) for sign in (1.0, -1.0)]
        low, high = ends
        return None if low is None or high is None else (low, -high)

    def _least_ratio(
        self, above: Sequence[Term], below: Sequence[Term], size: Interval, factor: float
    ) -> float | None:
        start = self.least_factor.value(below)
        if start <= 0:
            return None
        ratio = self.least_factor.value(above) / start
        for _ in range(RATIO_ROUNDS):
            least = self._least((*above, *_times(below, -ratio)), factor)
            if least is None:
                return None
            if abs(least) <= RATIO_ERROR * size[0] * abs(ratio):
                break
            ratio += least / size[1]
        else:
            return None
        return ratio + min(least, 0.0) / size[0]

    def _least(self, terms: Sequence[Term], factor: float) -> float | None:
        found = self._optimum(terms, factor)
        return None if found is None else found.least

    def _optimum(self, terms: Sequence[Term] | None, factor: float | None) -> _Optimum | None:
        """The least value of the terms, or without a factor the least factor; None where there is none."""
        for _ in range(ROUNDS):
            rows = self._rows_at(self._places)
            size = np.max(np.abs(rows), axis=0)
            size[size == 0] = 1.0  # the constant, where only orders are known
            cost = _cost(terms, self._places) / size
            scale = float(np.max(np.abs(cost))) or 1.0
            found = self._programme(rows / size, cost / scale, factor)
            if found is None:
                return None
            x, least, prices = found
            more = self._helpful(terms, prices, scale)
            if not len(more):
                break
            self._places = np.union1d(self._places, more)
        return _Optimum(x=x, size=size, least=least * scale, prices=prices)

    def _programme(self, rows: Real, cost: Real, factor: float | None) -> tuple[Real, float, Real] | None:
        """Solution, value and prices; None where it is infeasible or has no least value."""
        from scipy.optimize import linprog

        matrix, limit = np.vstack([rows, -rows]), np.append(self._value, -self._value)
        if factor is None:
            matrix, cost = np.hstack([matrix, -np.ones((len(matrix), 1))]), np.append(cost, 1.0)
        solved = linprog(cost, A_ub=matrix, b_ub=limit + (factor or 0.0), method="highs")
        if solved.status in NO_LEAST:
            return None
        if solved.status != 0:
            raise NumericalLimit(
                "the linear programme of the printed numbers was not solved", value=solved.message
            )
        prices = np.asarray(solved.ineqlin.marginals)
        return np.asarray(solved.x), float(solved.fun), prices[: len(rows)] - prices[len(rows) :]

    def _rows_at(self, places: Real) -> Real:
        """Rows over their errors, of the constant and of unit masses, (rows, 1 + places)."""
        rows = np.array([_cost(row.terms, places) for row in self.rows])
        return np.asarray(rows / self._error[:, None])

    def _helpful(self, terms: Sequence[Term] | None, prices: Real, scale: float) -> Real:
        """Places where another mass would better the programme: the lowest points of its reduced cost."""
        rows, cost = self._fine_rows[:, 1:], _cost(terms, self._fine)[1:] / scale
        reduced = (cost - prices @ rows) / np.max(np.abs(rows), axis=0)
        padded = np.pad(reduced, 1, constant_values=np.inf)
        low = (reduced <= padded[:-2]) & (reduced <= padded[2:]) & (reduced < -HELPS)
        return np.asarray(np.setdiff1d(self._fine[low], self._places))


def _cost(terms: Sequence[Term] | None, places: Real) -> Real:
    """Of the constant and of unit masses, (1 + places,)."""
    if terms is None:
        return np.zeros(1 + len(places))
    return np.append(constant_values(terms), values(terms, places))


def _times(terms: Sequence[Term], factor: float) -> list[Term]:
    return [replace(term, weight=factor * term.weight) for term in terms]


def _sides(band: Interval, count: int) -> tuple[Real, Real]:
    """Places below and above the band, ascending, dense towards it."""
    low, high = band
    below = low * (1 - np.geomspace(1.0, 10.0**NEAREST, count))
    above = high * (1 + np.geomspace(10.0**NEAREST, 10.0**FARTHEST, count))
    return below, above
