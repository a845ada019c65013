"""The frequencies at which a search looks: a grid for the pulse, and the part of it that holds light."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.element import Element
from pulseprop.elements.path import Path
from pulseprop.errors import NumericalLimit
from pulseprop.grid import Grid
from pulseprop.propagation.experiment import Experiment
from pulseprop.propagation.ranges import check_range
from pulseprop.propagation.sizing import GridWish, first_windows, most_points
from pulseprop.pulse.measured import MeasuredPulse
from pulseprop.pulse.pulse import Pulse

__all__ = ["Samples", "longer", "samples_for"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

FAINT = 1e-7
"""Amplitude over the largest below which samples at both ends are left out: 1e-14 of the power."""
FEWEST_POINTS = 1 << 13


@dataclass(frozen=True, kw_only=True, eq=False)
class Samples:
    """A grid whose window starts at t = 0, and the amplitude A(omega) of the pulse on its lit part.

    first: index of the first lit sample. amplitude: W^(1/2) s, (n,). beyond_range: what to do with an
    element whose range or band the pulse leaves.
    """

    pulse: Pulse | MeasuredPulse
    beyond_range: Literal["refuse", "causal"]
    grid: Grid
    first: int
    amplitude: Complex

    @property
    def lit(self) -> slice:
        """The samples of the grid that carry light."""
        return slice(self.first, self.first + self.amplitude.size)

    @cached_property
    def omega(self) -> Real:
        """Angular frequencies of the lit samples, rad/s, (n,)."""
        return 2 * np.pi * self.grid.frequency[self.lit]

    @cached_property
    def detuning(self) -> Real:
        """The same, counted from the grid's carrier."""
        return self.omega - 2 * np.pi * self.grid.carrier

    def whole(self, spectrum: Complex) -> Complex:
        """A spectrum (n,) of the lit samples on the whole grid, (points,)."""
        spread = np.zeros(self.grid.points, dtype=complex)
        spread[self.lit] = spectrum
        return spread

    def envelope(self, spectrum: Complex) -> Complex:
        """Field (points,) in W^(1/2) of a spectrum (n,) on the lit samples."""
        return self.grid.to_field(self.whole(spectrum))

    def refuse_outside(self, elements: tuple[Element, ...]) -> None:
        """Raises RangeError where the pulse leaves the range of a medium or the band of a device."""
        asked = Experiment(title="", pulse=self.pulse, path=Path(elements), beyond_range=self.beyond_range)
        check_range(asked, self.grid, self.whole(self.amplitude))

    def thinned(self, every: int) -> tuple[Samples, slice]:
        """One in `every` samples (a power of two), for a window as many times shorter, and which they are."""
        offset = (self.grid.points // 2 - self.first) % every
        grid = replace(self.grid, points=self.grid.points // every)
        first = (self.first + offset - self.grid.points // 2) // every + grid.points // 2
        taken = slice(offset, None, every)
        return replace(self, grid=grid, first=first, amplitude=self.amplitude[taken]), taken

    def folded(self, field: Complex) -> Complex:
        """sum_j field_j exp(-i detuning t_j) / span at the lit samples: the transpose of `envelope`."""
        transform = self.grid.to_spectrum(np.conj(field))[self.lit]
        return np.asarray(np.conj(transform) / (self.grid.step * self.grid.span))


def samples_for(
    pulse: Pulse | MeasuredPulse, wish: GridWish, beyond_range: Literal["refuse", "causal"] = "refuse"
) -> Samples:
    """The first guess: a window for the pulse as launched, of at least 2^13 points."""
    grid = first_windows(pulse, Path(()), GridWish(memory=wish.memory)).grid
    grid = replace(grid, points=max(grid.points, FEWEST_POINTS), start=0.0)
    return _sampled(pulse, grid, beyond_range)


def longer(samples: Samples, wish: GridWish) -> Samples:
    """Twice the window. Raises NumericalLimit where the memory does not allow it."""
    points = 2 * samples.grid.points
    if points > most_points(wish.memory):
        raise NumericalLimit(
            "no window that fits into the memory limit holds the pulse of the best design",
            value=f"{points} points",
            allowed=f"{most_points(wish.memory)} points (grid.memory)",
            remedy="Raise grid.memory, or give the compensators a wider range",
        )
    return _sampled(samples.pulse, replace(samples.grid, points=points), samples.beyond_range)


def _sampled(pulse: Pulse | MeasuredPulse, grid: Grid, beyond_range: Literal["refuse", "causal"]) -> Samples:
    amplitude = pulse.amplitude(grid.omega)
    height = np.abs(amplitude)
    lit = np.flatnonzero(height > FAINT * height.max())
    first, last = int(lit[0]), int(lit[-1]) + 1
    return Samples(
        pulse=pulse, beyond_range=beyond_range, grid=grid, first=first, amplitude=amplitude[first:last]
    )
