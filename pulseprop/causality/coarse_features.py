"""Features of k that the rows do not resolve: fewer than five rows over the full width at half height."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["CoarseFeature", "coarse_features"]

Real = NDArray[np.float64]

FEWEST = 5.0
"""Rows over the width at half height below which a feature counts as unresolved."""
QUARTER = 1 / 4
"""Share of the height that the row beside a peak on an end row may have."""
NOISE = 4.0
"""Height of a feature over the uncertainty of k, above which it is one."""


@dataclass(frozen=True, kw_only=True)
class CoarseFeature:
    """A peak of k at omega (rad/s), its width at half height (rad/s), and the rows over that width."""

    omega: float
    width: float
    rows: float


def coarse_features(omega: Real, k: Real, error: Real) -> tuple[CoarseFeature, ...]:
    """Peaks of k (K,) at omega (K,), rad/s ascending, with fewer than five rows over their width.

    error: uncertainty of k, (K,). Height is counted from the higher of the two valleys beside the peak, as
    far as k stays below it (its prominence); ends of the rows are valleys. An end row is a peak, the half of
    one, where the next row has less than a quarter of its height.
    """
    peaks = (_feature(omega, k, row) for row in _peaks(k) if _height(k, row) > NOISE * error[row])
    return tuple(peak for peak in peaks if peak.rows < FEWEST)


def _peaks(k: Real) -> list[int]:
    padded = np.concatenate(([np.inf], k, [np.inf]))
    inner = [int(row) for row in np.flatnonzero((k > padded[:-2]) & (k >= padded[2:]))]
    last = len(k) - 1
    return inner + [end for end, beside in ((0, 1), (last, last - 1)) if _stands_out(k, end, beside)]


def _stands_out(k: Real, end: int, beside: int) -> bool:
    """A broader line, or an edge, cut off by the end falls less from its last row to the one before."""
    return k[end] > k[beside] and float(k[end] - k[beside]) > (1 - QUARTER) * _height(k, end)


def _height(k: Real, row: int) -> float:
    valleys = [np.min(side) for side in _below(k, row) if len(side) > 1]
    return float(k[row] - max(valleys))


def _below(k: Real, row: int) -> tuple[Real, Real]:
    """k to both sides as far as it stays at or below the peak; the peak included."""
    left, right = k[row::-1], k[row:]
    return tuple(side[: int(np.argmax(side > k[row])) or len(side)] for side in (left, right))  # type: ignore[return-value]


def _feature(omega: Real, k: Real, row: int) -> CoarseFeature:
    half = float(k[row]) - _height(k, row) / 2
    at = float(omega[row])
    sides = [(omega[row::-1], k[row::-1]), (omega[row:], k[row:])]
    half_widths = [abs(_crossing(*side, half) - at) for side in sides if len(side[0]) > 1]
    spacing = np.diff(omega)[max(row - 1, 0) : row + 1]
    width = 2 * float(np.mean(half_widths))
    return CoarseFeature(omega=at, width=width, rows=width / float(np.mean(spacing)))


def _crossing(omega: Real, k: Real, level: float) -> float:
    """Where k, from its first value on, first falls to the level; between rows by a straight line."""
    under = int(np.argmax(k <= level))
    share = (k[under - 1] - level) / (k[under - 1] - k[under])
    return float(omega[under - 1] + share * (omega[under] - omega[under - 1]))
