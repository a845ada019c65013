"""A slab of matter, upright or tilted.

Against the same path in vacuum the direct passage has the phase

    (omega/c) d [sqrt(n^2 - sin^2 theta) - cos theta],

that of a plane-parallel plate (M. Born, E. Wolf, Principles of Optics, section 7.6; from memory). The bracket
is computed as chi / (sqrt(n^2 - sin^2 theta) + cos theta), which keeps all digits of a dilute gas.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.elements.faces import Polarisation, reflection_squared
from pulseprop.elements.oblique import normal_index
from pulseprop.errors import InputError
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.numerics.series import Numbers, Series, product, quotient, variable

__all__ = ["DEPTH_OF_DECAY", "Slab"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

DEPTH_OF_DECAY = 21.0
"""Fields are followed down to exp(-21), 7.6e-10 of their first value."""
LEAST_DECAY = 1e-3
"""Nepers a round trip: weaker decay is followed no longer than this; a run looks for what is left."""


@dataclass(frozen=True, kw_only=True)
class Slab:
    """thickness in m (>= 0), angle in rad outside, [0, pi/2).

    faces: "ideal" (no loss), "fresnel" (loss at both faces), "echoes" (coherent multiple reflection), or
    "reflectance" with the power reflectance of each face in `reflectance`, [0, 1). polarisation: needed where
    a tilted slab's faces reflect. Raises InputError for what lies outside.
    """

    name: str
    medium: Medium
    thickness: float
    angle: float = 0.0
    polarisation: Polarisation | None = None
    faces: Literal["ideal", "fresnel", "echoes", "reflectance"] = "ideal"
    reflectance: float = 0.0
    beam_radius: float | None = None
    temperature_K: float | None = None
    detail: str = ""
    kind: str = "slab"
    phase_only: bool = False

    def __post_init__(self) -> None:
        if not self.thickness >= 0 or not np.isfinite(self.thickness):
            raise InputError(
                "a slab needs a thickness", value=self.thickness, allowed="a length of 0 or more"
            )
        if not 0 <= self.angle < np.pi / 2:
            raise InputError(
                "an angle of incidence outside its range",
                value=self.angle,
                allowed="0 deg up to below 90 deg",
            )
        if not 0 <= self.reflectance < 1:
            raise InputError(
                "a reflectance outside its range", value=self.reflectance, allowed="0 to below 1"
            )
        if self.angle > 0 and self.faces in ("fresnel", "echoes") and self.polarisation is None:
            raise InputError(
                "a tilted slab with reflecting faces needs a polarisation",
                allowed='polarisation = "p" or "s"',
            )

    @property
    def length(self) -> float:
        """The thickness, m: what phase and B-integral are counted per."""
        return self.thickness

    @property
    def footprint(self) -> float:
        """Room along the beam, m: the thickness."""
        return self.thickness

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """i (omega/c) d [sqrt(n^2 - sin^2) - cos], as a Taylor series: see `Element.exponent`."""
        if self.angle == 0:
            excess = self.medium.refraction(omega, count, view)
        else:
            chi = self.medium.response.series(np.asarray(omega), count, view)
            excess = quotient(chi, self._root_plus_cosine(chi))
        return product(variable(np.asarray(omega), count), excess) * (1j * self.thickness / SPEED_OF_LIGHT)

    def _root_plus_cosine(self, chi: Series) -> Series:
        series = normal_index(chi, self.angle)
        series[0] += np.cos(self.angle)
        return series

    def factor(self, omega: Numbers, view: View = View.AXIS) -> Complex | None:
        """Loss and echoes of the two faces at omega (rad/s), shape kept; None where faces are ideal."""
        if self.faces == "ideal":
            return None
        if self.faces == "reflectance":
            return np.full(np.shape(omega), 1 - self.reflectance, dtype=complex)
        squared = self._reflection_squared(omega, view)
        if self.faces == "fresnel":
            return 1 - squared
        return (1 - squared) / (1 - squared * self._round_trip(omega, view))

    def _reflection_squared(self, omega: Numbers, view: View) -> Complex:
        chi = self.medium.susceptibility(omega, view)
        q = self._root_plus_cosine(chi[None])[0] - np.cos(self.angle)
        return reflection_squared(chi, q, float(np.cos(self.angle)), self.polarisation or "s")

    def face_reflectance(self, omega: float) -> float:
        """Power reflected by one bare face at omega (rad/s); s polarisation where none is stated."""
        return float(abs(self._reflection_squared(np.array(omega), View.AXIS)))

    def _round_trip(self, omega: Numbers, view: View) -> Complex:
        """exp(2 i omega d q / c)."""
        vacuum = 1j * np.asarray(omega) * (self.thickness * np.cos(self.angle) / SPEED_OF_LIGHT)
        return np.asarray(np.exp(2 * (self.exponent(omega, 1, view)[0] + vacuum)))

    def echo(self, omega: float) -> tuple[float, complex]:
        """Delay in s of one round trip inside (its group delay at omega) and its complex amplitude ratio."""
        at = np.array(omega)
        direct = self.exponent(at, 2, View.PRINTED)[1]
        delay = 2 * (float(np.imag(direct)) + self.thickness * np.cos(self.angle) / SPEED_OF_LIGHT)
        ratio = self._reflection_squared(at, View.PRINTED) * self._round_trip(at, View.PRINTED)
        return delay, complex(ratio)

    def ringing(self, low: float, high: float) -> float:
        """The longest of the lines' decay and the echoes' in s, for light between low and high (rad/s)."""
        lines = self.medium.ringing(low, high) * DEPTH_OF_DECAY
        if self.faces != "echoes":
            return lines
        delay, ratio = self.echo(0.5 * (max(low, 0.0) + high))
        if ratio == 0:
            return lines
        trips = np.ceil(DEPTH_OF_DECAY / max(-np.log(abs(ratio)), LEAST_DECAY))
        return lines + float(delay * trips)
