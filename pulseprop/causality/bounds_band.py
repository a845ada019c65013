"""Where bounds can be given: what the rows leave open stays open."""

from __future__ import annotations

import numpy as np

from pulseprop.causality.passive_data import PassiveData

__all__ = ["allowed_band"]

ROWS_FROM_AN_END = 2
"""Nearer to an end of the rows nothing is given: an end row carries half a test."""
ROUNDING = 1e-9
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
    return float(low * (1 - ROUNDING)), float(high * (1 + ROUNDING))
