"""The transform of a sampled function of finite extent, at any frequency.

The trapezoid rule is spectrally exact for a smooth function that is zero (or negligible) at both ends of its
record, and for a band-limited waveform. Its values on a uniform frequency grid come from one padded FFT;
between them the transform is itself band-limited, because the record is finite, so the interpolation is exact
to rounding. This serves any set of frequencies, uniform or not, which a chirp-z transform would not.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.numerics.interpolation import band_limited
from pulseprop.numerics.transforms import forward

__all__ = ["SampledTransform", "sampled_transform"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

PADDING = 3
"""Length of the padded record over the record: the transform then fills a third of its sampled band."""


@dataclass(frozen=True, kw_only=True, eq=False)
class SampledTransform:
    """int f(t) exp(+i omega t) dt from samples of f; called with angular frequencies of shape (K,)."""

    values: Complex
    spacing: float
    middle: float

    @property
    def nyquist(self) -> float:
        """Angular frequency, rad per unit of t, beyond which the transform is taken as zero."""
        return self.spacing * (self.values.size // 2)

    @property
    def omega(self) -> Real:
        """The frequencies of `values`, ascending."""
        return np.asarray(self.spacing * (np.arange(self.values.size) - self.values.size // 2))

    def __call__(self, omega: Real) -> Complex:
        omega = np.asarray(omega, dtype=float)
        result = np.zeros(omega.shape, dtype=complex)
        inside = np.abs(omega) < self.nyquist
        position = omega[inside] / self.spacing
        centre = self.values.size // 2
        result[inside] = band_limited(self.values, position, origin=centre, filling=1.2 / PADDING)
        if self.middle:
            result[inside] *= np.exp(1j * omega[inside] * self.middle)
        return result


def sampled_transform(samples: Real | Complex, start: float, step: float) -> SampledTransform:
    """Transform of samples (N,) at t = start + j step; N of 2 or more."""
    count = samples.shape[0]
    half = count // 2
    length = 2 * ((PADDING * count + 1) // 2)
    padded = np.zeros(length, dtype=complex)
    padded[: count - half] = samples[half:]
    padded[length - half :] = samples[:half]
    return SampledTransform(
        values=step * forward(padded),
        spacing=2 * np.pi / (length * step),
        middle=start + half * step,
    )
