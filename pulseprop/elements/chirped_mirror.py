"""Chirped mirrors: so many bounces off one, or off the two of a pair in turn."""

from __future__ import annotations

from dataclasses import dataclass
from functools import reduce

import numpy as np

from pulseprop.elements.device import Device, require_count, require_share, without_delay
from pulseprop.elements.mirror_curves import Bounce
from pulseprop.elements.words import nanometres, orders_words, times
from pulseprop.errors import InputError
from pulseprop.material.response import Band, View
from pulseprop.numerics.series import Numbers, Series

__all__ = ["ChirpedMirror"]


@dataclass(frozen=True, kw_only=True)
class ChirpedMirror(Device):
    """mirrors: one, or the two of a pair whose ripples cancel. bounces: off each of them, 0 or more.
    reflectance: of each bounce, above 0 and at most 1. Raises InputError for values outside, or where the
    pulse's centre lies outside a table.
    """

    mirrors: tuple[Bounce, ...]
    bounces: int = 1
    reflectance: float = 1.0
    kind: str = "chirped mirror"

    def __post_init__(self) -> None:
        require_count(self.bounces, "bounces", 0)
        require_share(self.reflectance, "a reflectance")
        if not self.band.contains(np.array(self.centre)):
            raise InputError(
                "the table of the mirror does not hold the centre of the pulse",
                value=nanometres(self.centre),
                allowed=f"{nanometres(self.band.high)} to {nanometres(self.band.low)}",
            )

    @property
    def detail(self) -> str:
        """What one bounce gives at the centre, and how many there are."""
        said = ", then ".join(orders_words(*self.orders_of_bounce(mirror)) for mirror in self.mirrors)
        each = " off each" if len(self.mirrors) > 1 else ""
        count = times(self.bounces, "bounce", "bounces")
        return f"{said} a bounce at {nanometres(self.centre, 4)}; {count}{each}"

    def orders_of_bounce(self, mirror: Bounce) -> tuple[float, float]:
        """GDD (s^2) and TOD (s^3) of one bounce at the pulse's centre."""
        series = np.real(mirror.phase(np.array(self.centre), 4))
        return float(2 * series[2]), float(6 * series[3])

    @property
    def band(self) -> Band:
        """Where all tables have rows, rad/s."""
        return reduce(Band.overlap, (mirror.band for mirror in self.mirrors))

    def remedy_beyond(self, low: float, high: float) -> str:
        """A table that reaches far enough."""
        return (
            f"Give a table whose rows reach from {nanometres(high, 4)} to {nanometres(low, 4)}: none is "
            "extended beyond its rows"
        )

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """i times the phase of all bounces, and half the logarithm of what they reflect."""
        total = np.zeros((count, *np.shape(omega)))
        for mirror in self.mirrors:
            at_centre = mirror.phase(np.array(self.centre), 2)
            total += without_delay(mirror.phase(omega, count), omega, at_centre, self.centre)
        exponent = 1j * self.bounces * total
        exponent[0] += 0.5 * self.bounces * len(self.mirrors) * np.log(self.reflectance)
        return np.asarray(exponent)

    @property
    def stray_beams(self) -> tuple[str, ...]:
        """What passes through the mirrors."""
        if self.reflectance == 1 or self.bounces == 0:
            return ()
        return (f"{self.name}: up to {100 * (1 - self.reflectance):.2g} % passes through at each bounce",)
