"""Dispersion orders of a medium from the Taylor series of its refraction.

With k(omega) = omega n / c: group index n_g = c dk/domega, GVD = d2k/domega2, TOD = d3k/domega3,
FOD = d4k/domega4, all of the real part. The series come in closed form from every response, so no step width
enters.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.numerics.series import Series, product, variable

__all__ = ["Orders", "orders_of"]


@dataclass(frozen=True, kw_only=True)
class Orders:
    """SI: gvd in s^2/m, tod in s^3/m, fod in s^4/m; absorption in 1/m, Napierian, of the intensity."""

    index_minus_one: float
    k: float
    absorption: float
    group_index_minus_one: float
    gvd: float
    tod: float
    fod: float

    @property
    def index(self) -> float:
        """n."""
        return 1 + self.index_minus_one

    @property
    def group_index(self) -> float:
        """n_g = n + omega dn/domega."""
        return 1 + self.group_index_minus_one


def orders_of(refraction: Series, omega: float) -> Orders:
    """Orders at omega (rad/s) from five Taylor coefficients of n + ik - 1 there, shape (5,)."""
    excess = product(variable(np.array(omega), 5), refraction) / SPEED_OF_LIGHT
    real = np.real(excess)
    return Orders(
        index_minus_one=float(np.real(refraction[0])),
        k=float(np.imag(refraction[0])),
        absorption=float(2 * np.imag(excess[0])),
        group_index_minus_one=float(real[1] * SPEED_OF_LIGHT),
        gvd=float(2 * real[2]),
        tod=float(6 * real[3]),
        fod=float(24 * real[4]),
    )
