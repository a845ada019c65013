"""A waveplate: one answer for each of its axes, and what lies between them.

Light along one axis sees the ordinary index in every plate, or the extraordinary one in crossed plates. Light
that lies along neither leaves as two pulses apart by the difference of the group delays (the walk-off).
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from pulseprop.constants import FEMTO
from pulseprop.elements.element import orders_of_element
from pulseprop.elements.group import Group
from pulseprop.elements.telling import NOTICEABLE, Light
from pulseprop.elements.words import nanometres
from pulseprop.material.response import View
from pulseprop.units import show

__all__ = ["Waveplate"]


@dataclass(frozen=True, kw_only=True)
class Waveplate(Group):
    """centre: of the pulse, rad/s. axis: along which the pulse is polarised. other: the same plates as light
    along the other axis sees them."""

    centre: float
    axis: str
    other: Group

    @property
    def retardance(self) -> float:
        """Phase between the two axes at the centre, waves, 0 or more."""
        at = np.array(self.centre)
        phases = [np.imag(axis.exponent(at, 1, View.PRINTED)[0]) for axis in (self, self.other)]
        return float(abs(phases[0] - phases[1]) / (2 * np.pi))

    @property
    def walk_off(self) -> float:
        """By how many s light along the other axis is later at the centre; negative where it is earlier."""
        return orders_of_element(self.other, self.centre)[0] - orders_of_element(self, self.centre)[0]

    @property
    def figures(self) -> Mapping[str, float | None]:
        """Retardance, walk-off, and the orders along the other axis."""
        delay, gdd, tod, fod = orders_of_element(self.other, self.centre)
        return {
            "retardance_waves": self.retardance,
            "walk_off_fs": self.walk_off * FEMTO,
            "other_axis_group_delay_fs": delay * FEMTO,
            "other_axis_gdd_fs2": gdd * FEMTO**2,
            "other_axis_tod_fs3": tod * FEMTO**3,
            "other_axis_fod_fs4": fod * FEMTO**4,
        }

    @property
    def notes(self) -> tuple[str, ...]:
        """The same in words."""
        figures = self.figures
        other = "extraordinary" if self.axis == "ordinary" else "ordinary"
        wavelength = nanometres(self.centre, 4)
        order = "later" if self.walk_off >= 0 else "earlier"
        return (
            f"{self.name}: {figures['retardance_waves']:.4g} waves between the axes at {wavelength} "
            f"(order {int(self.retardance)}); the pulse is taken along the {self.axis} axis of plates that "
            f"are not crossed; along the {other} one it leaves {show(abs(self.walk_off), 'fs', 3)} {order}, "
            f"with {figures['other_axis_gdd_fs2']:.4g} fs^2, {figures['other_axis_tod_fs3']:.4g} fs^3",
        )

    def warnings(self, light: Light) -> tuple[str, ...]:
        """A walk-off that counts beside the pulse."""
        if abs(self.walk_off) <= NOTICEABLE * light.duration:
            return ()
        return (
            f"{self.name}: light that is not polarised along one axis leaves as two pulses "
            f"{show(abs(self.walk_off), 'fs', 3)} apart, beside a pulse that could be "
            f"{show(light.duration, 'fs', 3)} long; this path follows the {self.axis} axis only",
        )
