"""The class of passive causal materials that data are held against, as columns of linear programmes.

    n + i k - 1 = constant + (1/pi) PV int k(s) / (s - omega^2) ds,   s = omega'^2,   constant, k >= 0

Beyond the rows k is any non-negative measure: point masses from 0 to the first row and from the last row to
infinity, ends included (`outside_masses`). Between them k is 0 where only n is given, and where k is given a
cubic spline of non-negative B-splines with knots at the rows of k, which runs on smoothly past both ends; its
uncertainty is joined by what the rows leave open.

Frequencies are in units of the highest row.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.outside_masses import Side, without
from pulseprop.causality.passive_data import PassiveData
from pulseprop.numerics.knots import between_rows, outside_knots
from pulseprop.numerics.spline_basis import basis_pieces, basis_spans, basis_transforms, basis_values

__all__ = ["Masses", "PassiveClass", "Splines"]

Real = NDArray[np.float64]

TAILS = 3
"""Knots outside the rows that a B-spline reaches from within."""
CLOSE = 10.0
"""Factor about the distances of the rows within which every place of the grid is a first choice, and"""
COARSE = 4
"""grid places from one to the next beyond."""
END_OF_SUPPORT = 1e-15
"""A spline of no more than this at a row ends there: it is 0, but for rounding."""


@dataclass(frozen=True, eq=False)
class Masses:
    """Distances in s = omega^2 of point masses beyond the outermost row of n, highest frequency 1."""

    below: Real
    above: Real

    def __len__(self) -> int:
        return len(self.below) + len(self.above)

    def strengths(self) -> Real:
        """Integral of k over s of a unit of each, those below first; inf for the constant."""
        return np.pi * np.concatenate((self.below, self.above))

    def joined(self, other: Masses) -> Masses:
        """Both, each place once."""
        return Masses(np.union1d(self.below, other.below), np.union1d(self.above, other.above))


@dataclass(frozen=True, eq=False)
class Splines:
    """B-splines of k: knots in units of the highest frequency; pieces (knots - 1, 4, splines) as of
    `spline_basis.basis_pieces`."""

    knots: Real
    pieces: Real

    def strengths(self) -> Real:
        """Integral over s = w^2 of each: 2 w dw over its pieces."""
        spans, power = basis_spans(self.pieces), np.arange(1, 5)
        piece = np.arange(len(spans))[:, None] + np.arange(spans.shape[1])
        left, length = self.knots[piece], np.diff(self.knots)[piece]
        inner = left * (spans @ (1 / power)) + length * (spans @ (1 / (power + 1)))
        return np.asarray(2 * np.sum(length * inner, axis=1))


class PassiveClass:
    """Columns of the class on the rows of data: those of n, then those of k.

    unit: highest frequency of the rows, rad/s. rows, k_rows: frequencies over it, (R,), (K,). target, error:
    (R + K,), index - 1 and k with what the class lets them miss. least: (R + K,), True for lower limits.
    sides: below, above. limit: largest strength in units of unit squared, None where unlimited.
    """

    def __init__(self, data: PassiveData) -> None:
        self.data = data
        none = np.zeros(0)
        k_omega, k, k_error = (none if c is None else c for c in (data.k_omega, data.k, data.k_error))
        self.unit = float(np.max(np.concatenate((data.omega, k_omega))))
        self.rows, self.k_rows = data.omega / self.unit, k_omega / self.unit
        self.target = np.concatenate((data.index - 1, k))
        joined = k_error + between_rows(self.k_rows, k) if len(k) else none
        self.error = np.concatenate((data.index_error, joined))
        lower_only = np.zeros(len(k), dtype=bool) if data.least is None else data.least
        self.least = np.concatenate((np.zeros(len(self.rows), dtype=bool), lower_only))
        strength = data.knowledge.strength
        self.limit = None if strength is None else strength / self.unit**2
        self.splines = self._splines() if len(k) else None
        self.sides = self._sides()

    def _splines(self) -> Splines:
        below, above = outside_knots(self.k_rows)
        knots = np.concatenate((below[-1 - TAILS : -1], self.k_rows, above[1 : 1 + TAILS]))
        return Splines(knots, basis_pieces(knots))

    def _sides(self) -> tuple[Side, Side]:
        ends = np.concatenate((self.rows, self.k_rows))
        first, last = float(np.min(ends)), float(np.max(ends))
        inner, outer = (self.rows[0], self.rows[-1]) if len(self.rows) else (first, last)
        clear = self.data.knowledge.transparent
        dark = (np.inf, np.inf) if clear is None else (clear[0] / self.unit, clear[1] / self.unit)
        down = without(_squares(inner, first), inner**2, (_squares(inner, dark[1]), _squares(inner, dark[0])))
        up = without(_squares(last, outer), np.inf, (_squares(dark[0], outer), _squares(dark[1], outer)))
        return (
            Side(sign=-1, end=float(inner), away=_squares(self.rows, inner), allowed=down),
            Side(sign=1, end=float(outer), away=_squares(outer, self.rows), allowed=up),
        )

    @cached_property
    def spline_columns(self) -> Real:
        """(R + K, splines)."""
        if self.splines is None:
            return np.zeros((len(self.target), 0))
        of_index = basis_transforms(self.splines.knots, self.splines.pieces, self.rows)
        of_k = basis_values(self.splines.knots, self.splines.pieces, self.k_rows)
        of_k[of_k < END_OF_SUPPORT] = 0.0
        return np.concatenate((of_index, of_k))

    def matrix(self, masses: Masses) -> Real:
        """Columns of the splines, of the masses below and of those above: (R + K, columns)."""
        return np.concatenate((self.spline_columns, self.mass_columns(masses)), axis=1)

    def mass_columns(self, masses: Masses) -> Real:
        """Of the masses alone: (R + K, masses)."""
        columns = [
            side.columns(distance)
            for side, distance in zip(self.sides, (masses.below, masses.above), strict=True)
        ]
        return np.pad(np.concatenate(columns, axis=1), ((0, len(self.k_rows)), (0, 0)))

    def strengths(self, masses: Masses) -> Real:
        """Integral of k over s of each column, (columns,); inf for the constant."""
        of_splines = np.zeros(0) if self.splines is None else self.splines.strengths()
        return np.concatenate((of_splines, masses.strengths()))

    def first_masses(self) -> Masses:
        """A coarse choice over all allowed places, their ends among them."""
        below, above = (_first(side, self.limit is not None) for side in self.sides)
        return Masses(below, above)


def _squares(high: Any, low: Any) -> Any:
    """high^2 - low^2 without cancellation."""
    return (high - low) * (high + low)


def _first(side: Side, limited: bool) -> Real:
    """All grid places near the scales of the rows, some of those far from them, and the ends."""
    chosen = [np.zeros(0)]
    scales = side.away[side.away > 0]
    low, high = (np.min(scales), np.max(scales)) if len(scales) else (1.0, 1.0)
    for places in side.grid:
        near = (places > low / CLOSE) & (places < high * CLOSE)
        chosen.append(np.unique(np.concatenate((places[near], places[::COARSE], places[[0, -1]]))))
    every = np.concatenate(chosen)
    return every[np.isfinite(every)] if limited else every
