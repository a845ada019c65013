"""A pulse of a named shape: what a scenario says, and its spectrum at any frequency."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.measures.widths import peak
from pulseprop.pulse.shapes import Shape, shape_named
from pulseprop.pulse.source import SpectralPhase, finite_number, in_blocks, launch, positive_number

__all__ = ["Pulse", "closing"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

CLOSING_SHARE = 0.25
"""The spectrum closes between zero frequency and this share of the centre frequency, where it has to."""

REACH_MARGIN = 1.2
"""By how much the wings of a chirped pulse may reach beyond the sum of shape and group delays."""

CLOSED_WINGS = 60.0
"""Reach of the field of the closed part in inverse widths of the closing: its power is then below 1e-9."""

SMALL_AT_ZERO = 1e-9
"""Amplitude at zero frequency over that at the centre, below which the spectrum simply ends there."""

NOTED_CUT, LARGEST_CUT = 1e-6, 1e-3
"""Share of the energy cut at zero frequency from which it is noted, and from which it is refused."""


def closing(x: Real) -> Real:
    """A step from 0 at x <= 0 to 1 at x >= 1, with all derivatives continuous."""
    inside = np.clip(x, 1e-12, 1 - 1e-12)
    with np.errstate(over="ignore"):
        step = 1 / (1 + np.exp(1 / inside - 1 / (1 - inside)))
    return np.where(x <= 0, 0.0, np.where(x >= 1, 1.0, step))


@dataclass(frozen=True, kw_only=True)
class Pulse:
    """A pulse as launched.

    centre: angular frequency of the shape's middle, rad/s. duration: intensity FWHM at the transform limit,
    s. energy: J. gdd, tod, fod: s^2, s^3, s^4 about the centre; positive gdd is red first. carrier_phase:
    rad, added to the phase of every frequency. beam_radius: 1/e^2 intensity radius, m. repetition_rate: Hz.

    Where more than 1e-9 of the peak amplitude stands at zero frequency, the spectrum is multiplied by
    `closing` between zero and a quarter of the centre frequency and the rest scaled up to the energy; above
    1e-6 of the energy this is noted, above 1e-3 refused. Raises InputError for that and for numbers that are
    not finite or positive.
    """

    centre: float
    duration: float
    energy: float
    shape: Shape = field(default_factory=lambda: shape_named("gaussian"))
    gdd: float = 0.0
    tod: float = 0.0
    fod: float = 0.0
    carrier_phase: float = 0.0
    beam_radius: float | None = None
    repetition_rate: float | None = None

    def __post_init__(self) -> None:
        positive_number(self.centre, "centre", "rad/s")
        positive_number(self.duration, "duration", "seconds")
        positive_number(self.energy, "energy", "joules")
        positive_number(self.beam_radius, "beam radius", "metres", optional=True)
        positive_number(self.repetition_rate, "repetition rate", "hertz", optional=True)
        for name in ("gdd", "tod", "fod", "carrier_phase"):
            finite_number(getattr(self, name), name.replace("_", " "))
        if self.energy_below_zero > LARGEST_CUT:
            raise InputError(
                f"{self.energy_below_zero:.2g} of the pulse's energy would lie below or near zero frequency",
                value=f"{self.duration:.4g} s at {self.centre / 2e12 / np.pi:.4g} THz",
                allowed=f"{LARGEST_CUT:g} of the energy",
                remedy="Give a longer duration or a higher centre, or a measured waveform E(t)",
            )

    @property
    def phase(self) -> SpectralPhase:
        """The spectral phase about the centre."""
        return SpectralPhase(constant=self.carrier_phase, gdd=self.gdd, tod=self.tod, fod=self.fod)

    @cached_property
    def _closes(self) -> bool:
        # A stretch of frequencies, because some spectra pass through zero now and then.
        below = self.shape.spectrum(self.centre * self.duration + np.linspace(0, 40, 401))
        return bool(np.abs(below).max() > SMALL_AT_ZERO * self.shape.spectrum(np.zeros(1))[0])

    @cached_property
    def energy_below_zero(self) -> float:
        """Share of the shape's energy that lies below zero frequency or is taken by the closing above it."""
        if not self._closes:
            return 0.0
        nodes, weights = np.polynomial.legendre.leggauss(16)
        edges = np.linspace(0, self.centre, 513)
        half = 0.5 * (edges[1] - edges[0])
        omega = ((edges[:-1] + half)[:, None] + half * nodes).ravel()
        power = np.square(self._spectrum(omega)) * np.tile(weights * half, 512)
        kept = float(power.sum()) * self.duration / (2 * np.pi * self.shape.energy)
        return max(0.5 - kept, 0.0)

    @property
    def notes(self) -> tuple[str, ...]:
        """What follows from the shape and the user may not expect."""
        said = []
        if self.energy_below_zero > NOTED_CUT:
            upper = CLOSING_SHARE * self.centre / 2e12 / np.pi
            said.append(
                f"{self.energy_below_zero:.2g} of the shape's energy was cut at zero frequency: "
                f"the spectrum closes smoothly below {upper:.4g} THz."
            )
        if self.shape.changes_sign:
            said.append(
                f"The spectrum of a {self.shape.name} pulse changes sign in its wings; "
                "with flat phase it would be shorter than the duration stated."
            )
        return tuple(said)

    def _spectrum(self, omega: Real) -> Real:
        """The real spectrum of the shape in units of its field, closed towards zero frequency."""
        values = self.shape.spectrum((omega - self.centre) * self.duration)
        if self._closes:
            values = values * closing(omega / (CLOSING_SHARE * self.centre))
        return values

    def amplitude(self, omega: Real) -> Complex:
        """A(omega) in W^(1/2) s at absolute angular frequencies, rad/s, of any shape; zero at and below zero.

        A = scale S((omega - centre) duration) exp(i phase), its integral of |A|^2 over ordinary frequency the
        energy.
        """
        return in_blocks(self._amplitude, omega)

    def _amplitude(self, omega: Real) -> Complex:
        reach = self.shape.spectral_end / self.duration
        inside = (omega > 0) & (np.abs(omega - self.centre) < reach)
        result = np.zeros(omega.shape, dtype=complex)
        taken = omega[inside]
        kept = self.shape.energy * (1 - self.energy_below_zero)
        scale = np.sqrt(self.energy * self.duration / kept)
        result[inside] = scale * self._spectrum(taken) * np.exp(1j * self.phase(taken - self.centre))
        return result

    def spectral_extent(self, share: float) -> tuple[float, float]:
        """Angular frequencies, rad/s, outside of which less than `share` of the energy lies.

        The lower is >= 0.
        """
        reach = self.shape.spectral_reach(share) / self.duration
        return max(self.centre - reach, 0.0), self.centre + reach

    def field_extent(self, share: float) -> tuple[float, float]:
        """Instants, s, outside of which less than `share` of the energy lies.

        The reach of the unchirped shape, with a margin, around the group delays of the spectrum, each of the
        two leaving out half of `share`. A lorentzian's power falls as t^-4: its reach goes as share^(-1/3).
        """
        reach = REACH_MARGIN * self.shape.field_reach(0.5 * share) * self.duration
        if self._closes:
            reach += CLOSED_WINGS / (CLOSING_SHARE * self.centre)
        low, high = self.spectral_extent(0.5 * share)
        first, last = self.phase.delays(low - self.centre, high - self.centre)
        return first - reach, last + reach

    @cached_property
    def peak_power(self) -> float:
        """Largest power in W of the pulse as launched, chirp included."""
        _, envelope = launch(self)
        return peak(envelope).power

    def with_peak_power(self, peak_power: float) -> Pulse:
        """The same pulse with the energy that makes its peak power, chirp included, the one given in W."""
        positive_number(peak_power, "peak power", "watts")
        return replace(self, energy=self.energy * peak_power / self.peak_power)
