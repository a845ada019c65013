"""When the energy arrives: centroids, group delay over frequency, and the split of the centroid's delay.

All times are on the grid's clock, that of a front travelling at c, so delays are against the same path in
vacuum.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.grid import Grid
from pulseprop.measures.profile import power
from pulseprop.numerics.transforms import forward

__all__ = ["DelaySplit", "centroid", "delay_split", "group_delay"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


def centroid(envelope: Complex, step: float, start: float = 0.0) -> float:
    """Energy centroid of the power in s: sum t |E|^2 / sum |E|^2 over the window (N,) as it is."""
    height = power(envelope)
    total = float(height.sum())
    if not total > 0:
        raise InputError("the field holds no energy", value=total, allowed="above 0")
    return start + step * float(np.dot(np.arange(height.size), height)) / total


def group_delay(grid: Grid, envelope: Complex, *, least: float = 1e-8) -> Real:
    """Group delay d phi / d omega in s at the grid's frequencies (N,), of a field of any phase.

    Re[ FT(t E) / FT(E) ], exact for a field that dies out in its window; no differences are taken. NaN where
    the spectral power is below `least` of its peak. The delay includes the field's own place on the clock.
    """
    middle = centroid(envelope, grid.step, grid.start)
    # Scale and the phase of the window's start are common to both transforms and drop out of the ratio.
    weighted = forward(envelope * (grid.step * np.arange(grid.points) + (grid.start - middle)))
    spectrum = forward(envelope)
    strength = power(spectrum)
    seen = strength > least * strength.max()
    delay = np.full(strength.shape, np.nan)
    delay[seen] = middle + (weighted[seen] * spectrum[seen].conj()).real / strength[seen]
    return delay


@dataclass(frozen=True, kw_only=True)
class DelaySplit:
    """centroid = net_group_delay + reshaping, all in s against the same path in vacuum.

    net_group_delay: average of the path's group delay over the transmitted spectrum. reshaping: centroid of
    the input after the path's |transfer| alone, minus that of the input; 0 for an unchirped symmetric-phase
    input.
    """

    centroid: float
    net_group_delay: float
    reshaping: float


def delay_split(grid: Grid, spectrum_in: Complex, magnitude: Real, envelope_out: Complex) -> DelaySplit:
    """The exact split of the centroid's delay for a linear path.

    grid: of the window that holds `envelope_out` (N,); spectrum_in: A(omega) of the input (N,), near t = 0;
    magnitude: |transfer| in amplitude (N,). The input is looked at through a window about t = 0.
    Source: J. Peatross, S. A. Glasgow, M. Ware, Phys. Rev. Lett. 84, 2370 (2000).
    """
    about_zero = grid.moved(-0.5 * grid.span)
    before = centroid(about_zero.to_field(spectrum_in), grid.step, about_zero.start)
    reshaped = centroid(about_zero.to_field(spectrum_in * magnitude), grid.step, about_zero.start)
    after = centroid(envelope_out, grid.step, grid.start)
    return DelaySplit(centroid=after - before, net_group_delay=after - reshaped, reshaping=reshaped - before)
