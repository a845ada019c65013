"""A coating: films on a substrate, seen in reflection or in transmission, exact at all frequencies.

In reflection it is a mirror: the phase stands without its constant and linear term at the pulse's centre. In
transmission the phase is against the same path in vacuum, as that of a slab, multiple reflections included.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.elements.device import Device, require_count, without_delay
from pulseprop.elements.faces import Polarisation
from pulseprop.elements.film_waves import Film, StackOfFilms
from pulseprop.elements.slab import DEPTH_OF_DECAY
from pulseprop.elements.words import in_unit, nanometres, times
from pulseprop.errors import InputError
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.numerics.series import Numbers, Series, variable
from pulseprop.numerics.series_functions import logarithm

__all__ = ["Coating", "Film"]

Real = NDArray[np.float64]

FAINTEST = 1e-30
"""Amplitudes below this are taken for this: a logarithm needs one."""
PLACES = 257


@dataclass(frozen=True, kw_only=True)
class Coating(Device):
    """films: outermost first. substrate: vacuum for None. incidence: in vacuum, rad, 0 to below pi/2.
    side: what goes on, the light reflected or that transmitted into the substrate. bounces: 0 or more
    reflections, or passages. Raises InputError for values outside.
    """

    films: tuple[Film, ...]
    substrate: Medium | None = None
    incidence: float = 0.0
    polarisation: Polarisation = "s"
    side: Literal["reflection", "transmission"] = "reflection"
    bounces: int = 1
    kind: str = "coating"

    def __post_init__(self) -> None:
        require_count(self.bounces, "bounces", 0)
        if not 0 <= self.incidence < 0.5 * np.pi:
            raise InputError("the beam would not meet the coating", allowed="0 deg up to below 90 deg")
        if any(not film.thickness >= 0 for film in self.films):
            raise InputError("a film needs a thickness", allowed="lengths of 0 or more")
        if not self.films and self.substrate is None:
            raise InputError("nothing is there", allowed="films, a substrate, or both")

    @property
    def stack(self) -> StackOfFilms:
        """The films as waves see them."""
        return StackOfFilms(
            films=self.films,
            substrate=self.substrate,
            incidence=self.incidence,
            polarisation=self.polarisation,
        )

    @property
    def media(self) -> tuple[Medium, ...]:
        """Of the films, and the substrate's."""
        behind = () if self.substrate is None else (self.substrate,)
        return (*(film.medium for film in self.films), *behind)

    @cached_property
    def detail(self) -> str:
        """Films, substrate, and what one bounce gives at the centre."""
        substrate = "nothing" if self.substrate is None else self.substrate.name
        series = self._logarithm(np.array(self.centre), 3, View.PRINTED)
        share = 100 * float(np.exp(2 * np.real(series[0])))
        gdd = in_unit(2 * float(np.imag(series[2])), "fs^2", 3)
        one = "bounce" if self.side == "reflection" else "passage"
        return (
            f"{times(len(self.films), 'film', 'films')} on {substrate}, {self.side}: {share:.4g} % and {gdd} "
            f"a {one} at {nanometres(self.centre, 4)}; {times(self.bounces, one, one + 's')}"
        )

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """Logarithm of the amplitude of all bounces."""
        omega = np.asarray(omega)
        found = self._logarithm(omega, count, view)
        if self.side == "reflection":
            at_centre = np.imag(self._logarithm(np.array(self.centre), 2, view))
            phase = without_delay(np.imag(found), omega, at_centre, self.centre)
            found = np.real(found) + 1j * phase
        else:
            found = found - 1j * self._vacuum * variable(omega, count)
        return np.asarray(self.bounces * found)

    @property
    def _vacuum(self) -> float:
        """Delay in s of the same way in vacuum."""
        total = sum(film.thickness for film in self.films)
        return total * float(np.cos(self.incidence)) / SPEED_OF_LIGHT

    def _logarithm(self, omega: Numbers, count: int, view: View) -> Series:
        """ln of one bounce or passage, its phase without jumps along the last axis."""
        stack = self.stack
        take = stack.reflection if self.side == "reflection" else stack.transmission
        amplitude = take(omega, count, view)
        amplitude[0] = np.where(np.abs(amplitude[0]) < FAINTEST, FAINTEST, amplitude[0])
        angle = np.angle(amplitude[0])
        angle = np.unwrap(angle) if angle.ndim else angle
        return logarithm(amplitude, np.log(np.abs(amplitude[0])) + 1j * angle)

    def share(self, omega: Numbers) -> Real:
        """Share of the power that goes on after one bounce or passage, shape of omega (rad/s)."""
        return np.asarray(np.exp(2 * np.real(self._logarithm(np.asarray(omega), 1, View.AXIS)[0])))

    def ringing(self, low: float, high: float) -> float:
        """From the longest group delay in the band: a resonance that delays by 2/g decays as exp(-g t)."""
        places = np.linspace(max(low, high / 1e4), high, PLACES)
        delay = np.imag(self._logarithm(places, 2, View.AXIS)[1])
        return float(0.5 * DEPTH_OF_DECAY * np.max(np.abs(delay))) if self.bounces else 0.0

    @property
    def stray_beams(self) -> tuple[str, ...]:
        """The light on the other side."""
        rest = 100 * (1 - float(self.share(np.array(self.centre))))
        if rest < 1e-4:
            return ()
        other = "passes or is absorbed" if self.side == "reflection" else "is reflected or absorbed"
        return (f"{self.name}: about {rest:.3g} % {other} each time",)
