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

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.elements.oblique import normal_index
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.numerics.series import Numbers, Series, product, root, variable

__all__ = ["GRAZING", "Wedge", "Wedges"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Mask = NDArray[np.bool_]

GRAZING = np.radians(87.0)
"""Light that leaves a face or grating nearer to its surface is lost: its way to the second one would grow
without bound, and little of it leaves (common practice, no source)."""


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
        squared = product(wave - along, wave + along).astype(complex)
        leaves = np.asarray(np.real(squared[0]) > (np.cos(GRAZING) * np.real(wave[0])) ** 2)
        squared[0] = np.where(leaves, squared[0], 1.0)
        return along, root(squared, np.sqrt(squared[0])), leaves

    def angles(self, omega: Numbers | float) -> tuple[Real, Real, Real]:
        """Real angles in rad at omega (rad/s): inside at the entry, inside at the exit, outside at the exit
        (NaN where the wave does not leave)."""
        omega = np.asarray(omega, dtype=float)
        index = np.real(self.medium.index(omega))
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

    @property
    def offset(self) -> float:
        """X: distance of the tips along the faces, m."""
        _, _, outside = self.wedge.angles(self.centre)
        return self.first + self.second + self.gap * float(np.tan(outside))

    def phase(self, omega: Numbers, count: int, view: View) -> tuple[Series, Mask]:
        """k_t X + k_n Z, complex where the glass absorbs, and where there is any."""
        along, across, leaves = self.wedge.wave_vectors(omega, count, view)
        return np.asarray(along * self.offset + across * self.gap), leaves

    def second_crossing(self, omega: Numbers | float) -> Real:
        """Distance in m along the face from the second tip at which light of omega (rad/s) meets it."""
        entry, exit_, outside = self.wedge.angles(omega)
        entry_0, exit_0, _ = self.wedge.angles(self.centre)
        # The ray enters the first wedge where the carrier does; the sides of the triangle at its tip.
        left = self.first * np.cos(exit_0) / np.cos(entry_0) * np.cos(entry) / np.cos(exit_)
        return np.asarray(self.offset - self.gap * np.tan(outside) - left)

    def glass(self) -> float:
        """The carrier's way in both wedges, m."""
        entry, _, _ = self.wedge.angles(self.centre)
        return float((self.first + self.second) * np.sin(self.wedge.apex) / np.cos(entry))
