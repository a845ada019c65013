"""A pair of parallel gratings, and the stretcher of the opposite sign.

Between the gratings, G apart along their normal, a plane wave of frequency omega keeps its component along
the grooves' plane, k_t = -m 2 pi/d - (omega/c) sin(incidence), and gathers the phase G sqrt((omega/c)^2 -
k_t^2) = (omega/c) G cos(theta_d) on each pass; all else is constant or linear in omega. Source: E. B. Treacy,
IEEE J. Quantum Electron. QE-5, 454 (1969), order -1; any order m in sin(theta_d) = -m lambda/d -
sin(incidence), both angles positive on one side of the normal.

Light is diffracted up to the wavelength at which theta_d reaches 90 deg. Short of that no grating has any
efficiency left, and none is long enough: what would leave within 3 deg of the surface is lost.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.elements.device import DARK, Device, require_diffraction, without_delay
from pulseprop.elements.edges import amplitude_on, missed, require_beam
from pulseprop.elements.telling import Light
from pulseprop.elements.wedges import GRAZING
from pulseprop.elements.words import in_unit, nanometres, times
from pulseprop.errors import InputError, RangeError
from pulseprop.material.response import Band, View
from pulseprop.numerics.series import Numbers, Series, product, root, variable

__all__ = ["GratingPair"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Mask = NDArray[np.bool_]

RIGHT_ANGLE = 0.5 * np.pi
CLEARANCE = 3.0
"""Beam radii that two beams should lie apart where one passes an edge (common practice, no source)."""
NEAR_LITTROW = np.radians(2.0)
"""Angle between incident and diffracted beam below which they overlap on most benches (common practice, no
source): used where the beam's radius is not known."""


@dataclass(frozen=True, kw_only=True)
class GratingPair(Device):
    """grooves: per m. incidence: rad, between -pi/2 and pi/2. separation: m along the normal, 0 or more.
    order: not 0. passes: through the pair, two with a mirror at its end. efficiency: energy share of each
    diffraction, two a pass. width: m, of the second grating, centred on the carrier; it needs beam_radius.
    stretches: the opposite sign, by a telescope without aberration.

    Raises InputError for values outside, RangeError where the centre is not diffracted.
    """

    grooves: float
    incidence: float
    separation: float
    order: int = -1
    passes: int = 2
    efficiency: float = 1.0
    width: float | None = None
    stretches: bool = False

    def __post_init__(self) -> None:
        require_diffraction(self.order, self.passes, self.efficiency)
        require_beam(self.width, self.beam_radius)
        if not self.separation >= 0:
            raise InputError("no such separation", value=self.separation, allowed="a length of 0 or more")
        if not abs(self.incidence) < RIGHT_ANGLE:
            raise InputError("the beam would not meet the grating", allowed="angles below 90 deg")
        if not self._normal(np.array(self.centre), 1)[1]:
            raise RangeError(
                "the gratings do not diffract the centre of the pulse",
                value=nanometres(self.centre),
                allowed=f"wavelengths below {nanometres(self._leaving_at(GRAZING))}, where they leave at "
                "3 deg or more from the surface",
                remedy=self.remedy_beyond(self.centre, self.centre),
            )

    @property
    def kind(self) -> str:
        """Grating pair or stretcher."""
        return "stretcher" if self.stretches else "grating pair"

    @property
    def detail(self) -> str:
        """Grooves, incidence, separation, passes."""
        return (
            f"{in_unit(self.grooves, '/mm')}, {in_unit(self.incidence, 'deg')}, "
            f"{in_unit(self.separation, 'mm')} apart, {times(self.passes, 'pass', 'passes')}"
        )

    @property
    def band(self) -> Band:
        """From where theta_d reaches 90 deg on, rad/s."""
        return Band(self._leaving_at(RIGHT_ANGLE), np.inf)

    def _leaving_at(self, angle: float) -> float:
        """The frequency in rad/s diffracted at theta_d = angle, on the long-wave side."""
        return abs(self._momentum) * SPEED_OF_LIGHT / (float(np.sin(angle)) + self._towards)

    @property
    def _momentum(self) -> float:
        """-m 2 pi/d, 1/m."""
        return -self.order * 2 * np.pi * self.grooves

    @property
    def _towards(self) -> float:
        """Sine of the incidence, counted as positive where it turns the diffracted beam to the normal."""
        return float(np.sign(self._momentum) * np.sin(self.incidence))

    def remedy_beyond(self, low: float, high: float) -> str:
        """The incidence that would diffract light down to `low`, rad/s."""
        sine = abs(self._momentum) * SPEED_OF_LIGHT / low - np.sin(GRAZING)
        fewer = "Take gratings of fewer grooves"
        if sine >= np.sin(GRAZING):
            return fewer
        angle = np.sign(self._momentum) * np.arcsin(max(sine, -1.0))
        bound = "above" if self._momentum > 0 else "below"
        return (
            f"Diffraction of all of it needs an incidence {bound} {in_unit(angle, 'deg')}, or fewer grooves"
        )

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """i times the phase, and the loss of the diffractions; dark where there is no diffraction."""
        omega = np.asarray(omega)
        normal, arrives = self._normal(omega, count)
        at_centre, _ = self._normal(np.array(self.centre), 2)
        sign = -1j if self.stretches else 1j
        phase = without_delay(normal, omega, at_centre, self.centre)
        exponent = np.where(arrives, sign * self.passes * self.separation * phase, 0.0)
        exponent[0] += np.where(arrives, self.passes * np.log(self.efficiency), DARK)
        return np.asarray(exponent)

    def _normal(self, omega: Numbers, count: int) -> tuple[Series, Mask]:
        """Component of the wave vector along the normal, 1/m, and where light comes off the grating."""
        wave = variable(omega, count) / SPEED_OF_LIGHT
        along = self._along(wave)
        squared = product(wave - along, wave + along)
        arrives = np.asarray(np.real(squared[0]) > (np.cos(GRAZING) * np.real(wave[0])) ** 2)
        squared[0] = np.where(arrives, squared[0], 1.0)
        return root(squared, np.sqrt(squared[0])), arrives

    def _along(self, wave: Series) -> Series:
        along = -np.sin(self.incidence) * wave
        along[0] += self._momentum
        return np.asarray(along)

    def diffraction_angle(self, omega: Numbers | float) -> Real:
        """theta_d in rad at omega (rad/s), shape kept; NaN where there is no diffraction."""
        wave = np.asarray(omega, dtype=float) / SPEED_OF_LIGHT
        sine = self._along(wave[None])[0] / wave
        return np.asarray(np.arcsin(np.where(np.abs(sine) < 1, sine, np.nan)))

    @property
    def littrow(self) -> float | None:
        """Incidence in rad at which the diffracted beam runs back into the incident one, None without."""
        sine = self._momentum * SPEED_OF_LIGHT / (2 * self.centre)
        return float(np.arcsin(sine)) if abs(sine) < 1 else None

    def factor(self, omega: Numbers, view: View = View.AXIS) -> Complex | None:
        """Amplitude that meets the second grating, shape of omega; None where its width is not stated."""
        if self.width is None or self.beam_radius is None:
            return None
        return amplitude_on(self.width, self.landing(omega), self.beam_radius / np.cos(self.incidence))

    def landing(self, omega: Numbers | float) -> Real:
        """Where light of omega (rad/s) meets the second grating, m from the carrier; NaN where nothing
        does."""
        carrier = np.tan(self.diffraction_angle(self.centre))
        return np.asarray(self.separation * (np.tan(self.diffraction_angle(omega)) - carrier))

    @property
    def footprint(self) -> float:
        """Length of the carrier's way from grating to grating, m."""
        return float(self.separation / np.cos(self.diffraction_angle(self.centre)))

    @property
    def clearance(self) -> float:
        """Distance in m of the incident beam from where the carrier meets the second grating."""
        apart = abs(float(self.diffraction_angle(self.centre)) - self.incidence)
        return self.footprint * float(np.sin(min(apart, RIGHT_ANGLE)))

    @property
    def remarks(self) -> tuple[str, ...]:
        """That the second grating stands in the incident beam, near Littrow's angle."""
        angle = float(self.diffraction_angle(self.centre))
        if self.beam_radius is None:
            blocked = abs(angle - self.incidence) < NEAR_LITTROW
        else:
            needed = CLEARANCE * self.beam_radius + 0.5 * (self.width or 0.0) * np.cos(angle)
            blocked = self.clearance < needed
        if not blocked or self.separation == 0:
            return ()
        return (
            f"{self.name}: the incident beam passes the second grating at {in_unit(self.clearance, 'mm', 3)} "
            f"({in_unit(abs(angle - self.incidence), 'deg', 3)} between incident and diffracted beam): it "
            "needs an offset in height, or another incidence",
        )

    @property
    def figures(self) -> Mapping[str, float | None]:
        """What a person sets up by."""
        return {
            "diffraction_angle_deg": float(np.degrees(self.diffraction_angle(self.centre))),
            "littrow_angle_deg": None if self.littrow is None else float(np.degrees(self.littrow)),
            "incidence_beyond_littrow_deg": (
                None if self.littrow is None else float(np.degrees(self.incidence - self.littrow))
            ),
            "distance_along_beam_mm": self.footprint * 1e3,
            "beam_passes_second_grating_at_mm": self.clearance * 1e3,
        }

    @property
    def notes(self) -> tuple[str, ...]:
        """None."""
        return ()

    def warnings(self, light: Light) -> tuple[str, ...]:
        """How much misses the second grating."""
        return missed(self.name, self.factor(light.omega), light, "the second grating")

    @property
    def stray_beams(self) -> tuple[str, ...]:
        """The zero orders."""
        loss = "" if self.efficiency == 1 else f", up to {100 * (1 - self.efficiency):.2g} % of the light"
        return (
            f"{self.name}: the zero order of each grating leaves at {in_unit(abs(self.incidence), 'deg', 3)} "
            f"on the other side of its normal, {2 * self.passes} times{loss}",
        )
