"""Where in a window the energy lies."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

__all__ = ["energy_window", "quiet_start"]

Real = NDArray[np.float64]

PARTS = 64
"""Pieces of the window among which the quietest is sought."""


def quiet_start(height: Real) -> int:
    """A sample in the quietest part of a power profile (N,) that wraps around: the place to cut it open.

    Rolled by minus this number, the profile has its energy in one piece. 0 where the window's own ends are
    quiet.
    """
    size = max(height.size // PARTS, 1)
    edges = np.arange(0, height.size - size + 1, size)
    sums = np.add.reduceat(height, edges)
    if sums[0] + sums[-1] <= 1e-9 * sums.sum():
        return 0
    return int(edges[int(np.argmin(sums))]) + size // 2


def energy_window(height: Real, share: float) -> slice:
    """The samples of a profile (N,) that hold all but `share` of its energy, half of it left on each side."""
    running = np.cumsum(height)
    total = running[-1]
    first = int(np.searchsorted(running, 0.5 * share * total))
    # Counted from the late end, so that a small share does not drown in the rounding of the sum.
    later = np.cumsum(height[::-1])
    last = height.size - int(np.searchsorted(later, 0.5 * share * total))
    return slice(max(first - 1, 0), min(last + 1, height.size))
