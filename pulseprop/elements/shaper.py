"""A pulse shaper: a phase and a transmission over the spectrum, as far as its pixels and range can show them.

The phase is a polynomial, a table, or both. Without pixels it is shown as asked; with pixels each shows the
value in its middle. Light outside the range is blocked.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import FEMTO
from pulseprop.elements.device import Device, require_share, without_delay
from pulseprop.elements.element import orders_of_element
from pulseprop.elements.mirror_curves import OrdersOfBounce, TableOfBounce
from pulseprop.elements.pixels import Pixels
from pulseprop.elements.telling import Light
from pulseprop.elements.words import nanometres, orders_words
from pulseprop.errors import InputError
from pulseprop.material.response import Band, View
from pulseprop.numerics.series import Numbers, Series
from pulseprop.units import show

__all__ = ["Shaper", "Transmission"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

EDGE = 1 / 500
"""Of the range: standard deviation of its edges where no pixels are stated. A sharper one would ring for
ever."""
DEPTH = 21.0
"""Fields are followed down to exp(-21)."""
TOLD = 1e-6
"""Share of the light from which on it is told what happens to it."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Transmission:
    """Rows of the transmitted share of energy, 0 to 1, over omega (rad/s, ascending); straight between them,
    held beyond. Raises InputError for shares outside.
    """

    omega: Real
    share: Real

    def __post_init__(self) -> None:
        wrong = ~((self.share >= 0) & (self.share <= 1))
        if wrong.any():
            raise InputError(
                "a transmission outside its range",
                value=float(self.share[wrong][0]),
                allowed="0 to 1 (0 to 100 %)",
            )

    def amplitude(self, omega: Real) -> Real:
        """Square root of the share, shape of omega."""
        return np.asarray(np.sqrt(np.interp(omega, self.omega, self.share)))


@dataclass(frozen=True, kw_only=True)
class Shaper(Device):
    """orders, table: the phases it is asked for, which add. transmission: of the mask; transmittance: of all
    that stands around it, the same at all frequencies. range: rad/s, dark outside; None for everywhere.
    pixels: over that range. largest_step: rad, the largest phase step from pixel to pixel that shows a phase.

    Raises InputError for a transmittance outside 0 to 1, and for pixels over another range.
    """

    orders: OrdersOfBounce
    table: TableOfBounce | None = None
    transmission: Transmission | None = None
    transmittance: float = 1.0
    range: Band | None = None
    pixels: Pixels | None = None
    largest_step: float = np.pi
    detail: str = ""
    kind: str = "pulse shaper"

    def __post_init__(self) -> None:
        require_share(self.transmittance, "a transmittance")
        if self.pixels is not None and self.pixels.band != self.range:
            raise InputError("pixels need the range that they cover", remedy="Add range", place="range")

    def asked(self, omega: Numbers, count: int) -> Series:
        """The phase asked for, as it comes: Taylor coefficients about each omega, (count, *omega.shape)."""
        phase = self.orders.phase(omega, count)
        return phase if self.table is None else phase + self.table.phase(omega, count)

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """i times the phase asked for, without its delay, and the loss that all light has."""
        at_centre = self.asked(np.array(self.centre), 2)
        phase = without_delay(self.asked(omega, max(count, 2)), omega, at_centre, self.centre)[:count]
        exponent = 1j * phase
        exponent[0] += 0.5 * np.log(self.transmittance)
        return np.asarray(exponent)

    def factor(self, omega: Numbers, view: View = View.AXIS) -> Complex | None:
        """What is shown over the phase asked for; None where all of it is."""
        at = np.asarray(np.real(omega), dtype=float)
        if self.pixels is not None:
            phase = np.real(self.asked(at, 1)[0])
            return np.asarray(self.pixels.seen(self._mask, at) * np.exp(-1j * phase))
        if self.range is None and self.transmission is None:
            return None
        shown = np.ones(at.shape) if self.transmission is None else self.transmission.amplitude(at)
        return np.asarray(shown * self._edges(at), dtype=complex)

    @cached_property
    def _mask(self) -> Complex:
        """What each pixel does to the field, (pixels,)."""
        assert self.pixels is not None
        centres = self.pixels.centres
        amplitude = 1.0 if self.transmission is None else self.transmission.amplitude(centres)
        return np.asarray(amplitude * np.exp(1j * self._shown))

    @property
    def _shown(self) -> Real:
        """Phase of each pixel, rad."""
        assert self.pixels is not None
        return np.asarray(np.real(self.asked(self.pixels.centres, 1)[0]))

    def _edges(self, omega: Real) -> Real:
        """Amplitude that the range lets through."""
        if self.range is None:
            return np.ones(omega.shape)
        from scipy.special import erf

        scale = 1 / (np.sqrt(2.0) * EDGE * (self.range.high - self.range.low))
        rising, falling = erf(scale * (omega - self.range.low)), erf(scale * (omega - self.range.high))
        return np.asarray(0.5 * (rising - falling))

    def ringing(self, low: float, high: float) -> float:
        """As long after the pulse as before it; see `lead`."""
        return self.lead

    @property
    def lead(self) -> float:
        """Until the spot on the mask, or the edge of the range, has let the repetitions die, s."""
        if self.range is None:
            return 0.0
        narrowest = EDGE * (self.range.high - self.range.low)
        if self.pixels is not None:
            widths = [self.pixels.width(end) for end in (self.range.low, self.range.high)]
            narrowest = 0.5 * self.pixels.spot * min(widths)
        return float(np.sqrt(2 * DEPTH) / narrowest)

    @property
    def time_window(self) -> float | None:
        """Distance in s of the pixels' repetitions at the centre: a delay or a chirp must fit into it."""
        return None if self.pixels is None else 2 * np.pi / self.pixels.width(self.centre)

    @property
    def figures(self) -> Mapping[str, float | None]:
        """Time window, and the largest phase step of all pixels."""
        if self.pixels is None or self.time_window is None:
            return {}
        step = float(np.abs(np.diff(self._shown)).max())
        return {"time_window_fs": self.time_window * FEMTO, "largest_phase_step_rad": step}

    @property
    def notes(self) -> tuple[str, ...]:
        """What its table asks for at the centre, and what its pixels can show."""
        said = []
        if self.table is not None:
            _, gdd, tod, _ = orders_of_element(self, self.centre)
            said.append(
                f"{self.name}: its table and orders give {orders_words(gdd, tod)} at "
                f"{nanometres(self.centre, 4)}"
            )
        if self.pixels is not None and self.time_window is not None:
            said.append(
                f"{self.name}: {self.pixels.count} pixels of "
                f"{show(self.pixels.width(self.centre) / (2 * np.pi), 'THz', 3)} at the centre repeat the "
                f"answer every {show(self.time_window, 'fs', 4)}, weakened by a focus "
                f"{self.pixels.spot:.3g} pixels in radius"
            )
        return tuple(said)

    def warnings(self, light: Light) -> tuple[str, ...]:
        """Light outside the range, and light on pixels that cannot show the phase asked for."""
        return (*self._blocked(light), *self._coarse(light))

    def _blocked(self, light: Light) -> tuple[str, ...]:
        share = 0.0 if self.range is None else light.share(~self.range.contains(light.omega))
        if self.range is None or share <= TOLD:
            return ()
        return (
            f"{self.name}: {100 * share:.2g} % of the light lies outside its range, "
            f"{nanometres(self.range.high, 4)} to {nanometres(self.range.low, 4)}, and is blocked",
        )

    def _coarse(self, light: Light) -> tuple[str, ...]:
        if self.pixels is None:
            return ()
        steep = np.abs(np.diff(self._shown)) > self.largest_step
        where = np.floor(self.pixels.place(np.maximum(light.omega, 0.5 * self.pixels.band.low)) - 0.5)
        on_mask = (where >= 0) & (where < steep.size)
        share = light.share(on_mask & steep[np.clip(where, 0, steep.size - 1).astype(np.int64)])
        if share <= TOLD:
            return ()
        return (
            f"{self.name}: for {100 * share:.2g} % of the light the phase asked for changes by more than "
            f"{self.largest_step:.3g} rad from one pixel to the next: what leaves is not what was asked for; "
            "ask for less, or take more pixels over the same range",
        )
