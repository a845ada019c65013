"""A passive causal material of the class, to be looked at: its index and absorption at any frequency."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.least_factor import Attained
from pulseprop.causality.passive_class import PassiveClass
from pulseprop.numerics.spline_basis import basis_transforms, basis_values

__all__ = ["PassiveMaterial"]

Real = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class PassiveMaterial:
    """The material that `attained` describes by columns of `cls`."""

    cls: PassiveClass
    attained: Attained

    def index(self, omega: Real) -> Real:
        """n at omega, rad/s, (places,); inf at a line."""
        w = omega / self.cls.unit
        value = np.ones(len(w))
        splines = self.cls.splines
        if splines is not None:
            value += basis_transforms(splines.knots, splines.pieces, w) @ self._of_splines
        masses = self.attained.masses
        with np.errstate(divide="ignore"):
            for side, places, amounts in zip(
                self.cls.sides, (masses.below, masses.above), self._of_masses, strict=True
            ):
                value += side.elsewhere(w, places) @ amounts
        return value

    def k(self, omega: Real) -> Real:
        """k at omega, rad/s, (places,): lines outside the rows are infinitely narrow, and are left out."""
        splines = self.cls.splines
        value = np.zeros(len(omega))
        if splines is not None:
            w = omega / self.cls.unit
            inside = (w >= splines.knots[0]) & (w <= splines.knots[-1])
            value[inside] = basis_values(splines.knots, splines.pieces, w[inside]) @ self._of_splines
        return value

    def lines(self) -> tuple[Real, Real]:
        """Place (rad/s) and strength (integral of k over s, rad^2/s^2) of the lines outside the rows.

        The constant is a line at infinity, of infinite strength; one at the end row itself has strength 0.
        """
        cls, masses = self.cls, self.attained.masses
        below, above = cls.sides
        place = np.concatenate((below.end**2 - masses.below, above.end**2 + masses.above))
        size = np.pi * np.concatenate((masses.below, masses.above))
        amounts = np.concatenate(self._of_masses)
        held = amounts > 0
        strength = size[held] * amounts[held] * cls.unit**2
        return np.sqrt(np.maximum(place[held], 0.0)) * cls.unit, strength

    @property
    def _of_splines(self) -> Real:
        return self.attained.amounts[: self._splines]

    @property
    def _of_masses(self) -> tuple[Real, Real]:
        below, above = np.split(self.attained.amounts[self._splines :], [len(self.attained.masses.below)])
        return below, above

    @property
    def _splines(self) -> int:
        return len(self.attained.amounts) - len(self.attained.masses)
