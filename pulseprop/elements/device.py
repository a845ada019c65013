"""Devices: elements that are known by the phase they give, and what some elements can tell besides.

The phase of a device stands without its constant and its linear term at the pulse's centre: group delay 0
there, by convention. The field is multiplied by exp(+i phase).
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Protocol, runtime_checkable

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.material.medium import Medium
from pulseprop.material.response import Band, View
from pulseprop.numerics.series import Numbers, Series

__all__ = [
    "DARK",
    "Banded",
    "Composite",
    "Device",
    "Placed",
    "Remarking",
    "Straying",
    "require_count",
    "require_diffraction",
    "require_share",
    "without_delay",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

DARK = -200.0
"""ln(amplitude) of light that does not arrive: 1e-174 of the energy, and still a number."""


@runtime_checkable
class Banded(Protocol):
    """An element that works in a band only, rad/s: a pulse that leaves it is refused."""

    @property
    def name(self) -> str: ...
    @property
    def kind(self) -> str: ...
    @property
    def band(self) -> Band: ...

    def remedy_beyond(self, low: float, high: float) -> str:
        """What would let light of low to high (rad/s) pass, in a sentence."""
        ...


@runtime_checkable
class Composite(Protocol):
    """An element of several media."""

    @property
    def media(self) -> tuple[Medium, ...]: ...


@runtime_checkable
class Placed(Protocol):
    """An element that takes room on the bench: footprint in m, along the beam."""

    @property
    def footprint(self) -> float: ...


@runtime_checkable
class Remarking(Protocol):
    """An element that has something to say about its setting: whole sentences."""

    @property
    def remarks(self) -> tuple[str, ...]: ...


@runtime_checkable
class Straying(Protocol):
    """An element from which light goes elsewhere: a line for each beam."""

    @property
    def stray_beams(self) -> tuple[str, ...]: ...


@dataclass(frozen=True, kw_only=True)
class Device:
    """What all devices share. centre: of the pulse, rad/s, where group delay and phase are 0. beam_radius:
    1/e^2 intensity radius of the beam in it, m. temperature_K: where one is stated.
    """

    name: str
    centre: float
    beam_radius: float | None = None
    temperature_K: float | None = None
    medium: Medium | None = None
    phase_only: bool = True

    @property
    def length(self) -> float:
        """m of medium: none."""
        return 0.0

    def factor(self, omega: Numbers, view: View = View.AXIS) -> Complex | None:
        """Nothing besides."""
        return None

    def ringing(self, low: float, high: float) -> float:
        """None."""
        return 0.0


def without_delay(phase: Series, omega: Numbers, at_centre: Series, centre: float) -> Series:
    """A phase less its constant and linear term at the centre; shape (count, ...) kept.

    phase: Taylor series about each omega (rad/s). at_centre: that of the same phase about `centre`, two terms
    at least; only real parts are taken off, so that what is lost stays lost.
    """
    constant, slope = np.real(at_centre[0]), np.real(at_centre[1])
    result = phase.copy()
    result[0] -= constant + slope * (np.asarray(omega) - centre)
    if result.shape[0] > 1:
        result[1] -= slope
    return result


def require_share(value: float, words: str) -> None:
    """Refuse what is no share above 0 and at most 1."""
    if not 0 < value <= 1:
        raise InputError(f"{words} outside its range", value=value, allowed="above 0 and at most 1 (100 %)")


def require_diffraction(order: int, passes: int, efficiency: float) -> None:
    """Refuse order 0, and numbers and shares that no gratings have."""
    require_count(passes, "passes")
    require_share(efficiency, "an efficiency")
    if order == 0:
        raise InputError("order 0 is not diffracted", value=0, allowed="-1, 1, -2, ...")


def require_count(value: int, words: str, least: int = 1) -> None:
    """Refuse a number of passes or bounces below `least`."""
    if value < least:
        raise InputError(f"no such number of {words}", value=value, allowed=f"{least} or more")
