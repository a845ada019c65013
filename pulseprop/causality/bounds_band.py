"""Where bounds can be given, and which: what the rows leave open stays open, with the reason."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_data import PassiveData

__all__ = ["allowed_band", "coarse_features"]

Real = NDArray[np.float64]

ROWS_FROM_AN_END = 2
"""Nearer to an end of the rows nothing is given: an end row carries half a test."""
ROWS_OVER_A_FEATURE = 5
"""Fewest rows over the full width at half maximum of a feature of k."""
LEAST_SHARE = 0.05
"""Distance from the ends of a transparent band with very few rows, over its width."""


def allowed_band(data: PassiveData) -> tuple[float, float]:
    """(low, high), rad/s, between which bounds are given; low above high where there are too few rows.

    From the second row after the first to the second before the last. Where the material is known to be
    transparent further out, as far from the ends of that as the third row is from the first.
    """
    rows = data.omega if data.k_omega is None else np.union1d(data.omega, data.k_omega)
    third = min(ROWS_FROM_AN_END, len(rows) - 1)
    enough = len(rows) > 2 * ROWS_FROM_AN_END
    low, high = (rows[third], rows[-1 - third]) if enough else (np.inf, -np.inf)
    clear = data.knowledge.transparent
    if clear is not None:
        least = 0.0 if enough else LEAST_SHARE * (clear[1] - clear[0])
        if clear[0] <= rows[0] <= clear[1]:
            low = min(low, clear[0] + max(rows[third] - rows[0], least))
        if clear[0] <= rows[-1] <= clear[1]:
            high = max(high, clear[1] - max(rows[-1] - rows[-1 - third], least))
    return float(low), float(high)


def coarse_features(data: PassiveData) -> Real:
    """Places (rad/s) of features of k with fewer than five rows over their full width at half maximum.

    A feature is a maximum that stands out of the uncertainties on both sides; its height counts from the
    higher of the two lowest values beside it.
    """
    if data.k is None or data.k_omega is None or data.k_error is None:
        return np.zeros(0)
    from scipy.signal import find_peaks, peak_prominences, peak_widths

    peaks, _ = find_peaks(data.k)
    heights, *bases = peak_prominences(data.k, peaks)
    base = np.where(data.k[bases[0]] > data.k[bases[1]], bases[0], bases[1])
    real = heights > data.k_error[peaks] + data.k_error[base]
    peaks = peaks[real]
    # widths in rows: one row spacing wide holds one row
    widths = peak_widths(data.k, peaks, rel_height=0.5)[0]
    return np.asarray(data.k_omega[peaks[widths < ROWS_OVER_A_FEATURE]])
