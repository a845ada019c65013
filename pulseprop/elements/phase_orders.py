"""Elements of which only orders are known, and plain losses.

The phase is a polynomial about the pulse's centre without constant and linear term (group delay 0 there by
convention unless one is stated); the field is multiplied by exp(+i phase). Such an element is a device, not
matter: causality says nothing about it.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import factorial

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.material.response import View
from pulseprop.numerics.series import Numbers, Series, power, variable

__all__ = ["Loss", "PhaseOrders"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


def _checked(transmittance: float) -> None:
    if not 0 < transmittance <= 1:
        raise InputError(
            "a transmittance outside its range", value=transmittance, allowed="above 0 and at most 1 (100 %)"
        )


@dataclass(frozen=True, kw_only=True)
class PhaseOrders:
    """A device given by its orders at `centre` (rad/s): group_delay s, gdd s^2, tod s^3, fod s^4.

    transmittance: of energy, the same at all frequencies, above 0 and at most 1. Raises InputError beyond.
    """

    name: str
    centre: float
    group_delay: float = 0.0
    gdd: float = 0.0
    tod: float = 0.0
    fod: float = 0.0
    transmittance: float = 1.0
    beam_radius: float | None = None
    detail: str = ""
    kind: str = "known orders"
    medium: None = None
    length: float = 0.0
    temperature_K: float | None = None
    phase_only: bool = True

    def __post_init__(self) -> None:
        _checked(self.transmittance)

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """i times the polynomial, and half the logarithm of the transmittance."""
        detuning = variable(np.asarray(omega) - self.centre, count)
        total = np.zeros_like(detuning)
        for order, value in enumerate((self.group_delay, self.gdd, self.tod, self.fod), start=1):
            if value:
                total = total + value / factorial(order) * power(detuning, order)
        exponent = 1j * total
        exponent[0] += 0.5 * np.log(self.transmittance)
        return np.asarray(exponent)

    def factor(self, omega: Numbers, view: View = View.AXIS) -> None:
        """Nothing besides."""

    def ringing(self, low: float, high: float) -> float:
        """None."""
        return 0.0


@dataclass(frozen=True, kw_only=True)
class Loss:
    """The same transmittance (of energy) at all frequencies: above 0 and at most 1, else InputError."""

    name: str
    transmittance: float
    beam_radius: float | None = None
    detail: str = ""
    kind: str = "loss"
    medium: None = None
    length: float = 0.0
    temperature_K: float | None = None
    phase_only: bool = False

    def __post_init__(self) -> None:
        _checked(self.transmittance)

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """Half the logarithm of the transmittance."""
        series = np.zeros((count, *np.shape(omega)))
        series[0] = 0.5 * np.log(self.transmittance)
        return series

    def factor(self, omega: Numbers, view: View = View.AXIS) -> None:
        """Nothing besides."""

    def ringing(self, low: float, high: float) -> float:
        """None."""
        return 0.0
