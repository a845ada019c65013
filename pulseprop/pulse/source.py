"""What a pulse at the start of a path is, whatever it was made from."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Protocol, runtime_checkable

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError, NumericalLimit
from pulseprop.grid import Grid
from pulseprop.numerics.transforms import fast_length

__all__ = [
    "PulseSource",
    "SpectralPhase",
    "finite_number",
    "in_blocks",
    "launch",
    "launch_grid",
    "positive_number",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

LARGEST_LAUNCH = 2**23
"""Points beyond which a pulse by itself is refused a grid of its own."""

LAUNCH_BAND = 1e-24
"""Share of the energy left outside the band of such a grid: amplitudes are then good to 1e-12 of the peak."""

BLOCK = 1 << 17
"""Frequencies evaluated at a time, so that no array of full length but the result is made."""


@runtime_checkable
class PulseSource(Protocol):
    """A pulse known at any frequency. Shapes, measured spectra and measured waveforms all are one.

    Times refer to the pulse's own zero, near its peak; a grid puts that zero at t = 0 of the front's clock.
    """

    @property
    def centre(self) -> float:
        """Angular frequency about which the phase is counted, rad/s."""
        ...

    @property
    def energy(self) -> float:
        """J."""
        ...

    @property
    def beam_radius(self) -> float | None:
        """1/e^2 intensity radius in m where stated."""
        ...

    @property
    def repetition_rate(self) -> float | None:
        """Hz where stated."""
        ...

    @property
    def energy_below_zero(self) -> float:
        """Share of the energy that was cut where the spectrum had to close at zero frequency."""
        ...

    @property
    def notes(self) -> tuple[str, ...]:
        """Sentences the user should read about how the pulse was made."""
        ...

    def amplitude(self, omega: Real) -> Complex:
        """A(omega) in W^(1/2) s at absolute angular frequencies (K,); zero at and below zero frequency."""
        ...

    def spectral_extent(self, share: float) -> tuple[float, float]:
        """Angular frequencies, rad/s, outside of which less than `share` of the energy lies."""
        ...

    def field_extent(self, share: float) -> tuple[float, float]:
        """Instants, s, outside of which less than `share` of the energy lies, chirp included."""
        ...


@dataclass(frozen=True, kw_only=True)
class SpectralPhase:
    """phi(d) = constant + gdd d^2/2 + tod d^3/6 + fod d^4/24, d = omega - centre.

    SI, field times exp(+i phi).
    """

    constant: float = 0.0
    gdd: float = 0.0
    tod: float = 0.0
    fod: float = 0.0

    def __call__(self, detuning: Real) -> Real:
        """The phase in rad at detunings in rad/s."""
        d = detuning
        return np.asarray(self.constant + d * d * (self.gdd / 2 + d * (self.tod / 6 + d * (self.fod / 24))))

    def delays(self, low: float, high: float) -> tuple[float, float]:
        """Least and greatest group delay in s between two detunings (rad/s)."""
        d = np.linspace(low, high, 2001)
        delay = d * (self.gdd + d * (self.tod / 2 + d * (self.fod / 6)))
        return float(delay.min()), float(delay.max())


def positive_number(value: float | None, name: str, unit: str, *, optional: bool = False) -> None:
    """Refuse what is not a finite number above zero (or None where optional) with an InputError."""
    if value is None and optional:
        return
    if value is None or not (np.isfinite(value) and value > 0):
        raise InputError(f"the {name} of a pulse must be positive", value=value, allowed=f"{unit} above 0")


def finite_number(value: float, name: str) -> None:
    """Refuse NaN and infinities with an InputError."""
    if not np.isfinite(value):
        raise InputError(f"the {name} of a pulse must be a finite number", value=value)


def in_blocks(spectrum: Callable[[Real], Complex], omega: Real) -> Complex:
    """spectrum(omega) for angular frequencies of any shape, a block at a time."""
    omega = np.asarray(omega, dtype=float)
    flat = omega.reshape(-1)
    result = np.empty(flat.shape, dtype=complex)
    for first in range(0, flat.size, BLOCK):
        block = slice(first, first + BLOCK)
        result[block] = spectrum(flat[block])
    return result.reshape(omega.shape)


def launch_grid(source: PulseSource, *, share: float = 1e-12, oversampling: float = 2.5) -> Grid:
    """A grid for the pulse by itself: all but `share` of its energy in the window, the band filled once in
    `oversampling`. Raises NumericalLimit where that needs more than 2^23 points."""
    low, high = source.spectral_extent(LAUNCH_BAND)
    first, last = source.field_extent(share)
    step = 2 * np.pi / (oversampling * (high - low))
    needed = 2 * (last - first) / step + 64
    if needed > LARGEST_LAUNCH:
        raise NumericalLimit(
            "the pulse as launched is too long for its bandwidth",
            value=f"{needed:.3g} points",
            allowed=f"up to {LARGEST_LAUNCH} points",
            remedy="State less chirp, or a shape without long wings",
        )
    points = 2 * fast_length(int(needed / 2) + 1)
    start = 0.5 * (first + last) - 0.5 * points * step
    return Grid(points=points, step=step, start=start, carrier=(low + high) / (4 * np.pi))


def launch(source: PulseSource, *, share: float = 1e-12, oversampling: float = 2.5) -> tuple[Grid, Complex]:
    """`launch_grid` and the pulse on it.

    The envelope about the grid's carrier in W^(1/2), shape (points,).
    """
    grid = launch_grid(source, share=share, oversampling=oversampling)
    return grid, grid.to_field(source.amplitude(grid.omega))
