"""From fields to the measures of the report."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.grid import Grid
from pulseprop.measures.autocorrelation import autocorrelation_fwhm
from pulseprop.measures.limits import TransformLimit, peak_ratio, transform_limit, two_photon_ratio
from pulseprop.measures.widths import field_widths, spectral_fwhm
from pulseprop.propagation.result import PulseMeasures

__all__ = ["centre_of", "measured"]

Complex = NDArray[np.complex128]


def centre_of(grid: Grid, spectrum: Complex) -> float:
    """Energy-mean frequency in Hz of A(omega), (points,), on the grid."""
    power = spectrum.real**2 + spectrum.imag**2
    return float(np.dot(power, grid.frequency) / power.sum())


def measured(grid: Grid, spectrum: Complex, *, after_path: bool) -> tuple[PulseMeasures, TransformLimit]:
    """All measures of the pulse with spectrum A(omega) in the window `grid`, and its transform limit."""
    limit = transform_limit(grid, spectrum)
    envelope = grid.to_field(spectrum)
    widths = field_widths(envelope, grid.step, grid.start)
    width_of_autocorrelation = autocorrelation_fwhm(envelope, grid.step)
    measures = PulseMeasures(
        centre_nm=SPEED_OF_LIGHT / centre_of(grid, spectrum) * 1e9,
        fwhm_fs=widths.fwhm * 1e15,
        rms_fs=widths.rms * 1e15,
        equivalent_width_fs=widths.equivalent * 1e15,
        transform_limit_fwhm_fs=limit.fwhm * 1e15,
        time_bandwidth_product=widths.fwhm * spectral_fwhm(spectrum, 1 / grid.span),
        energy_J=grid.energy(spectrum),
        peak_power_W=widths.peak_power,
        autocorrelation_fwhm_fs=width_of_autocorrelation * 1e15,
        autocorrelation_factor=width_of_autocorrelation / widths.fwhm,
    )
    if not after_path:
        return measures, limit
    # No phase gives more than the flat one: what exceeds 1 is rounding, or 1e-9 of a peak between samples.
    compared = replace(
        measures,
        peak_ratio=min(peak_ratio(envelope, limit), 1.0),
        two_photon_ratio=min(two_photon_ratio(envelope, grid.step, limit), 1.0),
        split=widths.split,
        energy_after=widths.energy_after,
    )
    return compared, limit
