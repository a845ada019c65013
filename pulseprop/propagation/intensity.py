"""Peak fluence, peak intensity and the B-integral of a linearly propagated pulse.

The on-axis values of a Gaussian beam of 1/e^2 radius w: fluence 2 E / (pi w^2), intensity 2 P / (pi w^2).
B = (2 pi / lambda) int n2 I_peak dz. Both after A. E. Siegman, Lasers (University Science Books, 1986), from
memory.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.grid import Grid

__all__ = ["b_integral", "coarser", "on_axis", "peak_power"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

RELATIVE_ERROR = 1e-3
MOST_PANELS = 1024
BLOCK = 1 << 16


def on_axis(total: float, radius: float) -> float:
    """Fluence (J/m^2) from energy in J, or intensity (W/m^2) from power in W; radius in m."""
    return 2 * total / (np.pi * radius**2)


def peak_power(grid: Grid, spectrum: Complex) -> float:
    """Peak power in W of A(omega), by a parabola through the logarithm of the three highest samples.

    Exact for Gaussian peaks; within 1e-3 for any field that the grids of a run sample.
    """
    field = grid.to_field(spectrum)
    power = field.real**2 + field.imag**2
    top = int(np.argmax(power))
    below, here, above = np.log(np.maximum(power[[top - 1, top, (top + 1) % power.size]], 1e-300))
    bend = below - 2 * here + above
    return float(np.exp(here - (above - below) ** 2 / (8 * bend))) if bend < 0 else float(np.exp(here))


def coarser(grid: Grid, needed: float) -> tuple[Grid, int]:
    """The shortest window that holds `needed` s twice over, and of how many frequencies it takes one.

    Peak powers need no more: a spectrum is smooth on the scale of the inverse of the pulse's length.
    """
    every = 1
    while grid.points % (4 * every) == 0 and grid.span / (2 * every) > 2 * needed:
        every *= 2
    return replace(grid, points=grid.points // every), every


def b_integral(
    grid: Grid, spectrum: Complex, exponent: Complex, omega: float, n2: float, radius: float, length: float
) -> float | None:
    """B in rad of one element of `length` m, given the spectrum A(omega) that enters and ln(transfer) of it.

    omega: carrier, rad/s; n2: m^2/W; radius: m. The peak power inside is that of the pulse propagated to the
    depth; Simpson's rule on halved intervals until the estimate stands within 1e-3, which leaves a tenth of
    that. None where 1024 intervals do not get there: a pulse short in a small part of the length only.
    """
    peaks = {place: _peak_at(grid, spectrum, exponent, place) for place in (0.0, 0.5, 1.0)}
    panels, mean = 2, _simpson(peaks, 2)
    while panels < MOST_PANELS:
        panels *= 2
        for odd in range(1, panels, 2):
            peaks[odd / panels] = _peak_at(grid, spectrum, exponent, odd / panels)
        previous, mean = mean, _simpson(peaks, panels)
        if abs(mean - previous) <= RELATIVE_ERROR * mean:
            return float(omega / SPEED_OF_LIGHT * n2 * on_axis(mean, radius) * length)
    return None


def _simpson(values: dict[float, float], panels: int) -> float:
    ordinates = np.array([values[place / panels] for place in range(panels + 1)])
    weights = np.full(panels + 1, 2.0)
    weights[1::2] = 4.0
    weights[0] = weights[-1] = 1.0
    return float(np.dot(weights, ordinates) / (3 * panels))


def _peak_at(grid: Grid, spectrum: Complex, exponent: Complex, share: float) -> float:
    """Peak power in W after a share of the length, faces left out."""
    inside = spectrum.copy()
    for start in range(0, inside.size, BLOCK):
        part = slice(start, start + BLOCK)
        inside[part] *= np.exp(share * exponent[part])
    return peak_power(grid, inside)
