"""A lens: the dispersion of its glasses on the axis, and the difference of arrival between its rays.

In a lens the rays have phase delays of one length, not group delays: with thin elements of power P_i and
index n_i, in contact, the axial ray arrives later than the ray at radius r by

    (r^2 / 2 c) sum_i P_i |lambda d n_i/d lambda| / (n_i - 1),

where lambda d/d lambda = -omega d/d omega and dn/d lambda < 0. An achromat, sum_i P_i (dn_i/d lambda) /
(n_i - 1) = 0, makes it vanish. Sources, from memory: Z. Bor, J. Mod. Opt. 35, 1907 (1988); J.-C. Diels,
W. Rudolph, Ultrashort Laser Pulse Phenomena (Academic Press), chapter 2.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from pulseprop.constants import FEMTO, SPEED_OF_LIGHT
from pulseprop.elements.group import Group
from pulseprop.elements.telling import NOTICEABLE, Light
from pulseprop.elements.words import in_unit
from pulseprop.errors import InputError
from pulseprop.material.response import View
from pulseprop.units import show

__all__ = ["Lens"]

AGREEMENT = 0.05
"""Thin elements in contact add their powers; thick ones depart from that by a few per cent."""


@dataclass(frozen=True, kw_only=True)
class Lens(Group):
    """centre: of the pulse, rad/s. focal_length: of the whole, m. focal_lengths: of each glass alone, m, in
    the order of `parts`; None where it is not known. marginal_radius: m, at which rays are compared.

    Raises InputError where the powers of the glasses do not add up to that of the whole.
    """

    centre: float
    focal_length: float | None = None
    focal_lengths: tuple[float | None, ...] = ()
    marginal_radius: float | None = None

    def __post_init__(self) -> None:
        super().__post_init__()
        powers = self._powers_of_glasses()
        if powers is None or self.focal_length is None:
            return
        if abs(sum(powers) - 1 / self.focal_length) > AGREEMENT * sum(map(abs, powers)):
            raise InputError(
                "the focal lengths of the glasses do not make that of the lens",
                value=f"1/({in_unit(1 / sum(powers), 'mm')}) in sum" if sum(powers) else "no power in sum",
                allowed=f"a sum of 1/({in_unit(self.focal_length, 'mm')}), within {AGREEMENT:.0%}",
                place="focal_length",
            )

    def _powers_of_glasses(self) -> tuple[float, ...] | None:
        """1/m of each glass, None where one is not known."""
        known = [1 / length for length in self.focal_lengths if length is not None]
        return tuple(known) if known and len(known) == len(self.parts) else None

    @property
    def _powers(self) -> tuple[float, ...] | None:
        if len(self.parts) == 1 and self.focal_length is not None:
            return (1 / self.focal_length,)
        return self._powers_of_glasses()

    @property
    def arrival_difference(self) -> float | None:
        """By how many s the axial ray is later than the marginal one; None where it cannot be known."""
        powers, radius = self._powers, self.marginal_radius
        if powers is None or radius is None:
            return None
        total = 0.0
        for power, medium in zip(powers, self.media, strict=True):
            excess, slope = np.real(medium.refraction(np.array(self.centre), 2, View.PRINTED))
            total += power * self.centre * slope / excess
        return float(radius**2 / (2 * SPEED_OF_LIGHT) * total)

    @property
    def figures(self) -> Mapping[str, float | None]:
        """The difference of arrival."""
        difference = self.arrival_difference
        return {"arrival_difference_fs": None if difference is None else difference * FEMTO}

    @property
    def notes(self) -> tuple[str, ...]:
        """The difference of arrival in words, or why it is not known."""
        difference, radius = self.arrival_difference, self.marginal_radius
        if difference is None or radius is None:
            return (f"{self.name}: difference of arrival between marginal and axial ray: {self._missing()}",)
        order = "before" if difference >= 0 else "after"
        return (
            f"{self.name}: the ray at {in_unit(radius, 'mm', 3)} arrives {show(abs(difference), 'fs', 3)} "
            f"{order} the axial one; the orders are those on the axis",
        )

    def _missing(self) -> str:
        if self.marginal_radius is None:
            return "not known without beam_radius"
        if len(self.parts) == 1:
            return "not known without focal_length"
        return "not known for a lens of several glasses without the focal_length of each"

    def warnings(self, light: Light) -> tuple[str, ...]:
        """A difference of arrival that counts beside the pulse."""
        difference = abs(self.arrival_difference or 0.0)
        if difference <= NOTICEABLE * light.duration:
            return ()
        return (
            f"{self.name}: marginal and axial ray arrive {show(difference, 'fs', 3)} apart, beside a pulse "
            f"that could be {show(light.duration, 'fs', 3)} long: the focus is longer in time than the rows "
            "of the budget say; an achromat, a mirror or a smaller beam avoids it",
        )
