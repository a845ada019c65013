"""Bounds in real chi = n^2 - 1, where a material is transparent.

Im chi = 2 n k >= 0 with Re n > 0 is more than k >= 0: chi itself is then a sum over absorption outside the
band, and the rows of n are rows of chi, between (n - u)^2 - 1 and (n + u)^2 - 1. (Inside absorption chi is
not real, and this is false.) With X the derivatives of chi, N + delta those of n near some N, and

    X_m = sum_j binomial(m, j) n_j n_(m-j)    (less 1 for m = 0),

X is exactly X(N) + L delta + Q(delta), L triangular and Q the same sum over delta. So any combination of n
and its derivatives, w . delta = (w / L) . (X - X(N)) - (w / L) . Q(delta), is a functional linear in chi and
a remainder of second order.
"""

from __future__ import annotations

from dataclasses import replace
from math import comb

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.bounds_functionals import ORDERS
from pulseprop.causality.passive_data import PassiveData

__all__ = ["Squared", "index_of_chi", "squared_rows"]

Real = NDArray[np.float64]

FARTHEST, SPARE = 4.0, 1.02
"""A room is looked for up to so many times the linear part, each time with a little to spare."""


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

    middle: of the quantities, any values near those that the materials have. of_chi: weights of chi and its
    derivatives in each quantity, to first order.
    """

    def __init__(self, weights: Real, middle: Real) -> None:
        self.middle, self._back = middle, np.linalg.inv(weights)
        index = self._back @ middle + ONE
        self._chi = index @ PRODUCTS @ index - ONE
        self.of_chi = np.linalg.inv(2 * np.tensordot(PRODUCTS, index, axes=1) @ self._back)

    def linear(self, found: Real) -> Real:
        """Intervals (quantities, 2) of the distances from the middle to first order, from those of of_chi."""
        return np.asarray(found - (self.of_chi @ self._chi)[:, None])

    def settled(self, linear: Real) -> Real | None:
        """How far the quantities can be from the middle, where one of the materials has them: (quantities,).

        The materials are a connected set. If within some room the linear part and the remainder stay strictly
        inside it, no material can have left it. None where no such room is found.
        """
        first = np.max(np.abs(linear), axis=1)
        room = first
        while np.all(room < FARTHEST * first):
            needed = np.max(np.abs(self._with_remainder(linear, room)), axis=1)
            if np.all(needed < room):
                return np.asarray(room)
            room = SPARE * needed
        return None

    def intervals(self, linear: Real, room: Real) -> Real:
        """Of the quantities, (quantities, 2), no material having them further than room from the middle."""
        return self._with_remainder(linear, room) + self.middle[:, None]

    def shares(self, linear: Real, room: Real) -> Real:
        """Of the width of each interval, what the remainder takes."""
        whole = np.diff(self._with_remainder(linear, room), axis=1)[:, 0]
        return np.asarray(1 - np.diff(linear, axis=1)[:, 0] / whole)

    def _with_remainder(self, linear: Real, room: Real) -> Real:
        """Squares in Q have one sign, other products both."""
        forms = self._back.T @ np.tensordot(self.of_chi, PRODUCTS, axes=1) @ self._back
        forms = forms * np.outer(room, room)
        squares = np.diagonal(forms, axis1=1, axis2=2)
        either = np.sum(np.abs(forms), axis=(1, 2)) - np.sum(np.abs(squares), axis=1)
        least = np.sum(np.minimum(squares, 0), axis=1) - either
        most = np.sum(np.maximum(squares, 0), axis=1) + either
        return np.stack((linear[:, 0] - most, linear[:, 1] - least), axis=1)


def index_of_chi(chi: Real) -> Real:
    """n - 1 and its derivatives from chi and its derivatives, (ORDERS,)."""
    index = np.zeros(ORDERS)
    index[0] = np.sqrt(1 + chi[0])
    for m in range(1, ORDERS):
        index[m] = (chi[m] - index @ PRODUCTS[m] @ index) / (2 * index[0])
    return np.asarray(index - ONE)


def _products() -> Real:
    """Matrices of the quadratic forms X_m + (m = 0): binomial(m, j) at (j, m - j)."""
    forms = np.zeros((ORDERS, ORDERS, ORDERS))
    for m in range(ORDERS):
        for j in range(m + 1):
            forms[m, j, m - j] = comb(m, j)
    return forms


PRODUCTS = _products()
ONE = np.eye(ORDERS)[0]
