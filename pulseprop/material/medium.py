"""A medium: a causal response with its name, source, temperature and what else is published of it."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.material.orders import Orders, orders_of
from pulseprop.material.refraction import refraction_series
from pulseprop.material.response import Band, Response, View
from pulseprop.numerics.series import Numbers, Series

__all__ = ["Medium", "NonlinearIndex", "Resonance"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True)
class NonlinearIndex:
    """A published n2 in m^2/W; wavelength in m and the pulses it was measured with where printed."""

    value: float
    wavelength: float | None = None
    pulse: str = ""
    source: str = ""


@dataclass(frozen=True)
class Resonance:
    """A line that rings: centre and full width (all broadening) in rad/s, memory (T2 or shorter) in s."""

    centre: float
    width: float
    memory: float


@dataclass(frozen=True, kw_only=True)
class Medium:
    """What a beam can pass through.

    response: the susceptibility. causal: False where only orders or a spline as printed are known;
    orders_only: where there is not even a table to test. temperature: as the source prints it.
    relative_to: what the printed index is against. resonances: what rings in it. spread: names of other
    records of the same substance. extendable: False where the band may not be left even on request
    (relaxation terms). index_is_relative: known up to absorption outside a table, for want of an anchor.
    printed_digits: significant digits of the data, None for those of a published formula.
    health: a hazard of the substance, common practice.
    """

    name: str
    response: Response
    source: str = ""
    temperature: str = ""
    temperature_K: float | None = None
    relative_to: str = "vacuum"
    causal: bool = True
    orders_only: bool = False
    resonances: tuple[Resonance, ...] = ()
    n2: tuple[NonlinearIndex, ...] = ()
    spread: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()
    printed_digits: int | None = None
    extendable: bool = True
    index_is_relative: bool = False
    health: str = ""

    @property
    def band(self) -> Band:
        """Where the data behind the medium hold, rad/s."""
        return self.response.band

    def susceptibility(self, omega: Numbers, view: View = View.AXIS) -> Complex:
        """chi(omega), omega in rad/s, shape kept."""
        return np.asarray(self.response.series(np.asarray(omega), 1, view)[0], dtype=complex)

    def refraction(self, omega: Numbers, count: int = 1, view: View = View.AXIS) -> Series:
        """Taylor coefficients of n + ik - 1 about each omega (rad/s); shape (count, *omega.shape)."""
        return refraction_series(self.response, np.asarray(omega), count, view)

    def index(self, omega: Numbers, view: View = View.AXIS) -> Complex:
        """n + ik at omega in rad/s, shape kept."""
        return np.asarray(self.refraction(omega, 1, view)[0] + 1.0, dtype=complex)

    def absorption(self, omega: Real) -> Real:
        """Napierian absorption coefficient of the intensity, 1/m, shape of omega (rad/s): 2 k omega / c."""
        return np.asarray(2 * np.imag(self.refraction(omega)[0]) * omega / SPEED_OF_LIGHT)

    def nonlinear_index(self, omega: float) -> NonlinearIndex | None:
        """The published n2 measured nearest to omega (rad/s), None where there is none."""
        wavelength = TWO_PI_C / omega
        known = sorted(self.n2, key=lambda entry: abs((entry.wavelength or wavelength) - wavelength))
        return known[0] if known else None

    def ringing(self, low: float, high: float) -> float:
        """The longest memory in s of the resonances that light of low to high (rad/s) excites; else 0."""
        hit = [line.memory for line in self.resonances if low - line.width < line.centre < high + line.width]
        return max(hit, default=0.0)

    def orders(self, omega: float) -> Orders:
        """Index, group index, GVD, TOD, FOD at one angular frequency (rad/s), from the analytic chi.

        Of the formula as printed: callers see to it that omega lies in `band`.
        """
        return orders_of(self.refraction(np.array(omega), 5, View.PRINTED), omega)
