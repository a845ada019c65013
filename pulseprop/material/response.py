"""What a causal response is, and how responses add up.

A response gives the complex susceptibility chi(omega) of the convention exp(-i omega t): analytic above the
real axis, Im chi >= 0 for omega > 0 where it absorbs, chi(-conj(omega)) = conj(chi(omega)). It is handed out
as truncated Taylor series, so that value, group index and all orders come from the same closed form.

Printed formulas hold inside a range only, so every response can be seen in three ways (`View`).
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from enum import Enum
from typing import Protocol, runtime_checkable

import numpy as np
from numpy.typing import NDArray

from pulseprop.numerics.series import Numbers, Series

__all__ = ["EVERYWHERE", "Band", "Constant", "IndexResponse", "Response", "Sum", "View", "common_band"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


class View(Enum):
    """Which continuation of a printed formula is meant."""

    PRINTED = "printed"
    """The formula as it stands, at any complex frequency: for orders inside the range."""
    AXIS = "axis"
    """On the real axis: the formula inside its range, the causal completion outside: for propagation."""
    COMPLETED = "completed"
    """The causal completion everywhere, at any frequency on or above the real axis: for causality tests."""


SLACK = 1e-12
"""The ends of a range are part of it, whatever rounding made of them."""


@dataclass(frozen=True)
class Band:
    """A stretch of angular frequency, rad/s, where a record may be used."""

    low: float
    high: float

    def contains(self, omega: Real) -> NDArray[np.bool_]:
        """True where |omega| lies in the band."""
        size = np.abs(omega)
        return np.asarray((size >= self.low * (1 - SLACK)) & (size <= self.high * (1 + SLACK)))

    def overlap(self, other: Band) -> Band:
        """The part common to both; an empty band has low > high."""
        return Band(max(self.low, other.low), min(self.high, other.high))


EVERYWHERE = Band(0.0, np.inf)


@runtime_checkable
class Response(Protocol):
    """A causal susceptibility."""

    @property
    def band(self) -> Band:
        """Where the data behind it hold."""
        ...

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """Taylor coefficients of chi about each omega (rad/s): shape (count, *omega.shape), unit s^m at index
        m.

        On the real axis the value is the limit from above. `count` is 1 or more with View.PRINTED, at most 2
        with the others. The result is real where chi is real by construction.
        """
        ...


@runtime_checkable
class IndexResponse(Response, Protocol):
    """A response that is given as n + ik - 1 itself, so that no root has to be taken.

    The index of a Stieltjes transform of k may pass through zero beyond a strong band; the root of 1 + chi
    would then have to change sheets.
    """

    def refraction(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """Taylor coefficients of n + ik - 1, as `Response.series` gives those of chi."""
        ...


def common_band(responses: Iterable[Response]) -> Band:
    """The band in which all of the responses hold."""
    band = EVERYWHERE
    for response in responses:
        band = band.overlap(response.band)
    return band


@dataclass(frozen=True)
class Constant:
    """An instantaneous response, chi = value >= 0 at all frequencies."""

    value: float
    band: Band = EVERYWHERE

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """The value, and no slope; see `Response.series`."""
        series = np.zeros((count, *np.shape(omega)))
        series[0] = self.value
        return series


@dataclass(frozen=True)
class Sum:
    """Susceptibilities side by side in one medium: they add."""

    parts: tuple[Response, ...]

    @property
    def band(self) -> Band:
        """Where all parts hold, rad/s."""
        return common_band(self.parts)

    def series(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """The sum of the parts' series; see `Response.series`."""
        total: Series = np.zeros((count, *np.shape(omega)))
        for part in self.parts:
            total = total + part.series(omega, count, view)
        return total
