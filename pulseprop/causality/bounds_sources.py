"""Intervals of all quantities at a frequency, from the class of materials that the data allow."""

from __future__ import annotations

from contextlib import suppress
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.bounds_functionals import ORDERS, quantity_weights
from pulseprop.causality.bounds_materials import Materials
from pulseprop.causality.bounds_programme import Proofs
from pulseprop.causality.bounds_squared import Squared, index_of_chi, squared_rows
from pulseprop.causality.passive_class import Masses, PassiveClass
from pulseprop.causality.passive_data import PassiveData
from pulseprop.errors import NumericalLimit

__all__ = ["Absorbing", "Source", "Transparent"]

Real = NDArray[np.float64]

GIVEN_AWAY = 3e-3
"""Share of the width that each end may lie outside the best material found."""
REMAINDER = 6e-3
"""Share of the width that the remainder of second order may take; else the middle is taken again."""
TIMES = 3


class Source(Protocol):
    """unit: frequency in which everything here counts, rad/s."""

    unit: float

    def intervals(self, omega: float) -> Real:
        """Of the `QUANTITIES` less 1 or times c, at omega in units: (quantities, 2), NaN where not proven."""
        ...


class Absorbing:
    """Rows of k as well as of n: linear programmes in k, for the first `count` quantities.

    known: masses of a material within the uncertainties, where one is known.

    Raises NumericalLimit where no material has the numbers, or they do not limit what absorbs outside them.
    """

    def __init__(self, data: PassiveData, count: int, known: Masses | None) -> None:
        passive = PassiveClass(data)
        self.unit, self.count = passive.unit, count
        materials = Materials(passive)
        self.proofs = Proofs(materials, None if known is None else materials.places(known))

    def intervals(self, omega: float) -> Real:
        """See `Source`."""
        weights = quantity_weights(omega)
        return _intervals(self.proofs, omega, weights, np.arange(len(weights)) < self.count)


class Transparent:
    """Rows of n alone: linear programmes in chi, and in k where chi does not do as well.

    Raises NumericalLimit as `Absorbing`.
    """

    def __init__(self, data: PassiveData) -> None:
        self._passive = PassiveClass(data)
        self.unit = self._passive.unit
        self._in_chi = _proofs_in_chi(data)
        self._in_k = Proofs(Materials(self._passive)) if self._in_chi is None else None

    def intervals(self, omega: float) -> Real:
        """See `Source`."""
        weights = quantity_weights(omega)
        known = np.full((len(weights), 2), np.nan)
        open_ones = np.ones(len(weights), dtype=bool)
        if self._in_chi is not None:
            known, open_ones = _intervals_in_chi(self._in_chi, omega, weights)
        if np.any(open_ones):
            with suppress(NumericalLimit):  # what chi proves stays so
                self._in_k = self._in_k or Proofs(Materials(self._passive))
                known = _common(known, _intervals(self._in_k, omega, weights, open_ones))
        return known


def _proofs_in_chi(data: PassiveData) -> Proofs | None:
    """None where an index may not be positive, or no chi is left: the data are at the limit."""
    rows = squared_rows(data)
    try:
        return None if rows is None else Proofs(Materials(PassiveClass(rows)))
    except NumericalLimit:
        return None


def _intervals_in_chi(proofs: Proofs, omega: float, weights: Real) -> tuple[Real, NDArray[np.bool_]]:
    """With True where the remainder of second order takes too much."""
    open_ones = np.ones(len(weights), dtype=bool)
    known, room = np.full((len(weights), 2), np.nan), None
    orders = [proofs.materials.functional(omega, row) for row in np.eye(ORDERS)]
    squared = Squared(weights, weights @ index_of_chi(proofs.of_material(orders)))
    for _ in range(TIMES):
        linear = squared.linear(_intervals(proofs, omega, squared.of_chi, open_ones))
        room = squared.settled(linear) if room is None else room
        if room is None:
            break
        known = _common(known, squared.intervals(linear, room))
        open_ones = open_ones & ~(squared.shares(linear, room) <= REMAINDER)
        if not np.any(open_ones):
            break
        squared, room = Squared(weights, np.mean(known, axis=1)), np.diff(known, axis=1)[:, 0] / 2
    return known, open_ones


def _intervals(proofs: Proofs, omega: float, weights: Real, wanted: NDArray[np.bool_]) -> Real:
    """Of the wanted functionals, NaN for the others and where no proof is found: (functionals, 2)."""
    found = np.full((len(weights), 2), np.nan)
    for i in np.flatnonzero(wanted):
        try:
            found[i] = proofs.interval(proofs.materials.functional(omega, weights[i]), GIVEN_AWAY)
        except NumericalLimit:
            continue
    return found


def _common(one: Real, other: Real) -> Real:
    """What both allow; the first where there is nothing of the other, or rounding has parted them."""
    both = np.stack((np.fmax(one[:, 0], other[:, 0]), np.fmin(one[:, 1], other[:, 1])), axis=1)
    return np.where((both[:, :1] > both[:, 1:]), one, both)
