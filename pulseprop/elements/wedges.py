"""Plane waves through a wedge of glass, with or without a grating on its second face.

A wave at external incidence i on the entry face of a wedge of apex angle a leaves with the tangential
component, along the second face and away from the tip,

    k_t = (omega/c) [sin a sqrt(n^2 - sin^2 i) - cos a sin i] + m 2 pi/d

(Snell's law at the entry face; the last term where a grating of groove distance d stands on the second face).
Two equal wedges face each other with their second faces parallel and their tips on opposite sides. The phase
from the wavefront through the first tip to the one through the second is k_t X + k_n Z, where X and Z are the
distances of the tips along and across the faces and k_n^2 = (omega/c)^2 - k_t^2. It holds all glass, as every
ray of a plane wave gathers the same phase between two of its wavefronts, the ray through the tips included.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.elements.device import DARK, without_delay
from pulseprop.elements.oblique import normal_index
from pulseprop.material.medium import Medium
from pulseprop.material.response import Band, View
from pulseprop.numerics.series import Numbers, Series, product, root, variable

__all__ = ["GRAZING", "Wedge", "Wedges"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Mask = NDArray[np.bool_]

GRAZING = np.radians(87.0)
"""Light that leaves a face or grating nearer to its surface is lost: its way to the second one would grow
without bound, and little of it leaves (common practice, no source)."""

PLACES = 513
HALVINGS = 60
FARTHEST = 4.0
"""How far from the centre frequency, as a factor, the ends of a band are looked for."""


@dataclass(frozen=True, kw_only=True)
class Wedge:
    """apex, incidence (on the entry face, outside): rad. momentum: m 2 pi/d, 1/m; 0 without a grating."""

    medium: Medium
    apex: float
    incidence: float
    momentum: float = 0.0

    def wave_vectors(self, omega: Numbers, count: int, view: View) -> tuple[Series, Series, Mask]:
        """k_t and k_n (1/m) as Taylor series about each omega (rad/s), and where the wave leaves at all."""
        wave = variable(np.asarray(omega), count) / SPEED_OF_LIGHT
        chi = self.medium.response.series(np.asarray(omega), count, view)
        sine = np.sin(self.incidence)
        along = (
            product(wave, np.sin(self.apex) * normal_index(chi, self.incidence))
            - np.cos(self.apex) * sine * wave
        )
        along[0] += self.momentum
        squared = product(wave - along, wave + along)
        leaves = np.asarray(np.real(squared[0]) > (np.cos(GRAZING) * np.real(wave[0])) ** 2)
        squared[0] = np.where(leaves, squared[0], 1.0)
        return along, root(squared, np.sqrt(squared[0])), leaves

    def lets_out(self, omega: float) -> bool:
        """Whether a wave of omega (rad/s) leaves, farther than `GRAZING` allows from the face."""
        return bool(self.wave_vectors(np.array(omega), 1, View.PRINTED)[2])

    def angles(self, omega: Numbers | float) -> tuple[Real, Real, Real]:
        """Real angles in rad at omega (rad/s): inside at the entry, inside at the exit, outside at the exit
        (NaN where the wave does not leave)."""
        omega = np.asarray(omega, dtype=float)
        index = np.real(np.sqrt(1 + self.medium.susceptibility(omega)))
        with np.errstate(divide="ignore"):  # where the index is imaginary no wave enters
            entry = _arcsin(np.sin(self.incidence) / index)
        outside = _arcsin(index * np.sin(self.apex - entry) + self.momentum * SPEED_OF_LIGHT / omega)
        return entry, self.apex - entry, outside


def _arcsin(sine: Numbers) -> Real:
    sine = np.real(sine)
    return np.asarray(np.arcsin(np.where(np.abs(sine) < 1, sine, np.nan)))


@dataclass(frozen=True, kw_only=True)
class Wedges:
    """Two wedges. first, second: distance in m along the second face from the tip to the carrier. gap: m
    between the second faces. centre: of the carrier, rad/s."""

    wedge: Wedge
    centre: float
    first: float
    second: float
    gap: float

    @cached_property
    def carrier(self) -> tuple[float, float, float]:
        """The angles of the carrier, rad, as `Wedge.angles` gives them."""
        entry, inside, outside = self.wedge.angles(self.centre)
        return float(entry), float(inside), float(outside)

    @cached_property
    def offset(self) -> float:
        """X: distance of the tips along the faces, m."""
        return self.first + self.second + self.gap * float(np.tan(self.carrier[2]))

    def exponent(self, omega: Numbers, count: int, view: View, passes: int) -> Series:
        """ln(transfer) of so many passes: i (k_t X + k_n Z), less what is constant and linear at the centre;
        dark where no light leaves the first wedge."""
        omega = np.asarray(omega)
        found, leaves = self._phase(omega, count, view)
        at_centre, _ = self._phase(np.array(self.centre), 2, view)
        phase = passes * without_delay(found, omega, at_centre, self.centre)
        exponent = np.where(leaves, 1j * phase, 0.0)
        # A ray that passes beside the second tip crosses no glass there: it is not amplified.
        exponent[0] = np.minimum(exponent[0].real, 0.0) + 1j * exponent[0].imag
        exponent[0] += np.where(leaves, 0.0, DARK)
        return np.asarray(exponent)

    def _phase(self, omega: Numbers, count: int, view: View) -> tuple[Series, Mask]:
        """k_t X + k_n Z, complex where the glass absorbs, and where there is any."""
        along, across, leaves = self.wedge.wave_vectors(omega, count, view)
        return np.asarray(along * self.offset + across * self.gap), leaves

    @cached_property
    def band(self) -> Band:
        """Around the centre, where light leaves the first wedge, rad/s; looked for within the record of the
        medium and a factor `FARTHEST` of the centre."""
        known = self.wedge.medium.band
        low = self._end(max(known.low, self.centre / FARTHEST), 0.0)
        return Band(low, self._end(min(known.high, self.centre * FARTHEST), np.inf))

    def _end(self, farthest: float, beyond: float) -> float:
        """Where light ceases to leave on the way to `farthest`; `beyond` where it does not cease."""
        places = np.linspace(self.centre, farthest, PLACES)
        lost = ~self._leaves(places)
        if not lost.any():
            return beyond
        first = max(int(np.argmax(lost)), 1)
        inside, outside = float(places[first - 1]), float(places[first])
        for _ in range(HALVINGS):
            middle = 0.5 * (inside + outside)
            inside, outside = (middle, outside) if self._leaves(np.array(middle)) else (inside, middle)
        return inside

    def _leaves(self, omega: Real) -> Mask:
        return np.asarray(np.isfinite(self.wedge.angles(omega)[2]))

    def second_crossing(self, omega: Numbers | float) -> tuple[Real, Real]:
        """Where light of omega (rad/s) meets the face of the second wedge: distance in m from its tip along
        the face, and across the ray; NaN where nothing does."""
        entry, inside, outside = self.wedge.angles(omega)
        # The ray enters the first wedge where the carrier does; the sides of the triangle at its tip.
        left = self.first * np.cos(self.carrier[1]) / np.cos(self.carrier[0])
        crossing = self.offset - self.gap * np.tan(outside) - left * np.cos(entry) / np.cos(inside)
        return np.asarray(crossing), np.asarray(crossing * np.cos(outside))

    def glass(self) -> float:
        """The carrier's way in both wedges, m."""
        return float((self.first + self.second) * np.sin(self.wedge.apex) / np.cos(self.carrier[0]))
