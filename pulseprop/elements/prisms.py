"""A pair of prisms, exact: plane waves from wavefront to wavefront (see `elements.wedges`).

The carrier passes both prisms at minimum deviation, by default at Brewster's angle. With both insertions 0
it runs from tip to tip; there the phase is (omega/c) L cos(theta_2(omega) - theta_2(centre)). Source: R. L.
Fork, O. E. Martinez, J. P. Gordon, Opt. Lett. 9, 150 (1984), for the ray from tip to tip; insertion and all
orders follow from the same plane waves. Prisms are inserted along their bisectors, which leaves the carrier
between them where it was.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.device import Device, require_count
from pulseprop.elements.edges import missed, share_beside
from pulseprop.elements.faces import Polarisation, reflection_squared
from pulseprop.elements.telling import Light
from pulseprop.elements.wedges import Wedge, Wedges
from pulseprop.elements.words import in_unit, nanometres, times
from pulseprop.errors import InputError
from pulseprop.material.medium import Medium
from pulseprop.material.response import Band, View
from pulseprop.numerics.series import Numbers, Series

__all__ = ["PrismPair"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

PLANES: tuple[Polarisation, Polarisation] = ("p", "s")


@dataclass(frozen=True, kw_only=True)
class PrismPair(Device):
    """apex_separation: m along the carrier from tip to tip with both insertions 0. insertion,
    second_insertion: m along the bisector from the tip to the carrier (the same where the second is None).
    apex_angle: rad; Brewster's at minimum deviation where None. faces: "fresnel" counts what they reflect.

    Raises InputError for values outside, or prisms out of which the carrier does not come.
    """

    medium: Medium
    apex_separation: float
    insertion: float = 0.0
    second_insertion: float | None = None
    apex_angle: float | None = None
    passes: int = 2
    faces: Literal["ideal", "fresnel"] = "ideal"
    polarisation: Polarisation = "p"
    kind: str = "prism pair"

    def __post_init__(self) -> None:
        require_count(self.passes, "passes")
        if min(self.apex_separation, self.insertion, self.second) < 0:
            raise InputError("a distance below 0", allowed="separation and insertions of 0 or more")
        sine = self.index * np.sin(0.5 * self.apex)
        widest = 2 * float(np.arcsin(1 / self.index))
        if not (0 < self.apex < np.pi and sine < 1):
            raise InputError(
                "light does not pass prisms of this apex angle at minimum deviation",
                value=in_unit(self.apex, "deg"),
                allowed=f"below {in_unit(widest, 'deg')} for {self.medium.name}",
                remedy="Leave apex_angle out for that of Brewster's incidence",
            )
        if self._gap < 0:
            raise InputError(
                "the prisms would overlap",
                value=f"apex_separation {in_unit(self.apex_separation, 'mm')}",
                remedy="Set them farther apart, or take less insertion",
            )

    @property
    def second(self) -> float:
        """Insertion of the second prism, m."""
        return self.insertion if self.second_insertion is None else self.second_insertion

    @property
    def detail(self) -> str:
        """Medium, separation, insertions, passes."""
        return (
            f"{self.medium.name}, {in_unit(self.apex_separation, 'mm')} from tip to tip, "
            f"insertion {in_unit(self.insertion, 'mm', 3)} and {in_unit(self.second, 'mm', 3)}, "
            f"{times(self.passes, 'pass', 'passes')}"
        )

    @cached_property
    def index(self) -> float:
        """Of refraction at the centre."""
        return float(np.real(self.medium.index(np.array(self.centre), View.PRINTED)))

    @property
    def apex(self) -> float:
        """Apex angle, rad: 2 atan(1/n) puts the symmetric ray at Brewster's angle on both faces."""
        return 2 * float(np.arctan(1 / self.index)) if self.apex_angle is None else self.apex_angle

    @property
    def incidence(self) -> float:
        """On the entry face at minimum deviation, rad; the carrier leaves at the same angle."""
        return float(np.arcsin(self.index * np.sin(0.5 * self.apex)))

    @property
    def deviation(self) -> float:
        """Angle in rad by which one prism turns the carrier."""
        return 2 * self.incidence - self.apex

    @property
    def _across(self) -> float:
        """Distance of the tips across the carrier, m."""
        return sum(self.clearance)

    @property
    def _gap(self) -> float:
        """Distance of the facing surfaces, m. Insertion along the bisectors moves the tips along the carrier
        by tan(deviation/2) of what it moves them across."""
        along = self.apex_separation + self._across * np.tan(0.5 * self.deviation)
        return float(along * np.cos(self.incidence) - self._across * np.sin(self.incidence))

    @cached_property
    def wedges(self) -> Wedges:
        """The same as two wedges."""
        cosine = np.cos(0.5 * self.apex)
        return Wedges(
            wedge=Wedge(medium=self.medium, apex=self.apex, incidence=self.incidence),
            centre=self.centre,
            first=self.insertion / cosine,
            second=self.second / cosine,
            gap=self._gap,
        )

    @property
    def length(self) -> float:
        """The carrier's way in glass over all passes, m: 2 x tan(apex/2) for each insertion x."""
        return self.passes * 2 * (self.insertion + self.second) * float(np.tan(0.5 * self.apex))

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """i times the phase; dark where light is totally reflected in the first prism."""
        return self.wedges.exponent(omega, count, view, self.passes)

    @property
    def band(self) -> Band:
        """Up to where light is totally reflected at the second face of the first prism, rad/s."""
        return self.wedges.band

    def remedy_beyond(self, low: float, high: float) -> str:
        """What to change where the blue end is totally reflected."""
        return (
            f"Light below {nanometres(self.band.high)} is totally reflected in the first "
            "prism: take a smaller apex_angle, or a glass of less dispersion"
        )

    def factor(self, omega: Numbers, view: View = View.AXIS) -> Complex | None:
        """What faces reflect and tips cut off, as amplitude, shape of omega; None where neither is known."""
        amplitude = None if self.beam_radius is None else self._past_the_tips(omega, self.beam_radius)
        if self.faces == "ideal":
            return amplitude
        faces = self._through_faces(omega, view) ** self.passes
        return faces if amplitude is None else faces * amplitude

    def _past_the_tips(self, omega: Numbers, radius: float) -> Complex:
        """Each tip cuts a Gaussian beam, as the cut edge fades on the way between the prisms; once, as later
        passes find only what is left."""
        _, second = self.wedges.second_crossing(omega)
        second = np.where(np.isfinite(second), second, -np.inf)
        share = share_beside(self.clearance[0], radius) * share_beside(second, radius)
        return np.asarray(np.sqrt(share), dtype=complex)

    def _through_faces(self, omega: Numbers, view: View) -> Complex:
        """Amplitude through the four faces of one pass: each angle is met from outside and from inside."""
        chi = self.medium.susceptibility(omega, view)
        outside = np.nan_to_num(self.wedges.wedge.angles(omega)[2], nan=0.5 * np.pi)
        through = np.ones(np.shape(omega), dtype=complex)
        for cosine in (np.full(np.shape(omega), np.cos(self.incidence)), np.cos(outside)):
            inside = np.sqrt(chi + cosine**2 + 0j)
            through *= 1 - reflection_squared(chi, inside, cosine, self.polarisation)
        return through

    @property
    def clearance(self) -> tuple[float, float]:
        """Distance in m of the carrier's axis from the first tip and from the second, across the beam."""
        scale = np.cos(self.incidence) / np.cos(0.5 * self.apex)
        return float(self.insertion * scale), float(self.second * scale)

    @property
    def remarks(self) -> tuple[str, ...]:
        """That a tip stands in the beam."""
        if self.beam_radius is None or min(self.clearance) >= self.beam_radius:
            return ()
        needed = self.beam_radius * np.cos(0.5 * self.apex) / np.cos(self.incidence)
        return (
            f"{self.name}: a tip cuts into the beam; its radius of {in_unit(self.beam_radius, 'mm', 3)} "
            f"needs an insertion of {in_unit(float(needed), 'mm', 3)} or more at both prisms",
        )

    @property
    def figures(self) -> Mapping[str, float | None]:
        """What a person sets up by."""
        first, second = self.clearance
        return {
            "apex_angle_deg": float(np.degrees(self.apex)),
            "incidence_deg": float(np.degrees(self.incidence)),
            "deviation_deg": float(np.degrees(self.deviation)),
            "beam_from_first_tip_mm": first * 1e3,
            "beam_from_second_tip_mm": second * 1e3,
            "glass_mm_a_pass": self.length / self.passes * 1e3,
        }

    @property
    def notes(self) -> tuple[str, ...]:
        """None."""
        return ()

    def warnings(self, light: Light) -> tuple[str, ...]:
        """How much misses the prisms."""
        if self.beam_radius is None:
            return ()
        passed = self._past_the_tips(light.omega, self.beam_radius)
        return missed(self.name, passed, light, "the tips of the prisms")

    @property
    def stray_beams(self) -> tuple[str, ...]:
        """What the faces reflect."""
        at, cosine = np.array(self.centre), float(np.cos(self.incidence))
        chi = self.medium.susceptibility(at, View.PRINTED)
        inside = np.asarray(np.sqrt(chi + cosine**2 + 0j))
        p, s = (100 * abs(complex(reflection_squared(chi, inside, cosine, plane))) for plane in PLANES)
        return (
            f"{self.name}: each of the {4 * self.passes} faces reflects about {p:.2f} % of p-polarised and "
            f"{s:.3g} % of s-polarised light",
        )

    @property
    def footprint(self) -> float:
        """The carrier's way from tip to tip, m."""
        return self.apex_separation
