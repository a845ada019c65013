"""A pulse known from an instrument: its spectrum at any frequency, whatever it was measured as."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from pulseprop.grid import Grid
from pulseprop.measures.profile import power
from pulseprop.measures.widths import peak
from pulseprop.numerics.transforms import fast_length
from pulseprop.pulse.source import SpectralPhase, finite_number, in_blocks, launch, positive_number

__all__ = ["CutLimit", "MeasuredPulse"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


@dataclass(frozen=True)
class CutLimit:
    """cut: share of the peak below which rows count as noise. fwhm: transform limit in s that follows."""

    cut: float
    fwhm: float


@dataclass(frozen=True, kw_only=True, eq=False)
class MeasuredPulse:
    """A measured spectrum or waveform, scaled to an energy, with further phase where stated.

    unit_spectrum: A(omega) for an energy of 1 J at positive angular frequencies (K,), zero outside `band`
    (rad/s). window: length in s that holds what the measurement resolves. centre: energy-mean angular
    frequency, about which gdd, tod, fod (SI) and carrier_phase (rad) are added. limits: how the transform
    limit moves with the noise cut, empty for waveforms. said: notes on how the data were treated.
    """

    unit_spectrum: Callable[[Real], Complex]
    band: tuple[float, float]
    window: float
    centre: float
    energy: float
    gdd: float = 0.0
    tod: float = 0.0
    fod: float = 0.0
    carrier_phase: float = 0.0
    beam_radius: float | None = None
    repetition_rate: float | None = None
    limits: tuple[CutLimit, ...] = ()
    said: tuple[str, ...] = field(default=())

    def __post_init__(self) -> None:
        positive_number(self.energy, "energy", "joules")
        positive_number(self.beam_radius, "beam radius", "metres", optional=True)
        positive_number(self.repetition_rate, "repetition rate", "hertz", optional=True)
        for name in ("gdd", "tod", "fod", "carrier_phase"):
            finite_number(getattr(self, name), name.replace("_", " "))

    @property
    def phase(self) -> SpectralPhase:
        """The stated phase about the centre, on top of a measured one."""
        return SpectralPhase(constant=self.carrier_phase, gdd=self.gdd, tod=self.tod, fod=self.fod)

    @property
    def energy_below_zero(self) -> float:
        """Measurements have no energy below zero frequency: 0."""
        return 0.0

    @property
    def notes(self) -> tuple[str, ...]:
        """How the data were treated."""
        return self.said

    def amplitude(self, omega: Real) -> Complex:
        """A(omega) in W^(1/2) s at absolute angular frequencies of any shape.

        Zero outside the measured band.
        """
        return in_blocks(self._amplitude, omega)

    def _amplitude(self, omega: Real) -> Complex:
        inside = (omega > max(self.band[0], 0.0)) & (omega < self.band[1])
        result = np.zeros(omega.shape, dtype=complex)
        taken = omega[inside]
        turned = np.sqrt(self.energy) * np.exp(1j * self.phase(taken - self.centre))
        result[inside] = turned * self.unit_spectrum(taken)
        return result

    def spectral_extent(self, share: float) -> tuple[float, float]:
        """Angular frequencies, rad/s, outside of which less than `share` of the energy lies."""
        return _between(*self._spectral_power, share)

    def field_extent(self, share: float) -> tuple[float, float]:
        """Instants, s, outside of which less than about `share` of the energy lies, stated phase included.

        Not less than what the measurement resolves: at most the whole `window` (before the stated phase).
        """
        first, last = _between(*self._field_power, share)
        low, high = self.spectral_extent(share)
        early, late = self.phase.delays(low - self.centre, high - self.centre)
        return first + early, last + late

    @cached_property
    def _spectral_power(self) -> tuple[Real, Real]:
        omega = np.linspace(*self.band, 16385)
        inner = np.zeros(omega.size)
        inner[1:-1] = power(self.unit_spectrum(omega[1:-1]))
        return omega, inner

    @cached_property
    def _field_power(self) -> tuple[Real, Real]:
        low, high = self.band
        step = np.pi / (high - low)
        points = 2 * fast_length(int(0.5 * self.window / step) + 16)
        grid = Grid(points=points, step=step, start=-0.5 * points * step, carrier=(low + high) / (4 * np.pi))
        bare = replace(self, gdd=0.0, tod=0.0, fod=0.0)
        return grid.time, power(grid.to_field(bare.amplitude(grid.omega)))

    @cached_property
    def peak_power(self) -> float:
        """Largest power in W of the pulse as launched, stated phase included."""
        _, envelope = launch(self)
        return peak(envelope).power

    def with_peak_power(self, peak_power: float) -> MeasuredPulse:
        """The same pulse with the energy that makes its peak power the one given in W."""
        positive_number(peak_power, "peak power", "watts")
        return replace(self, energy=self.energy * peak_power / self.peak_power)


def _between(axis: Real, height: Real, share: float) -> tuple[float, float]:
    """The stretch of a uniform axis outside of which less than `share` of the sum lies."""
    limit = 0.5 * share * float(height.sum())
    first = int(np.searchsorted(np.cumsum(height), limit, side="right"))
    last = height.size - 1 - int(np.searchsorted(np.cumsum(height[::-1]), limit, side="right"))
    return float(axis[max(first - 1, 0)]), float(axis[min(last + 1, height.size - 1)])
