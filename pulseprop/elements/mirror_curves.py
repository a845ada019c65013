"""The spectral phase of one bounce off a mirror: by its orders, or by a table.

A table of GDD is a C2 cubic spline over omega, one of group delay or phase a C4 quintic, so that all curves
have a continuous GDD at least; the phase is its antiderivative, in closed form. Beyond the rows the group
delay stays what it is at the end row: the little light there (a pulse that has more is refused) is neither
lost nor given a curve that nobody measured.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from math import factorial
from typing import Any, Literal, Protocol

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import FEMTO
from pulseprop.errors import InputError
from pulseprop.material.response import EVERYWHERE, Band
from pulseprop.numerics.series import Numbers, Series, power, variable
from pulseprop.numerics.series_functions import exponential

__all__ = ["Bounce", "OrdersOfBounce", "Ripple", "TableOfBounce"]

Real = NDArray[np.float64]
Quantity = Literal["gdd", "group_delay", "phase"]

INTEGRATIONS: dict[Quantity, int] = {"gdd": 2, "group_delay": 1, "phase": 0}
"""From the quantity of a table to the phase."""
DEGREES: dict[Quantity, int] = {"gdd": 3, "group_delay": 5, "phase": 5}


class Bounce(Protocol):
    """The phase of one bounce, rad."""

    @property
    def band(self) -> Band:
        """Where it is known, rad/s."""
        ...

    def phase(self, omega: Numbers, count: int) -> Series:
        """Taylor coefficients about each omega (rad/s), shape (count, *omega.shape), constant and linear term
        as they come."""
        ...


@dataclass(frozen=True, kw_only=True)
class Ripple:
    """A GDD that swings about its mean as amplitude cos((omega - centre)/period + phase).

    amplitude: s^2. period: rad/s per radian of the swing, above 0 (2 pi of the ordinary frequency over 2 pi).
    phase: rad at the centre.
    """

    amplitude: float
    period: float
    phase: float = 0.0

    def series(self, omega: Numbers, centre: float, count: int) -> Series:
        """Its phase: -amplitude period^2 cos(...)."""
        swing = (variable(np.asarray(omega), count).astype(complex)) / self.period
        swing[0] += self.phase - centre / self.period
        return -self.amplitude * self.period**2 * np.real(exponential(1j * swing))


@dataclass(frozen=True, kw_only=True)
class OrdersOfBounce:
    """gdd (s^2), tod (s^3), fod (s^4) at `centre` (rad/s), and a ripple of the GDD."""

    centre: float
    gdd: float = 0.0
    tod: float = 0.0
    fod: float = 0.0
    ripple: Ripple | None = None
    band: Band = EVERYWHERE

    def phase(self, omega: Numbers, count: int) -> Series:
        """The polynomial; see `Bounce.phase`."""
        detuning = variable(np.asarray(omega) - self.centre, count)
        total = np.zeros_like(detuning)
        for order, value in ((2, self.gdd), (3, self.tod), (4, self.fod)):
            if value:
                total = total + value / factorial(order) * power(detuning, order)
        return total if self.ripple is None else total + self.ripple.series(omega, self.centre, count)


@dataclass(frozen=True, kw_only=True, eq=False)
class TableOfBounce:
    """Rows of GDD (s^2), group delay (s) or phase (rad, the field times exp(+i phase)) over omega.

    omega: rad/s, ascending, (R,); values: (R,). Raises InputError for too few rows: 4 of a GDD, 6 of the
    others.
    """

    omega: Real
    values: Real
    quantity: Quantity

    def __post_init__(self) -> None:
        least = DEGREES[self.quantity] + 1
        if self.omega.size < least:
            raise InputError(
                f"too few rows for a curve of {self.quantity}",
                value=f"{self.omega.size} rows",
                allowed=f"{least} or more",
            )

    @property
    def band(self) -> Band:
        """From the first row to the last, rad/s."""
        return Band(float(self.omega[0]), float(self.omega[-1]))

    @cached_property
    def _curves(self) -> list[Any]:
        """The phase and its derivatives over (omega - middle) in rad/fs."""
        from scipy.interpolate import make_interp_spline

        steps = INTEGRATIONS[self.quantity]
        curve = make_interp_spline(
            self._scaled(self.omega), self.values * FEMTO**steps, k=DEGREES[self.quantity]
        )
        phase = curve.antiderivative(steps) if steps else curve
        return [phase.derivative(order) if order else phase for order in range(phase.k + 1)]

    def _scaled(self, omega: Numbers) -> Real:
        middle = 0.5 * (self.omega[0] + self.omega[-1])
        return np.asarray((np.real(omega) - middle) / FEMTO, dtype=float)

    def phase(self, omega: Numbers, count: int) -> Series:
        """From the spline between the rows, straight beyond; see `Bounce.phase`."""
        place = self._scaled(omega)
        first, last = self._scaled(self.omega[[0, -1]])
        held = np.clip(place, first, last)
        between = (place >= first) & (place <= last)
        series = np.zeros((count, *np.shape(omega)))
        for order, curve in enumerate(self._curves[:count]):
            values = curve(held)
            if order >= 2:
                values = np.where(between, values, 0.0)
            series[order] = values / factorial(order) / FEMTO**order
        series[0] += self._curves[1](held) * (place - held)
        return series
