"""A field's power over many decades, thinned for looking without losing a peak."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.measures.profile import power

__all__ = ["contrast_curve", "thinned"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


def thinned(axis_start: float, axis_step: float, height: Real, points: int) -> tuple[Real, Real]:
    """At most `points` pairs of position and height: the highest sample of each group, where it stands."""
    group = max(-(-height.size // points), 1)
    whole = height.size // group * group
    best = height[:whole].reshape(-1, group).argmax(axis=1) + np.arange(0, whole, group)
    if whole < height.size:
        best = np.append(best, whole + int(height[whole:].argmax()))
    return np.asarray(axis_start + axis_step * best, dtype=np.float64), height[best]


def contrast_curve(
    envelope: Complex, step: float, start: float = 0.0, *, points: int = 2000, decades: float = 10.0
) -> tuple[Real, Real]:
    """Instants (s) and power over the peak (K,), for a logarithmic axis over `decades`.

    Each of at most `points` entries is the highest sample of its stretch; powers below the last decade are
    NaN, so that a line breaks there instead of running along a floor that is not in the data.
    """
    time, height = thinned(start, step, power(envelope), points)
    ratio = height / height.max()
    return time, np.where(ratio >= 10.0**-decades, ratio, np.nan)
