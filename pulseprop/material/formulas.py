"""Published dispersion formulas as functions of x = 1/L^2, L the wavelength as printed, in um.

With the vacuum wavelength put in, x is proportional to omega^2, so every formula is analytic in omega and
even. Kinds have names of their own:

    sellmeier       n^2 - 1 = offset + sum strength L^2 / (L^2 - resonance^2)
    gas             n - 1   = offset + sum strength / (resonance - 1/L^2)     (both in um^-2)
    powers          n^2 - 1 = offset + sum strength L^power                   (even powers)
    index powers    n - 1   = offset + sum strength L^power                   (even powers)
    poles           n^2 - 1 = offset + sum strength / (L^2 - resonance^2)     (strength in um^2)

All are one function, g(x) = offset + sum_j weight_j x_j / (x_j - x) + sum_q coefficient_q x^q, which gives
chi or n - 1.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.material.completion import Completion, complete
from pulseprop.material.response import Band, View
from pulseprop.numerics.series import Numbers, Series, power, product, reciprocal, variable

__all__ = ["MICROMETRE_OMEGA", "Formula", "Pole", "Power", "gas_term", "pole_term", "sellmeier_term"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

MICROMETRE_OMEGA = TWO_PI_C / 1e-6
"""Angular frequency of the vacuum wavelength 1 um, rad/s."""


@dataclass(frozen=True)
class Pole:
    """weight x_j / (x_j - x), x_j = place in um^-2."""

    weight: float
    place: float


@dataclass(frozen=True)
class Power:
    """coefficient x^exponent, x in um^-2."""

    coefficient: float
    exponent: int


def sellmeier_term(strength: float, resonance_squared: float) -> Pole:
    """strength L^2 / (L^2 - resonance_squared), um^2."""
    return Pole(strength, 1 / resonance_squared)


def gas_term(strength: float, resonance: float) -> Pole:
    """strength / (resonance - 1/L^2), um^-2."""
    return Pole(strength / resonance, resonance)


def pole_term(strength: float, resonance_squared: float) -> tuple[Pole, float]:
    """strength / (L^2 - resonance_squared), um^2, as a pole and the offset that goes with it."""
    weight = strength / resonance_squared
    return Pole(weight, 1 / resonance_squared), -weight


@dataclass(frozen=True, kw_only=True)
class Formula:
    """A printed formula; `of` says whether it gives chi = n^2 - 1 or n - 1; `band` is its range.

    Raises InputError where a pole lies inside the range.
    """

    band: Band
    of: Literal["chi", "refraction"] = "chi"
    offset: float = 0.0
    poles: tuple[Pole, ...] = ()
    powers: tuple[Power, ...] = ()

    def __post_init__(self) -> None:
        low, high = self.x_range
        for pole in self.poles:
            if low <= pole.place <= high:
                raise InputError(
                    "the formula has a pole inside its own range",
                    value=f"{pole.place**-0.5 * 1000:.6g} nm",
                    allowed=f"resonances outside {high**-0.5 * 1000:.6g} nm to {low**-0.5 * 1000:.6g} nm",
                    remedy="check whether the resonance was printed squared, and the range",
                )

    @property
    def x_range(self) -> tuple[float, float]:
        """The range in x = 1/L^2, um^-2."""
        return (self.band.low / MICROMETRE_OMEGA) ** 2, (self.band.high / MICROMETRE_OMEGA) ** 2

    @cached_property
    def completion(self) -> Completion:
        """The same function with absorption outside the range in place of poles and growing powers."""
        return complete(self)

    def printed(self, x: Series) -> Series:
        """g as a Taylor series, of a Taylor series x (um^-2)."""
        total = np.zeros_like(x)
        total[0] = self.offset
        for pole in self.poles:
            below = -x
            below[0] += pole.place
            total = total + pole.weight * pole.place * reciprocal(below)
        for term in self.powers:
            total = total + term.coefficient * power(x, term.exponent)
        return total

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi about each omega; see `Response.series`."""
        g = self._g(np.asarray(omega), count, view)
        if self.of == "chi":
            return g
        doubled = g.copy()
        doubled[0] += 2.0
        return product(g, doubled)

    def _g(self, omega: Numbers, count: int, view: View) -> Series:
        scaled = variable(omega / MICROMETRE_OMEGA, count)
        scaled[1:2] /= MICROMETRE_OMEGA
        x = product(scaled, scaled)
        if view is View.PRINTED:
            return self.printed(x)
        if view is View.COMPLETED:
            return self._completed(omega, x)
        inside = self.band.contains(np.real(omega))
        if inside.all():
            return self.printed(x)
        g = np.empty(x.shape, dtype=complex)
        g[:, inside] = self.printed(x[:, inside])
        g[:, ~inside] = self._completed(np.asarray(omega)[~inside], x[:, ~inside])
        return g

    def _completed(self, omega: Series, x: Series) -> Series:
        """The completion; x = omega^2 does not tell omega from -conj(omega), whose responses are
        conjugate.
        """
        mirrored = np.real(omega) < 0
        if not mirrored.any():
            return self.completion.series(x)
        g = self.completion.series(np.where(mirrored, np.conj(x), x))
        return np.where(mirrored, np.conj(g), g)
