"""Peaks of a sampled absorption, and how wide they are."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["Peak", "peaks"]

Real = NDArray[np.float64]

WORTH = 0.02
"""Height over the surroundings, as a share of the largest value, from which on a maximum is a line."""


@dataclass(frozen=True)
class Peak:
    """omega, rad/s, and row of the maximum; width: full width at half height over the higher foot, rad/s;
    None where one side leaves the table first."""

    omega: float
    row: int
    width: float | None


def peaks(omega: Real, k: Real) -> list[Peak]:
    """Maxima of k over ascending omega, both (R,), that stand out of their surroundings."""
    if len(k) < 3:
        return []
    inner = np.flatnonzero((k[1:-1] > k[:-2]) & (k[1:-1] >= k[2:])) + 1
    found = []
    for row in inner:
        left, right = _foot(k[row::-1]), _foot(k[row:])
        foot = max(float(k[row - left]), float(k[row + right]))
        if k[row] - foot > WORTH * float(np.max(k)):
            half = (float(k[row]) + foot) / 2
            low, high = _crossing(omega[row::-1], k[row::-1], half), _crossing(omega[row:], k[row:], half)
            width = None if low is None or high is None else high - low
            found.append(Peak(float(omega[row]), int(row), width))
    return found


def _foot(side: Real) -> int:
    """Steps from the peak down to the lowest value before something higher than the peak comes."""
    higher = np.flatnonzero(side[1:] > side[0])
    reach = int(higher[0]) + 1 if len(higher) else len(side)
    return int(np.argmin(side[:reach]))


def _crossing(omega: Real, side: Real, level: float) -> float | None:
    below = np.flatnonzero(side <= level)
    if not len(below):
        return None
    last = int(below[0])
    share = (side[last - 1] - level) / (side[last - 1] - side[last])
    return float(omega[last - 1] + share * (omega[last] - omega[last - 1]))
