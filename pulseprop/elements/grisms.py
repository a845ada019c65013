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

from pulseprop.elements.device import Device, require_diffraction
from pulseprop.elements.edges import amplitude_on, missed, require_beam, share_beside
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
        require_diffraction(self.order, self.passes, self.efficiency)
        require_beam(self.width, self.beam_radius)
        if min(self.separation, self.insertion, self.second) < 0:
            raise InputError("a distance below 0", allowed="separation and insertions of 0 or more")
        if not (abs(self.incidence) < RIGHT_ANGLE and 0 <= self.apex_angle < RIGHT_ANGLE):
            raise InputError("the beam would not meet the faces", allowed="angles below 90 deg")
        if not self.wedges.wedge.lets_out(self.centre):
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
        exponent = self.wedges.exponent(omega, count, view, self.passes)
        exponent[0] += self.passes * np.log(self.efficiency)
        return exponent

    @property
    def band(self) -> Band:
        """Around the centre, where the gratings diffract, rad/s."""
        return self.wedges.band

    def remedy_beyond(self, low: float, high: float) -> str:
        """What to change."""
        return "Change the incidence, or take gratings of fewer grooves"

    def landing(self, omega: Numbers | float) -> Real:
        """Where light of omega (rad/s) meets the second grating, m from the carrier; NaN where nothing
        does."""
        return self.second - self.wedges.second_crossing(omega)[0]

    def factor(self, omega: Numbers, view: View = View.AXIS) -> Complex | None:
        """Amplitude that passes the prisms' edges and meets the second grating, shape of omega; None where
        the beam is not known."""
        if self.beam_radius is None:
            return None
        crossing = self.wedges.second_crossing(omega)[0]
        reached = np.where(np.isfinite(crossing), crossing, -np.inf)
        edges = share_beside(self.insertion, self.spot) * share_beside(reached, self.spot)
        amplitude = np.asarray(np.sqrt(edges), dtype=complex)
        if self.width is None:
            return amplitude
        return amplitude * amplitude_on(self.width, self.second - crossing, self.spot)

    @property
    def spot(self) -> float:
        """1/e^2 radius of the beam on the gratings, along the way the edges lie, m; 0 where it is not
        known."""
        entry, inside, _ = self.wedges.carrier
        return (self.beam_radius or 0.0) * float(np.cos(entry) / (np.cos(self.incidence) * np.cos(inside)))

    @property
    def remarks(self) -> tuple[str, ...]:
        """That an edge stands in the beam."""
        if min(self.insertion, self.second) >= self.spot:
            return ()
        return (
            f"{self.name}: an edge of the prisms cuts into the beam, whose radius on the gratings is "
            f"{in_unit(self.spot, 'mm', 3)}: that much insertion or more is needed",
        )

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
        """How much misses prisms and gratings."""
        return missed(self.name, self.factor(light.omega), light, "the gratings")

    @property
    def stray_beams(self) -> tuple[str, ...]:
        """The zero orders."""
        loss = "" if self.efficiency == 1 else f", up to {100 * (1 - self.efficiency):.2g} % of the light"
        return (
            f"{self.name}: zero orders stay in the prisms or leave by their other faces, "
            f"{2 * self.passes} times{loss}",
        )
