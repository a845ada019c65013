"""Bounds tightened with real chi = n^2 - 1, where a material is transparent.

Im chi = 2 n k >= 0 with Re n > 0 is more than k >= 0: chi itself is then a sum over absorption outside the band,
and the rows of n are rows of chi, |n +- u|^2 - 1. (Inside absorption chi is not real, and this is false.) With
X_m the derivatives of chi and N + delta those of n, N the middle of what is known,

    X_m = sum_j binomial(m, j) n_j n_(m-j)    (less 1 for m = 0)

is exactly X_m(N) + (L delta)_m + Q_m(delta) with L triangular and Q the same sum over delta. So any
combination w . delta = (w L^-1) . (X - X(N)) - (w L^-1) . Q(delta): a functional linear in chi, and a remainder
of second order that the bounds known already confine.
"""

from __future__ import annotations

from dataclasses import replace
from math import comb

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.bounds_functionals import ORDERS
from pulseprop.causality.passive_data import PassiveData

__all__ = ["Squared", "squared_rows"]

Real = NDArray[np.float64]
Interval = tuple[float, float]


def squared_rows(data: PassiveData) -> PassiveData | None:
    """The same rows with chi for n - 1; None where an index may not be above 0."""
    low, high = data.index - data.index_error, data.index + data.index_error
    if np.any(low <= 0):
        return None
    strength = data.knowledge.strength
    return replace(
        data,
        index=(low**2 + high**2) / 2,
        index_error=(high**2 - low**2) / 2,
        knowledge=replace(data.knowledge, strength=None if strength is None else 2 * strength),
    )


class Squared:
    """weights: of n - 1 and its derivatives in each quantity, (quantities, ORDERS), lower triangular.

    intervals: of the quantities, as known.
    """

    def __init__(self, weights: Real, intervals: list[Interval]) -> None:
        ends = np.array(intervals)
        self.middle = np.mean(ends, axis=1)
        self.room = (ends[:, 1] - ends[:, 0]) / 2
        self.back = np.linalg.inv(weights)
        derivatives = self.back @ self.middle + ONE
        self.of_chi = np.linalg.inv(2 * np.tensordot(PRODUCTS, derivatives, axes=1) @ self.back)
        """Weights of chi and its derivatives in each quantity, to first order."""
        self.chi = derivatives @ PRODUCTS @ derivatives - ONE

    def interval(self, quantity: int, of_chi: Interval) -> Interval:
        """Of the quantity, from that of its combination of chi and its derivatives."""
        combination = self.of_chi[quantity]
        offset = self.middle[quantity] - combination @ self.chi
        least, most = self._remainder(combination)
        return of_chi[0] + offset - most, of_chi[1] + offset - least

    def _remainder(self, combination: Real) -> Interval:
        """Of combination . Q, the quantities within their room: squares have one sign, other products both."""
        form = self.back.T @ np.tensordot(combination, PRODUCTS, axes=1) @ self.back
        form = form * np.outer(self.room, self.room)
        squares = np.diag(form)
        either = float(np.sum(np.abs(form)) - np.sum(np.abs(squares)))
        return float(np.sum(np.minimum(squares, 0))) - either, float(np.sum(np.maximum(squares, 0))) + either


def _products() -> Real:
    """Matrices of the quadratic forms X_m + (m = 0): binomial(m, j) at (j, m - j)."""
    forms = np.zeros((ORDERS, ORDERS, ORDERS))
    for m in range(ORDERS):
        for j in range(m + 1):
            forms[m, j, m - j] = comb(m, j)
    return forms


PRODUCTS = _products()
ONE = np.eye(ORDERS)[0]
