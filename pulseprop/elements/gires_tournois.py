"""A Gires-Tournois mirror: a spacer between a front that reflects in part and a back that reflects all.

With the front's power reflectance R, the back's R_b and a round trip phase delta = 2 (omega/c) d
sqrt(n^2 - sin^2 i) in the spacer,

    r = -(sqrt(R) - sqrt(R_b) exp(i delta)) / (1 - sqrt(R R_b) exp(i delta)),

longest group delay where delta is a multiple of 2 pi (F. Gires, P. Tournois, C. R. Acad. Sci. Paris 258, 6112
(1964), from memory). The phases of front and back are taken as constant; a coating counts those of its films.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.elements.device import Device, require_count, require_share, without_delay
from pulseprop.elements.oblique import normal_index
from pulseprop.elements.slab import DEPTH_OF_DECAY, LEAST_DECAY
from pulseprop.elements.words import in_unit, nanometres, orders_words, times
from pulseprop.errors import InputError
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.numerics.series import Numbers, Series, product, quotient, variable
from pulseprop.numerics.series_functions import exponential, logarithm

__all__ = ["GiresTournois"]


@dataclass(frozen=True, kw_only=True)
class GiresTournois(Device):
    """medium: the spacer. thickness: m, above 0. front: power reflectance, 0 to below 1. back: above 0 to 1.
    incidence: in vacuum, rad, 0 to below pi/2. bounces: 0 or more. Raises InputError for values outside.
    """

    medium: Medium
    thickness: float
    front: float
    back: float = 1.0
    incidence: float = 0.0
    bounces: int = 1
    kind: str = "gires-tournois mirror"

    def __post_init__(self) -> None:
        require_count(self.bounces, "bounces", 0)
        require_share(self.back, "a reflectance of the back")
        if not 0 <= self.front < 1:
            raise InputError("a reflectance of the front outside its range", allowed="0 to below 100 %")
        if not self.thickness > 0:
            raise InputError("a spacer needs a thickness", allowed="lengths above 0")
        if not 0 <= self.incidence < 0.5 * np.pi:
            raise InputError("the beam would not meet the mirror", allowed="0 deg up to below 90 deg")
        if self.front >= self.back:
            raise InputError(
                "the front reflects more than the back",
                value=f"{self.front:g} and {self.back:g}",
                allowed="a back that reflects more than the front",
            )

    @cached_property
    def detail(self) -> str:
        """Spacer, front, and what one bounce gives at the centre."""
        phase = np.imag(self._logarithm(np.array(self.centre), 4, View.PRINTED))
        said = orders_words(2 * float(phase[2]), 6 * float(phase[3]))
        return (
            f"{in_unit(self.thickness, 'um')} {self.medium.name} behind {100 * self.front:.3g} %: {said} a "
            f"bounce at {nanometres(self.centre, 4)}; {times(self.bounces, 'bounce', 'bounces')}"
        )

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """Logarithm of the amplitude of all bounces."""
        omega = np.asarray(omega)
        found = self._logarithm(omega, count, view)
        at_centre = np.imag(self._logarithm(np.array(self.centre), 2, view))
        phase = without_delay(np.imag(found), omega, at_centre, self.centre)
        return np.asarray(self.bounces * (np.real(found) + 1j * phase))

    def _logarithm(self, omega: Numbers, count: int, view: View) -> Series:
        """ln r of one bounce, its phase without jumps along the last axis."""
        turn = exponential(1j * self._round_trip(omega, count, view))
        front, back = np.sqrt(self.front), np.sqrt(self.back)
        above, below = back * turn, -front * back * turn
        above[0] -= front
        below[0] += 1.0
        amplitude = quotient(above, below)
        angle = np.angle(amplitude[0])
        angle = np.unwrap(angle) if angle.ndim else angle
        return logarithm(amplitude, np.log(np.abs(amplitude[0])) + 1j * angle)

    def _round_trip(self, omega: Numbers, count: int, view: View) -> Series:
        """delta."""
        chi = self.medium.response.series(np.asarray(omega), count, view)
        wave = variable(np.asarray(omega), count) * (2 * self.thickness / SPEED_OF_LIGHT)
        return product(wave, normal_index(chi, self.incidence))

    def ringing(self, low: float, high: float) -> float:
        """Round trips until exp(-21) is left, s."""
        if self.front == 0 or self.bounces == 0:
            return 0.0
        middle = np.array(0.5 * (max(low, 0.0) + high))
        trip = float(np.real(self._round_trip(middle, 2, View.AXIS)[1]))
        decay = max(-0.5 * np.log(self.front * self.back), LEAST_DECAY)
        return float(trip * np.ceil(DEPTH_OF_DECAY / decay))
