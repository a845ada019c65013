"""A mask of pixels in the spectrum, seen through the focus of each frequency.

A frequency is focused on the mask to a spot of Gaussian profile, so that it sees the mean of the pixels under
it, each weighted with the energy that falls on it. In time the answer repeats at the inverse of a pixel's
width in frequency; the pixels' own width and the spot keep the repetitions down. Source: A. M. Weiner, Rev.
Sci. Instrum. 71, 1929 (2000), on Fourier-transform pulse shapers (from memory).
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.material.response import Band

__all__ = ["Pixels"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

REACH = 6.5
"""Standard deviations of the spot beyond which no light falls: 1e-10 of it."""


@dataclass(frozen=True, kw_only=True)
class Pixels:
    """count: of equal pixels, 2 or more, over `band` (rad/s). spacing: in what they are equal. spot: 1/e^2
    intensity radius of the focus, in pixels, above 0. Raises InputError for values outside.
    """

    count: int
    band: Band
    spacing: Literal["wavelength", "frequency"] = "wavelength"
    spot: float = 1.0

    def __post_init__(self) -> None:
        if self.count < 2:
            raise InputError("a mask needs pixels", value=self.count, allowed="2 or more", place="pixels")
        if not self.spot > 0:
            raise InputError("a focus has a radius", value=self.spot, allowed="above 0 pixels", place="spot")

    @property
    def _ends(self) -> tuple[float, float]:
        """Where the first pixel begins and the last ends on the axis on which pixels are equal."""
        low, high = self._axis(np.array([self.band.low, self.band.high]))
        return float(low), float(high)

    def _axis(self, omega: Real) -> Real:
        return omega if self.spacing == "frequency" else -TWO_PI_C / omega

    def place(self, omega: Real) -> Real:
        """Where omega (rad/s, above 0) falls, in pixels from the red end, shape kept."""
        first, last = self._ends
        return np.asarray((self._axis(omega) - first) * (self.count / (last - first)))

    def omega(self, place: Real) -> Real:
        """The inverse of `place`."""
        first, last = self._ends
        axis = first + place * ((last - first) / self.count)
        return np.asarray(axis if self.spacing == "frequency" else -TWO_PI_C / axis)

    @property
    def centres(self) -> Real:
        """The frequency in the middle of each pixel, rad/s, (count,)."""
        return self.omega(np.arange(self.count, dtype=float) + 0.5)

    def width(self, omega: float) -> float:
        """Width in rad/s of a pixel at omega."""
        first, last = self._ends
        slope = 1.0 if self.spacing == "frequency" else TWO_PI_C / omega**2
        return float((last - first) / self.count / slope)

    def seen(self, mask: Complex, omega: Real) -> Complex:
        """What light of omega (rad/s, any shape, 0 and below seeing nothing) sees of a mask, (count,)."""
        from scipy.special import erf

        place = self.place(np.where(omega > 0, omega, self.band.low))
        reach = int(np.ceil(REACH * 0.5 * self.spot)) + 1
        nearest = np.floor(np.clip(place, -2 * reach, self.count + 2 * reach)).astype(np.int64)
        scale = np.sqrt(2.0) / self.spot
        total = np.zeros(np.shape(omega), dtype=complex)
        for offset in range(-reach, reach + 1):
            pixel = nearest + offset
            share = 0.5 * (erf(scale * (pixel + 1 - place)) - erf(scale * (pixel - place)))
            there = (pixel >= 0) & (pixel < self.count)
            total += np.where(there, mask[np.clip(pixel, 0, self.count - 1)] * share, 0.0)
        return np.where(omega > 0, total, 0.0)
