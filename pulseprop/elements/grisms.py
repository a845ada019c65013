"""A pair of grisms: transmission gratings on the second faces of two prisms, exact.

Light meets the entry face of the first prism, crosses its glass, is diffracted out of the grating, crosses
the gap and passes the second grism the other way round. With plane waves from wavefront to wavefront (see
`elements.wedges`) the phase holds glass, prisms and gratings at once: the carrier's prism angles bend the
third order that gratings alone leave. Grating equation as for `GratingPair`: order -1 turns the beam back
towards the normal and beyond, sin(theta_d) = n sin(theta inside) + m lambda/d, where the angle inside is
apex_angle less that of refraction at the entry face, and angles count away from the edge of the prism.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.device import DARK, Device, require_count, require_share, without_delay
from pulseprop.elements.edges import missed, share_between
from pulseprop.elements.telling import Light
from pulseprop.elements.wedges import Wedge, Wedges
from pulseprop.elements.words import in_unit, nanometres, times
from pulseprop.errors import InputError, RangeError
from pulseprop.material.medium import Medium
from pulseprop.material.response import Band, View
from pulseprop.numerics.series import Numbers, Series

__all__ = ["GrismPair"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

RIGHT_ANGLE = 0.5 * np.pi
PLACES = 1025
HALVINGS = 60
FARTHEST = 4.0
"""The band is looked for within this factor of the centre frequency, and within the medium's record."""


@dataclass(frozen=True, kw_only=True)
class GrismPair(Device):
    """medium: of the prisms. apex_angle: between entry face and grating, rad, 0 to below pi/2. incidence: on
    the entry face, rad. grooves: per m. separation: of the gratings along their normal, m. insertion,
    second_insertion: m along the grating from the prism's edge to the carrier (the same where the second is
    None). order: not 0. efficiency: of each diffraction, two a pass. width: m, of the second grating, centred
    on the carrier; it needs beam_radius.

    Raises InputError for values outside, RangeError where the centre is not diffracted.
    """

    medium: Medium
    grooves: float
    apex_angle: float
    incidence: float
    separation: float
    insertion: float
    second_insertion: float | None = None
    order: int = -1
    passes: int = 2
    efficiency: float = 1.0
    width: float | None = None
    kind: str = "grism pair"

    def __post_init__(self) -> None:
        require_count(self.passes, "passes")
        require_share(self.efficiency, "an efficiency")
        if min(self.separation, self.insertion, self.second) < 0:
            raise InputError("a distance below 0", allowed="separation and insertions of 0 or more")
        if not (abs(self.incidence) < RIGHT_ANGLE and 0 <= self.apex_angle < RIGHT_ANGLE):
            raise InputError("the beam would not meet the faces", allowed="angles below 90 deg")
        if self.order == 0:
            raise InputError("order 0 is no diffraction", value=0, allowed="-1, 1, -2, ...")
        if self.width is not None and self.beam_radius is None:
            raise InputError(
                "what misses a grating of this width depends on the beam",
                remedy="State beam_radius, of the element or in [pulse]",
            )
        if not self._leaves(np.array(self.centre)):
            raise RangeError(
                "the gratings do not diffract the centre of the pulse out of the glass",
                value=nanometres(self.centre),
                remedy="Change incidence, apex_angle or grooves",
            )

    @property
    def second(self) -> float:
        """Insertion of the second grism, m."""
        return self.insertion if self.second_insertion is None else self.second_insertion

    @property
    def detail(self) -> str:
        """Medium, grooves, incidence, separation, passes."""
        return (
            f"{self.medium.name}, {in_unit(self.apex_angle, 'deg')} apex, {in_unit(self.grooves, '/mm')}, "
            f"{in_unit(self.incidence, 'deg')}, {in_unit(self.separation, 'mm')} apart, "
            f"{times(self.passes, 'pass', 'passes')}"
        )

    @cached_property
    def wedges(self) -> Wedges:
        """The same as two wedges with gratings."""
        momentum = self.order * 2 * np.pi * self.grooves
        return Wedges(
            wedge=Wedge(
                medium=self.medium, apex=self.apex_angle, incidence=self.incidence, momentum=momentum
            ),
            centre=self.centre,
            first=self.insertion,
            second=self.second,
            gap=self.separation,
        )

    @property
    def length(self) -> float:
        """The carrier's way in glass over all passes, m."""
        return self.passes * self.wedges.glass()

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """i times the phase, and the loss of the diffractions; dark where nothing is diffracted."""
        omega = np.asarray(omega)
        found, leaves = self.wedges.phase(omega, count, view)
        at_centre, _ = self.wedges.phase(np.array(self.centre), 2, view)
        phase = self.passes * without_delay(found, omega, at_centre, self.centre)
        exponent = np.where(leaves, 1j * phase, 0.0)
        exponent[0] = np.minimum(exponent[0].real, 0.0) + 1j * exponent[0].imag
        exponent[0] += np.where(leaves, self.passes * np.log(self.efficiency), DARK)
        return np.asarray(exponent)

    def _leaves(self, omega: Real) -> NDArray[np.bool_]:
        return np.asarray(np.isfinite(self.wedges.wedge.angles(omega)[2]))

    @cached_property
    def band(self) -> Band:
        """Around the centre, where the gratings diffract, rad/s."""
        medium = self.medium.band
        low = self._end(max(medium.low, self.centre / FARTHEST), 0.0)
        return Band(low, self._end(min(medium.high, FARTHEST * self.centre), np.inf))

    def _end(self, farthest: float, beyond: float) -> float:
        """Where diffraction stops on the way to `farthest`; `beyond` where it does not."""
        places = np.linspace(self.centre, farthest, PLACES)
        lost = ~self._leaves(places)
        if not lost.any():
            return beyond
        first = int(np.argmax(lost))
        inside, outside = float(places[first - 1]), float(places[first])
        for _ in range(HALVINGS):
            middle = 0.5 * (inside + outside)
            inside, outside = (middle, outside) if self._leaves(np.array(middle)) else (inside, middle)
        return inside

    def remedy_beyond(self, low: float, high: float) -> str:
        """What to change."""
        return "Change the incidence, or take gratings of fewer grooves"

    def landing(self, omega: Numbers | float) -> Real:
        """Where light of omega (rad/s) meets the second grating, m from the carrier; NaN where nothing
        does."""
        return self.second - self.wedges.second_crossing(omega)[0]

    def factor(self, omega: Numbers, view: View = View.AXIS) -> Complex | None:
        """Amplitude that meets the second grating, shape of omega; None where its width is not stated."""
        if self.width is None or self.beam_radius is None:
            return None
        offset = self.landing(omega)
        entry, inside, _ = self.wedges.carrier
        spot = self.beam_radius / np.cos(self.incidence) * float(np.cos(entry) / np.cos(inside))
        share = share_between(0.5 * self.width - offset, 0.5 * self.width + offset, spot)
        return np.asarray(np.sqrt(np.where(np.isfinite(offset), share, 0.0)), dtype=complex)

    @property
    def footprint(self) -> float:
        """The carrier's way from grating to grating and in glass, m."""
        return float(self.separation / np.cos(self.wedges.carrier[2])) + self.wedges.glass()

    @property
    def figures(self) -> Mapping[str, float | None]:
        """What a person sets up by."""
        _, inside, outside = self.wedges.carrier
        return {
            "angle_in_glass_at_grating_deg": float(np.degrees(inside)),
            "diffraction_angle_deg": float(np.degrees(outside)),
            "distance_along_beam_mm": float(self.separation / np.cos(outside)) * 1e3,
            "glass_mm_a_pass": self.wedges.glass() * 1e3,
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
            f"{self.name}: zero orders stay in the prisms or leave by their other faces, "
            f"{2 * self.passes} times{loss}",
        )
