"""A field's power over many decades, thinned for looking without losing a peak."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

__all__ = ["thinned"]

Real = NDArray[np.float64]


def thinned(axis_start: float, axis_step: float, height: Real, points: int) -> tuple[Real, Real]:
    """At most `points` pairs of position and height: the highest sample of each group, where it stands."""
    group = max(-(-height.size // points), 1)
    whole = height.size // group * group
    best = height[:whole].reshape(-1, group).argmax(axis=1) + np.arange(0, whole, group)
    if whole < height.size:
        best = np.append(best, whole + int(height[whole:].argmax()))
    return np.asarray(axis_start + axis_step * best, dtype=np.float64), height[best]
