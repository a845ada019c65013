"""Absorption lines and carriers: Lorentz, Voigt, Gaussian, Debye, Drude.

Every line has its partner at negative frequency. Angular frequencies in rad/s, widths g = 2 pi x FWHM.

    Lorentz   chi = S / (W0^2 - w^2 - i g w)                          S = plasma frequency squared
    Voigt     the same with the pole W = sqrt(W0^2 - g^2/4) spread by a Gaussian of standard deviation s:
              chi = i sqrt(pi/2) S / (2 W s) [ w((z - W)/(s sqrt 2)) - w((z + W)/(s sqrt 2)) ],
              z = omega + i g/2, w the Faddeeva function (from
              int N(x; W, s) / (x - z) dx = i sqrt(pi/2)/s w((z - W)/(s sqrt 2)))
    Debye     chi = D / (1 - i w tau)
    Drude     chi = -S / (w^2 + i g w)

Lorentz, Debye and Drude after C. F. Bohren, D. R. Huffman, Absorption and Scattering of Light by Small
Particles (Wiley, 1983), chapter 9, from memory; Voigt derived here from the integral. What each `series`
takes and returns is told at `Response.series`.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.material.response import EVERYWHERE, Band, View
from pulseprop.numerics.faddeeva import faddeeva
from pulseprop.numerics.series import Numbers, Series, product, reciprocal, variable

__all__ = ["Carriers", "LorentzLine", "Relaxation", "VoigtLine", "line"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

SIGMA_PER_FWHM = 1 / np.sqrt(8 * np.log(2))


@dataclass(frozen=True, kw_only=True)
class LorentzLine:
    """S / (W0^2 - w^2 - i g w): strength S in (rad/s)^2 (negative: gain), centre W0 and width g in rad/s."""

    strength: float
    centre: float
    width: float
    band: Band = EVERYWHERE

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi by the Lorentz formula."""
        w = variable(np.asarray(omega), count)
        below = -product(w, w) - 1j * self.width * w
        below[0] += self.centre**2
        return self.strength * reciprocal(below)

    @property
    def memory(self) -> float:
        """T2 = 2/g in s: the field rings down as exp(-t/T2)."""
        return 2 / self.width

    def with_strength(self, strength: float) -> LorentzLine:
        """The same line with another strength, (rad/s)^2."""
        return LorentzLine(strength=strength, centre=self.centre, width=self.width)


@dataclass(frozen=True, kw_only=True)
class VoigtLine:
    """A Lorentz line (width may be 0) spread by a Gaussian of FWHM doppler_width; all in rad/s.

    width below twice the centre: `line` refuses the rest.
    """

    strength: float
    centre: float
    width: float
    doppler_width: float
    band: Band = EVERYWHERE

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi by the Voigt formula."""
        pole = np.sqrt(self.centre**2 - self.width**2 / 4)
        scale = self.doppler_width * SIGMA_PER_FWHM * np.sqrt(2)
        z = np.asarray(omega) + 0.5j * self.width
        pair = faddeeva((z - pole) / scale, count) - faddeeva((z + pole) / scale, count)
        factor = 0.5j * np.sqrt(np.pi) * self.strength / (pole * scale)
        steps = factor * scale ** -np.arange(float(count))
        return np.asarray(pair * steps.reshape((count,) + (1,) * z.ndim))

    @property
    def memory(self) -> float:
        """A time in s after which the ringing has fallen by one neper at least, and then falls faster."""
        return float(1 / (self.width / 2 + self.doppler_width * SIGMA_PER_FWHM / 6))

    def with_strength(self, strength: float) -> VoigtLine:
        """The same line with another strength, (rad/s)^2."""
        return VoigtLine(
            strength=strength, centre=self.centre, width=self.width, doppler_width=self.doppler_width
        )


def line(
    *, centre: float, width: float, doppler_width: float = 0.0, strength: float = 1.0
) -> LorentzLine | VoigtLine:
    """A Lorentz line, or a Voigt line where there is a Doppler width (rad/s).

    Raises InputError where both widths are 0, or the line is overdamped under a Doppler width.
    """
    if width <= 0 and doppler_width <= 0:
        raise InputError("a line needs a width", value=0.0, allowed="width or doppler_width above 0")
    if width < 0 or doppler_width < 0:
        raise InputError("a width is negative", value=min(width, doppler_width), allowed="0 or more")
    if doppler_width == 0:
        return LorentzLine(strength=strength, centre=centre, width=width)
    if width >= 2 * centre:
        raise InputError(
            "an overdamped line has no Doppler width",
            value=doppler_width,
            allowed="width below twice the centre",
        )
    return VoigtLine(strength=strength, centre=centre, width=width, doppler_width=doppler_width)


@dataclass(frozen=True, kw_only=True)
class Relaxation:
    """Debye term D / (1 - i w tau): static susceptibility D >= 0, tau in s, usable inside `band` only."""

    static: float
    time: float
    band: Band = EVERYWHERE

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi by the Debye formula."""
        below = -1j * self.time * variable(np.asarray(omega), count)
        below[0] += 1.0
        return self.static * reciprocal(below)

    @property
    def memory(self) -> float:
        """tau, s."""
        return self.time


@dataclass(frozen=True, kw_only=True)
class Carriers:
    """Drude term -wp^2 / (w^2 + i g w): plasma frequency in rad/s, g = 1/scattering time in 1/s."""

    plasma_frequency: float
    rate: float
    band: Band = EVERYWHERE

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi by the Drude formula; infinite at omega = 0."""
        w = variable(np.asarray(omega), count)
        return -(self.plasma_frequency**2) * reciprocal(product(w, w) + 1j * self.rate * w)

    @property
    def memory(self) -> float:
        """1/g, s."""
        return 1 / self.rate
