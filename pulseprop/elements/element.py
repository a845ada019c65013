"""What stands in a beam: anything that multiplies the spectrum by a transfer."""

from __future__ import annotations

from typing import Protocol, runtime_checkable

import numpy as np
from numpy.typing import NDArray

from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.numerics.series import Numbers, Series

__all__ = ["Element", "orders_of_element", "transfer_of"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


@runtime_checkable
class Element(Protocol):
    """One element of a path. Transfers are against the same path in vacuum: the clock of a front at c.

    name: unique in its path. kind: the word for its sort. detail: what it is in a few words. beam_radius:
    1/e^2 intensity radius in m where the beam differs from the pulse's. medium: what the pulse crosses, if
    anything. length: m of medium, 0 for none. phase_only: given by a phase, not by matter: left out of the
    front test. temperature_K: where one is stated.
    """

    @property
    def name(self) -> str: ...
    @property
    def kind(self) -> str: ...
    @property
    def detail(self) -> str: ...
    @property
    def beam_radius(self) -> float | None: ...
    @property
    def medium(self) -> Medium | None: ...
    @property
    def length(self) -> float: ...
    @property
    def phase_only(self) -> bool: ...
    @property
    def temperature_K(self) -> float | None: ...

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """Taylor coefficients of ln(transfer) of the direct passage about each omega (rad/s).

        Shape (count, *omega.shape), unit s^m at index m; count as for `Response.series`.
        """
        ...

    def factor(self, omega: Numbers, view: View = View.AXIS) -> Complex | None:
        """What else multiplies the transfer (faces, echoes), shape of omega; None where nothing does."""
        ...

    def ringing(self, low: float, high: float) -> float:
        """How long in s after the direct passage a field between these rad/s may go on, to exp(-21) of it."""
        ...


def transfer_of(element: Element, omega: Numbers, view: View = View.AXIS) -> Complex:
    """The whole transfer at omega (rad/s), complex, shape kept."""
    transfer = np.exp(element.exponent(omega, 1, view)[0])
    factor = element.factor(omega, view)
    return np.asarray(transfer if factor is None else transfer * factor, dtype=complex)


def orders_of_element(element: Element, omega: float) -> tuple[float, float, float, float]:
    """Group delay (s), GDD (s^2), TOD (s^3), FOD (s^4) of the direct passage at omega (rad/s).

    From the analytic series: the derivatives of the phase, the first to the fourth.
    """
    phase = np.imag(element.exponent(np.array(omega), 5, View.PRINTED))
    return float(phase[1]), float(2 * phase[2]), float(6 * phase[3]), float(24 * phase[4])
