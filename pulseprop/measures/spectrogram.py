"""A spectrogram of bounded size: which frequencies arrive when."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.grid import Grid
from pulseprop.measures.profile import power
from pulseprop.measures.widths import rms_width
from pulseprop.measures.window import energy_window
from pulseprop.numerics.transforms import fast_length

__all__ = ["Spectrogram", "spectrogram"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

FWHM_PER_DEVIATION = float(np.sqrt(8 * np.log(2)))
"""Of a Gaussian."""
GATE_REACH = 5.0
"""Half length of the gate in its standard deviations of power; its field is 2e-3 there, its power 4e-6."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Spectrogram:
    """time (T,) in s, frequency (F,) in Hz ascending, density (F, T) in J/(Hz s), gate: its power's FWHM, s.

    The gate is Gaussian with int |gate|^2 dt = 1 s, so the density integrates to the pulse's energy.
    """

    time: Real
    frequency: Real
    density: Real
    gate: float


def spectrogram(
    grid: Grid,
    spectrum: Complex,
    *,
    gate: float | None = None,
    times: int = 256,
    frequencies: int = 200,
    share: float = 1e-6,
) -> Spectrogram:
    """|int E(t) g(t - T) exp(i omega t) dt|^2 of A(omega) (N,) on the grid.

    gate: FWHM in s of the gate's power; by default the one whose resolutions in time and in frequency stand
    to each other as the pulse's rms widths do. Both axes cover all but `share` of the energy. Raises
    InputError for an empty field.
    """
    strength = power(spectrum)
    if not strength.max() > 0:
        raise InputError("the field holds no energy", value=0.0, allowed="above 0")
    band = energy_window(strength, share)
    field, step, carrier = _reduced(grid, spectrum, band)
    span = energy_window(power(field), share)
    deviation = (
        _deviation(field[span], step, strength[band], 1 / grid.span)
        if gate is None
        else gate / FWHM_PER_DEVIATION
    )
    moments = grid.start + step * np.linspace(span.start, span.stop - 1, times)
    low, high = grid.frequency[band.start], grid.frequency[band.stop - 1]
    wanted = np.linspace(low, high, frequencies)
    density = np.empty((frequencies, times))
    for column, moment in enumerate(moments):
        density[:, column] = _slice(field, step, moment - grid.start, deviation, wanted - carrier)
    return Spectrogram(time=moments, frequency=wanted, density=density, gate=FWHM_PER_DEVIATION * deviation)


def _reduced(grid: Grid, spectrum: Complex, band: slice) -> tuple[Complex, float, float]:
    """The field of a stretch of the spectrum, twice oversampled on as few samples as that takes."""
    count = band.stop - band.start
    points = min(2 * fast_length(count), grid.points)
    middle = (band.start + band.stop) // 2
    first = max(min(middle - points // 2, grid.points - points), 0)
    small = Grid(
        points=points,
        step=grid.span / points,
        start=grid.start,
        carrier=float(grid.frequency[first + points // 2]),
    )
    return small.to_field(spectrum[first : first + points]), small.step, small.carrier


def _deviation(field: Complex, step: float, strength: Real, spacing: float) -> float:
    """Standard deviation of the gate's power for which sigma_t / sigma_f of gate and pulse agree."""
    spread = rms_width(np.sqrt(strength).astype(complex), spacing)
    return float(np.sqrt(rms_width(field, step) / (4 * np.pi * max(spread, spacing))))


def _slice(field: Complex, step: float, moment: float, deviation: float, detuning: Real) -> Real:
    """Density at one moment (s from the first sample) and detunings (F,) in Hz from the carrier."""
    first = max(int((moment - GATE_REACH * deviation) / step), 0)
    last = min(int((moment + GATE_REACH * deviation) / step) + 2, field.size)
    time = step * np.arange(first, last) - moment
    gate = np.exp(-np.square(time / (2 * deviation))) / (2 * np.pi * deviation**2) ** 0.25
    length = fast_length(max(8 * detuning.size, 2 * (last - first)))
    strength = power(np.fft.ifft(field[first:last] * gate, length, norm="forward")) * step * step
    return np.interp(detuning * length * step, np.arange(length), strength, period=length)
