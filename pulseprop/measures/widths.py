"""Widths of a pulse and of its spectrum, and what lies outside them.

Envelopes are analytic signals about any carrier in W^(1/2); |E|^2 is the power averaged over the carrier.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.measures.profile import find_peak, half_maximum, power

__all__ = [
    "FieldWidths",
    "PeakPower",
    "energy_share_after",
    "energy_share_before",
    "field_widths",
    "fwhm",
    "peak",
    "rms_width",
    "spectral_fwhm",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

AFTER = 3.0
"""Full widths from the peak beyond which energy counts as coming after the pulse (or before it)."""


@dataclass(frozen=True)
class PeakPower:
    """power: W. position: samples from the first."""

    position: float
    power: float


@dataclass(frozen=True, kw_only=True)
class FieldWidths:
    """Everything about the length of one field.

    fwhm, rms, equivalent (energy over peak power): s. peak_power: W. peak_time, left, right: s on the grid's
    clock (left and right are the outermost half-maximum points, and may lie outside a window that wraps).
    split: more than one stretch above half maximum. energy: J. energy_before, energy_after: shares of the
    energy more than three FWHM before and after the peak.
    """

    fwhm: float
    rms: float
    equivalent: float
    peak_power: float
    peak_time: float
    left: float
    right: float
    split: bool
    energy: float
    energy_before: float
    energy_after: float


def peak(envelope: Complex) -> PeakPower:
    """Peak power between samples, to 1e-9 where the field is oversampled twice."""
    found = find_peak(envelope)
    return PeakPower(found.position, found.power)


def fwhm(envelope: Complex, step: float) -> float:
    """Intensity FWHM in s between the outermost half-maximum points; step: s between samples."""
    return half_maximum(envelope).width * step


def spectral_fwhm(spectrum: Complex, spacing: float) -> float:
    """FWHM of |A|^2 per ordinary frequency in Hz, outermost points; spacing: Hz between samples.

    The spectrum of a field that fills at most about half its window is itself oversampled twice.
    """
    return half_maximum(spectrum).width * spacing


def rms_width(envelope: Complex, step: float) -> float:
    """Standard deviation of the power over time in s; the window is taken as it is, without wrapping."""
    height = power(envelope)
    total, mean = _mean(height)
    offset = np.arange(height.size) - mean
    return float(np.sqrt(np.dot(np.square(offset, out=offset), height) / total)) * step


def _mean(height: Real) -> tuple[float, float]:
    total = float(height.sum())
    if not total > 0:
        raise InputError("the field holds no energy", value=total, allowed="above 0")
    return total, float(np.dot(np.arange(height.size), height)) / total


def energy_share_after(height: Real, position: float) -> float:
    """Share of the energy later than a position in samples; height: power (N,)."""
    return _tail_sum(height, position) / float(height.sum())


def energy_share_before(height: Real, position: float) -> float:
    """Share of the energy earlier than a position in samples; height: power (N,)."""
    return _tail_sum(height[::-1], height.size - 1 - position) / float(height.sum())


def _tail_sum(height: Real, position: float) -> float:
    """Sum of the samples above a position, each standing for the interval of half a sample around it."""
    first = int(np.ceil(position - 0.5))
    if first >= height.size:
        return 0.0
    if first < 0:
        return float(height.sum())
    part = min(first + 0.5 - position, 1.0)
    return float(height[first + 1 :].sum() + part * height[first])


def field_widths(envelope: Complex, step: float, start: float = 0.0) -> FieldWidths:
    """All widths of one field (N,).

    Step and start (the first instant) in s. Raises InputError if it is empty.
    """
    found = half_maximum(envelope)
    height = power(envelope)
    energy = float(height.sum()) * step
    reach = AFTER * found.width
    return FieldWidths(
        fwhm=found.width * step,
        rms=rms_width(envelope, step),
        equivalent=energy / found.peak.power,
        peak_power=found.peak.power,
        peak_time=start + found.peak.position * step,
        left=start + found.left * step,
        right=start + found.right * step,
        split=found.split,
        energy=energy,
        energy_before=energy_share_before(height, found.peak.position - reach),
        energy_after=energy_share_after(height, found.peak.position + reach),
    )
