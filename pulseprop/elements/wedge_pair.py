"""A pair of equal thin wedges, one turned against the other: a plate of variable thickness.

Moved across the beam by x, parallel to its outer face, a wedge of angle a adds x tan(a) of glass; both moved
by x, in opposite directions, add 2 x tan(a) and leave the beam where it was. The pair is a plane-parallel
plate of that thickness; the thin gap between the wedges is taken as vacuum and as part of the way outside
(the dispersion of the angle in it is 1e-3 fs^2 a mm for 4 deg of fused silica at 800 nm).
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.faces import Polarisation
from pulseprop.elements.slab import Slab
from pulseprop.elements.words import in_unit
from pulseprop.errors import InputError
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.numerics.series import Numbers, Series

__all__ = ["WedgePair", "glass_at"]

Complex = NDArray[np.complex128]

CLEARANCE = 3.0
"""Beam radii that the beam should stay away from the tips (common practice, no source)."""
FAINT = 1e-6
"""Faces that reflect less make no beam."""


def glass_at(base: float, insertion: float, apex_angle: float, moved: int) -> float:
    """Glass in m with `moved` wedges (1 or 2) moved in by `insertion` (m) from where there is `base` (m)."""
    return float(base + moved * insertion * np.tan(apex_angle))


@dataclass(frozen=True, kw_only=True)
class WedgePair:
    """glass: thickness of both wedges together where the beam crosses them, m, 0 or more, counted across
    their outer faces. angle: of incidence outside, rad. faces, reflectance, polarisation: as for a slab, of
    four faces at that angle. centre: of the pulse, rad/s. apex_angle: of each wedge, rad, where stated.

    Raises InputError for values outside.
    """

    name: str
    medium: Medium
    glass: float
    centre: float
    angle: float = 0.0
    polarisation: Polarisation | None = None
    faces: Literal["ideal", "fresnel", "reflectance"] = "ideal"
    reflectance: float = 0.0
    apex_angle: float | None = None
    beam_radius: float | None = None
    temperature_K: float | None = None
    detail: str = ""
    kind: str = "wedge pair"
    phase_only: bool = False

    def __post_init__(self) -> None:
        if not self.glass >= 0:
            raise InputError(
                "the beam would miss the wedges",
                value=f"{in_unit(self.glass, 'mm')} of glass",
                allowed="a setting with 0 mm of glass or more",
            )
        self.plate  # noqa: B018  refuses an angle, a reflectance or faces that no plate has

    @cached_property
    def plate(self) -> Slab:
        """The plate that the two wedges make."""
        return Slab(
            name=self.name,
            medium=self.medium,
            thickness=self.glass,
            angle=self.angle,
            polarisation=self.polarisation,
            faces=self.faces,
            reflectance=self.reflectance,
        )

    @property
    def length(self) -> float:
        """The glass, m."""
        return self.glass

    @property
    def footprint(self) -> float:
        """Room along the beam, m: the glass."""
        return self.glass

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """That of the plate."""
        return self.plate.exponent(omega, count, view)

    def factor(self, omega: Numbers, view: View = View.AXIS) -> Complex | None:
        """Loss at four faces; None where they are ideal."""
        two = self.plate.factor(omega, view)
        return None if two is None else np.asarray(two**2)

    def ringing(self, low: float, high: float) -> float:
        """That of lines in the glass: the faces are not parallel, and echoes leave the beam."""
        return self.plate.ringing(low, high)

    @property
    def remarks(self) -> tuple[str, ...]:
        """That the beam comes near the tips."""
        if self.apex_angle is None or self.beam_radius is None:
            return ()
        away = 0.5 * self.glass / np.tan(self.apex_angle)
        if away >= CLEARANCE * self.beam_radius:
            return ()
        return (
            f"{self.name}: the beam's axis passes {in_unit(away, 'mm', 3)} from the tips of the wedges, "
            f"less than {CLEARANCE:g} beam radii of {in_unit(self.beam_radius, 'mm', 3)}: part of it misses "
            "the glass",
        )

    @property
    def stray_beams(self) -> tuple[str, ...]:
        """What its faces reflect."""
        stated = self.faces == "reflectance"
        share = self.reflectance if stated else self.plate.face_reflectance(self.centre)
        if share < FAINT:
            return ()
        how = "" if self.faces == "fresnel" else " as stated" if stated else " if uncoated"
        return (f"{self.name}: each of four faces reflects about {100 * share:.2g} %{how}",)
