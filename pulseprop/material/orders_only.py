"""A medium of which only orders are known: a polynomial k(omega), no causal model.

k(omega) = k0 + k1 d + k2 d^2/2 + k3 d^3/6 + k4 d^4/24,   d = omega - centre,   n = c k / omega.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import factorial

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.material.refraction import susceptibility_of
from pulseprop.material.response import EVERYWHERE, Band, View
from pulseprop.numerics.series import Numbers, Series, power, quotient, variable

__all__ = ["OrdersOnly"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True)
class OrdersOnly:
    """centre in rad/s; index and group_index there; gvd s^2/m, tod s^3/m, fod s^4/m."""

    centre: float
    index: float
    group_index: float
    gvd: float = 0.0
    tod: float = 0.0
    fod: float = 0.0
    band: Band = EVERYWHERE

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """chi = n^2 - 1 of the polynomial."""
        w = variable(np.asarray(omega), count)
        detuning = w.copy()
        detuning[0] -= self.centre
        wave_number = np.zeros_like(w)
        wave_number[0] = self.index * self.centre / SPEED_OF_LIGHT
        orders = (self.group_index / SPEED_OF_LIGHT, self.gvd, self.tod, self.fod)
        for order, value in enumerate(orders, start=1):
            wave_number = wave_number + value / factorial(order) * power(detuning, order)
        index = SPEED_OF_LIGHT * quotient(wave_number, w)
        index[0] -= 1.0
        return susceptibility_of(index)
