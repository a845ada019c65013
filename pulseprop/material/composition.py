"""Media made of media: density scaling, mixtures, an index against air, measured additions to the index.

Dielectric functions are eps = 1 + chi. Lorentz-Lorenz: (eps - 1)/(eps + 2) goes with density (H. A. Lorentz
1880, L. Lorenz 1880). J. C. Maxwell Garnett, Phil. Trans. R. Soc. A 203, 385 (1904);
D. A. G. Bruggeman, Ann. Phys. 416, 636 (1935); formulas from memory. What each `series` takes and returns is
told at `Response.series`; a band of a compound is where all of its parts hold.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from pulseprop.material.refraction import refraction_of, refraction_series, susceptibility_of
from pulseprop.material.response import Band, Response, View, common_band
from pulseprop.numerics.series import Numbers, Series, compose, product, quotient, root, variable

__all__ = [
    "Absolute",
    "Bruggeman",
    "IndexAddition",
    "LorentzLorenz",
    "MaxwellGarnett",
    "Scaled",
    "WithAbsorption",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


def _polarisability(chi: Series) -> Series:
    """(eps - 1)/(eps + 2)."""
    above = chi.copy()
    above[0] += 3.0
    return quotient(chi, above)


def _from_polarisability(total: Series) -> Series:
    below = -total
    below[0] += 1.0
    return quotient(3.0 * total, below)


@dataclass(frozen=True)
class Scaled:
    """One substance at `ratio` (>= 0) times the density of its record."""

    of: Response
    ratio: float

    @property
    def band(self) -> Band:
        """That of the record, rad/s."""
        return self.of.band

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi = 3 r a / (1 - r a), a = chi_0 / (chi_0 + 3) of the record, r the ratio."""
        return _from_polarisability(self.ratio * _polarisability(self.of.series(omega, count, view)))


@dataclass(frozen=True)
class LorentzLorenz:
    """Volume fractions (0 to 1) before mixing; polarisabilities add. What is missing to 1 is vacuum."""

    parts: tuple[tuple[Response, float], ...]

    @property
    def band(self) -> Band:
        """Where all parts hold, rad/s."""
        return common_band(part for part, _ in self.parts)

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi of the sum of fraction times (eps - 1)/(eps + 2)."""
        shares = [
            fraction * _polarisability(part.series(omega, count, view)) for part, fraction in self.parts
        ]
        return _from_polarisability(sum(shares[1:], start=shares[0]))


@dataclass(frozen=True)
class MaxwellGarnett:
    """Spheres of `inclusion` (i), volume fraction f from 0 to 1, in `host` (h).

    eps = h (1 + 2 f b) / (1 - f b),   b = (i - h)/(i + 2 h).
    """

    host: Response
    inclusion: Response
    fraction: float

    @property
    def band(self) -> Band:
        """Where both hold, rad/s."""
        return common_band((self.host, self.inclusion))

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi = eps - 1 of the equation above."""
        host = self.host.series(omega, count, view)
        inclusion = self.inclusion.series(omega, count, view)
        below = inclusion + 2.0 * host
        below[0] += 3.0
        contrast = self.fraction * quotient(inclusion - host, below)
        numerator = 2.0 * contrast
        numerator[0] += 1.0
        denominator = -contrast
        denominator[0] += 1.0
        eps_host = host.copy()
        eps_host[0] += 1.0
        eps = quotient(product(eps_host, numerator), denominator)
        eps[0] -= 1.0
        return eps


@dataclass(frozen=True)
class Bruggeman:
    """Two media on equal footing: sum f_j (e_j - e)/(e_j + 2 e) = 0, f_1 = fraction_first, f_2 = 1 - f_1.

    The quadratic 2 e^2 - b e - e_1 e_2 = 0, b = (3 f_1 - 1) e_1 + (3 f_2 - 1) e_2, is solved in
    closed form; the root is the one with e -> mean at vanishing contrast, which stays in the upper half plane
    for passive media.
    """

    first: Response
    second: Response
    fraction_first: float

    @property
    def band(self) -> Band:
        """Where both hold, rad/s."""
        return common_band((self.first, self.second))

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi = e - 1 of the root that passive media have."""
        one = self.first.series(omega, count, view).astype(complex)
        two = self.second.series(omega, count, view).astype(complex)
        one[0] += 1.0
        two[0] += 1.0
        share = self.fraction_first
        linear = (3 * share - 1) * one + (2 - 3 * share) * two
        discriminant = product(linear, linear) + 8.0 * product(one, two)
        side = np.where(np.real(omega) < 0, -1.0, 1.0)
        eps = (linear + _passive_root(discriminant, linear[0], side)) / 4.0
        eps[0] -= 1.0
        return eps


def _passive_root(discriminant: Series, linear: Series, side: Real) -> Series:
    """The root of the discriminant for which (linear + root)/4 is a passive dielectric function.

    Both candidates' imaginary parts add up to Im linear / 2; the physical one has Im >= 0, and where both are
    real it is the larger, by continuity from the upper half plane. At negative frequencies (side -1) the
    signs turn round.
    """
    leading = np.sqrt(discriminant[0])
    plus, minus = side * (linear + leading).imag, side * (linear - leading).imag
    flip = (minus > plus * (1 + 1e-12) + 1e-300) & (plus < 0)
    return root(discriminant, np.where(flip, -leading, leading))


@dataclass(frozen=True)
class Absolute:
    """An index printed against air, made absolute: n(omega) = n_air(omega) n_printed(omega n_air(omega)).

    The printed wavelength is the one in air, the frequency is the same.
    """

    printed: Response
    air: Response

    @property
    def band(self) -> Band:
        """Where the print and the record of air hold, rad/s."""
        return self.printed.band.overlap(self.air.band)

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi of the absolute index, by composition of the two series."""
        air = refraction_of(self.air.series(omega, count, view))
        air[0] += 1.0
        scaled = product(variable(np.asarray(omega), count), air)
        if view is not View.COMPLETED and np.isrealobj(omega):
            scaled = np.asarray(np.real(scaled))
        outer = refraction_of(self.printed.series(scaled[0], count, view))
        index = compose(outer, scaled)
        index[0] += 1.0
        index = product(index, air)
        index[0] -= 1.0
        return susceptibility_of(index)


class IndexAddition(Protocol):
    """A causal contribution to n + ik - 1 itself, as measured absorption gives through Kramers-Kronig."""

    @property
    def band(self) -> Band:
        """Where the data behind it hold, rad/s."""
        ...

    def refraction_series(self, omega: Numbers, count: int) -> Series:
        """Taylor coefficients of the contribution about each omega (rad/s): shape (count, *omega.shape)."""
        ...


@dataclass(frozen=True)
class WithAbsorption:
    """A transparent background whose index a measured absorption adds to: n = n_background + N_measured."""

    background: Response
    measured: IndexAddition

    @property
    def band(self) -> Band:
        """Where background and measurement hold, rad/s."""
        return self.background.band.overlap(self.measured.band)

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi = N (2 + N) of the sum N."""
        return susceptibility_of(self.refraction(omega, count, view))

    def refraction(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """n + ik - 1 of the background and what was measured, side by side."""
        own = refraction_series(self.background, omega, count, view)
        return np.asarray(own + self.measured.refraction_series(omega, count))
