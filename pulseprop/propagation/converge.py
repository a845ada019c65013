"""Propagation that is looked at afterwards: the window is enlarged until nothing wraps around or aliases."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import NumericalLimit
from pulseprop.grid import Grid
from pulseprop.propagation.budget import Walk, walk
from pulseprop.propagation.experiment import Experiment
from pulseprop.propagation.linear import at_once
from pulseprop.propagation.ranges import check_range
from pulseprop.propagation.sizing import Windows, first_windows, larger
from pulseprop.propagation.stepped import SteppedAdvance

__all__ = ["Progress", "Propagated", "propagated"]

Complex = NDArray[np.complex128]
Progress = Callable[[str, float], None]
"""progress(stage, fraction)."""

WRAPPED_SHARE = 1e-10
"""Share of the energy that may stand at the ends of the window."""
WINDOW_ENDS = 0.02
ALIASED_SHARE = 1e-12
"""Share of the energy that may stand at the ends of the frequency axis."""
BAND_ENDS = 0.01


@dataclass(frozen=True, kw_only=True)
class Propagated:
    """A walk that passed the checks. wrapped, aliased: shares of energy at the ends of window and band."""

    windows: Windows
    spectrum_in: Complex
    walked: Walk
    steps: int
    transforms: int
    enlargements: int
    wrapped: float
    aliased: float

    @property
    def exit(self) -> Grid:
        """The grid at the end of the path."""
        return self.windows.after(len(self.windows.starts) - 1)


def propagated(experiment: Experiment, progress: Progress) -> Propagated:
    """Walk the path, look, and enlarge the window until what wraps around is negligible.

    Raises RangeError where the pulse leaves the range of a medium, InputError where nothing comes out, and
    NumericalLimit where the window cannot grow or the band cannot hold the pulse.
    """
    windows = first_windows(experiment.pulse, experiment.path, experiment.grid)
    spectrum = experiment.pulse.amplitude(windows.grid.omega)
    check_range(experiment, windows.grid, spectrum)
    enlargements = 0
    while True:
        progress("propagating", 0.1)
        done = _walked(experiment, windows, spectrum, enlargements)
        if done.wrapped <= WRAPPED_SHARE:
            return done
        windows = larger(windows, experiment.pulse, experiment.path, experiment.grid)
        spectrum = experiment.pulse.amplitude(windows.grid.omega)
        enlargements += 1


def _walked(experiment: Experiment, windows: Windows, spectrum: Complex, enlargements: int) -> Propagated:
    stepped = None
    if experiment.method != "exact":
        stepped = SteppedAdvance(method=experiment.method, points=spectrum.size)
    radius = experiment.pulse.beam_radius if experiment.energy_stated else None
    walked = walk(experiment.path, windows, spectrum, experiment.pulse.centre, radius, stepped or at_once)
    exit_grid = windows.after(len(windows.starts) - 1)
    return Propagated(
        windows=windows,
        spectrum_in=spectrum,
        walked=walked,
        steps=stepped.steps if stepped else len(experiment.path),
        transforms=stepped.transforms if stepped else len(experiment.path),
        enlargements=enlargements,
        wrapped=max(_at_window_ends(windows.grid, spectrum), _at_window_ends(exit_grid, walked.spectrum)),
        aliased=_at_band_ends(windows.grid, spectrum),
    )


def _at_window_ends(grid: Grid, spectrum: Complex) -> float:
    """Share of the energy at the end (and, half as long, the start) of the window: what would wrap around."""
    field = grid.to_field(spectrum)
    power = field.real**2 + field.imag**2
    last = int(WINDOW_ENDS * grid.points)
    return float((power[-last:].sum() + power[: last // 2].sum()) / power.sum())


def _at_band_ends(grid: Grid, spectrum: Complex) -> float:
    """Share of the energy at the ends of the frequency axis: what would alias.

    Where the axis begins at zero frequency nothing can lie beyond that end.
    """
    power = spectrum.real**2 + spectrum.imag**2
    ends = max(int(BAND_ENDS * spectrum.size), 1)
    low = float(power[:ends].sum()) if grid.frequency[0] > 0.5 / grid.span else 0.0
    share = (float(power[-ends:].sum()) + low) / float(power.sum())
    if share > ALIASED_SHARE:
        raise NumericalLimit(
            "the sampled band does not hold the pulse's spectrum",
            value=f"{share:.2g} of the energy at its ends",
            allowed=f"{ALIASED_SHARE:g}",
            remedy="Leave grid.span and grid.points out, so that the grid sizes itself, or give more points",
        )
    return share
