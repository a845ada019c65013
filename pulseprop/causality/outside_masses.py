"""Absorption on one side of the rows, as point masses anywhere there: columns, and where weights favour them.

A mass at the distance S (in s = omega^2) beyond the outermost row of n changes the rows by

    +S / (S + a)  above,    -S / (S + a)  below,

with a the distance of each row of n from that outermost row, and the mass pi S in units of which the greatest
change is 1. S = 0 is the end row alone, moved freely; S = inf is the constant. On the logarithm of S these
are logistic curves: they have no structure finer than the grid used here (their spectrum falls as
exp(-pi k)), so the favoured places of a weighting are found for certain.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

__all__ = ["Side", "without"]

Real = NDArray[np.float64]

STEP = 1 / 8
"""Of the logarithm of S on the grid."""
BEYOND = 18.0
"""Logarithm by which the grid goes on beyond the least and the greatest a."""
NEWTON = 8
"""Steps from between the neighbours of a grid maximum to the true one."""


@dataclass(frozen=True, eq=False, kw_only=True)
class Side:
    """sign: +1 above the rows, -1 below. end: the outermost row of n, a frequency. away: a of each row, (R,),
    0 or more. allowed: (least, greatest) S of each stretch where masses may lie."""

    sign: int
    end: float
    away: Real
    allowed: tuple[tuple[float, float], ...]

    def columns(self, distance: Real) -> Real:
        """Change of the rows by a unit mass at each distance: (R, places)."""
        return _share(self.away[:, None], distance) * self.sign

    def elsewhere(self, omega: Real, distance: Real) -> Real:
        """The same change of the index at any frequencies: (frequencies, places)."""
        away = (self.end - omega) * (self.end + omega) * self.sign
        return _share(away[:, None], distance) * self.sign

    def weighed(self, weights: Real, distance: Real) -> Real:
        """weights . column at each distance, (places,)."""
        return np.asarray(weights @ self.columns(distance))

    @cached_property
    def grid(self) -> tuple[Real, ...]:
        """Places on each allowed stretch, ascending, both ends among them."""
        return tuple(_places(self.away, low, high) for low, high in self.allowed)

    @cached_property
    def _table(self) -> tuple[Real, ...]:
        return tuple(self.columns(places) for places in self.grid)

    def on_grid(self, weights: Real) -> list[tuple[Real, Real]]:
        """(places, weights . column there) of each stretch."""
        return [
            (places, np.asarray(weights @ table))
            for places, table in zip(self.grid, self._table, strict=True)
        ]

    def favoured(self, weights: Real, price: float) -> tuple[Real, Real]:
        """Places at which weights . column - price S is locally greatest, and it there."""
        places = [np.zeros(0)]
        for at, value in self.on_grid(weights):
            top = _tops(value - _cost(price, at))
            places.append(self._refined(weights, price, at, top))
        place = np.concatenate(places)
        return place, self.weighed(weights, place) - _cost(price, place)

    def _refined(self, weights: Real, price: float, at: Real, top: NDArray[np.intp]) -> Real:
        """Newton on the logarithm of S, between the neighbours on the grid; 0 and inf stay where they are."""
        before, after = at[np.maximum(top - 1, 0)], at[np.minimum(top + 1, len(at) - 1)]
        moves = (before > 0) & np.isfinite(after)
        low, high = np.log(before[moves]), np.log(after[moves])
        x = (low + high) / 2
        for _ in range(NEWTON):
            share = _share(self.away[:, None], np.exp(x))
            curve = share * (1 - share)
            cost = price * np.exp(x)
            slope = self.sign * (weights @ curve) - cost
            bend = self.sign * (weights @ (curve * (1 - 2 * share))) - cost
            x = np.clip(x - slope / np.where(bend < 0, bend, -np.inf), low, high)
        return np.concatenate((at[top], np.exp(x)))


def _cost(price: float, distance: Real) -> Real:
    return price * distance if price > 0 else np.zeros_like(distance)


def _share(away: Real, distance: Real) -> Real:
    """S/(S + a) with its limits: 1 at S = inf, and at S = 0 = a."""
    far = np.isinf(distance)
    size = np.where(far, 1.0, distance)
    total = size + np.where(far, 0.0, away)
    alone = (total == 0) & (size == 0)
    return np.asarray(np.where(alone, 1.0, size / np.where(alone, 1.0, total)))


def _places(away: Real, low: float, high: float) -> Real:
    scales = away[away > 0]
    least, most = (np.min(scales), np.max(scales)) if len(scales) else (1.0, 1.0)
    start = max(np.log(least) - BEYOND, np.log(low) if low > 0 else -np.inf)
    stop = min(np.log(most) + BEYOND, np.log(high))
    inner = np.exp(np.arange(start, stop, STEP))
    inner = inner[(inner > low) & (inner < high)]
    return np.concatenate(([low], inner, [high]))


def _tops(values: Real) -> NDArray[np.intp]:
    """Indices of local maxima, ends included."""
    padded = np.concatenate(([-np.inf], values, [-np.inf]))
    return np.flatnonzero((padded[1:-1] >= padded[:-2]) & (padded[1:-1] > padded[2:]))


def without(low: float, high: float, taken: tuple[float, float] | None) -> tuple[tuple[float, float], ...]:
    """low..high less the stretch that is taken."""
    if taken is None:
        return ((low, high),)
    parts = ((low, min(high, taken[0])), (max(low, taken[1]), high))
    return tuple(part for part in parts if part[0] < part[1])
