"""The shortest pulse that a spectrum allows, and how far a field is from it."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.grid import Grid
from pulseprop.measures.profile import find_peak, half_maximum, power

__all__ = ["TransformLimit", "peak_ratio", "square_integral", "transform_limit", "two_photon_ratio"]

Complex = NDArray[np.complex128]


@dataclass(frozen=True, kw_only=True)
class TransformLimit:
    """The pulse of the same spectrum with flat phase.

    fwhm: s. peak_power: W. square_integral: int P^2 dt, W^2 s.
    """

    fwhm: float
    peak_power: float
    square_integral: float


def transform_limit(grid: Grid, spectrum: Complex) -> TransformLimit:
    """Flat phase on A(omega) (N,).

    Its FWHM, peak power (exactly the square of the integral of |A|) and int P^2 dt.
    """
    flat = grid.moved(-0.5 * grid.span).to_field(np.abs(spectrum).astype(complex))
    return TransformLimit(
        fwhm=half_maximum(flat).width * grid.step,
        peak_power=float(np.abs(spectrum).sum() / grid.span) ** 2,
        square_integral=square_integral(flat, grid.step),
    )


def square_integral(envelope: Complex, step: float) -> float:
    """int P^2 dt in W^2 s, exact for a field oversampled twice."""
    height = power(envelope)
    return float(np.dot(height, height)) * step


def peak_ratio(envelope: Complex, limit: TransformLimit) -> float:
    """Peak power over that of the same spectrum with flat phase, at most 1 but for rounding."""
    return find_peak(envelope).power / limit.peak_power


def two_photon_ratio(envelope: Complex, step: float, limit: TransformLimit) -> float:
    """int P^2 dt over that of the same spectrum with flat phase, at most 1 but for rounding."""
    return square_integral(envelope, step) / limit.square_integral
