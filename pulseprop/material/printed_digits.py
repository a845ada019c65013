"""The uncertainty that printed digits state by themselves: half a unit of the last place.

A column's last place is the finest that any of its entries uses, each written as the shortest decimal. Where
small entries go to finer places than large ones, the column is printed to a number of significant digits
instead.
"""

from __future__ import annotations

from decimal import Decimal

import numpy as np
from numpy.typing import NDArray

__all__ = ["half_unit", "index_uncertainty"]

Real = NDArray[np.float64]

FINEST = 5e-8
"""No table is taken as better than seven decimals: more digits come from arithmetic, not from measurement."""
MOST_SIGNIFICANT = 8
FINER = 2
"""Entries below a tenth of the largest, this many places finer than the others, show significant digits."""


def half_unit(column: Real) -> Real:
    """Half a unit of the last printed place for each entry, shape (R,)."""
    digits = [Decimal(repr(float(value))).normalize() for value in column]
    places = np.array([-min(int(value.as_tuple().exponent), 0) for value in digits])
    size = np.abs(column)
    large = size >= np.max(size) / 10
    if np.max(places) >= np.max(places[large]) + FINER:
        used = min(max(len(value.as_tuple().digits) for value in digits), MOST_SIGNIFICANT)
        leading = np.floor(np.log10(np.where(size == 0, np.min(size[size > 0]), size)))
        return np.asarray(0.5 * 10.0 ** (leading + 1 - used))
    return np.full(len(column), max(0.5 * 10.0 ** -float(np.max(places)), FINEST))


def index_uncertainty(index: Real, axis: Real | None = None) -> Real:
    """Half a unit of n, and |dn/d axis| times half a unit of the axis unless evenly spaced as printed.

    index: n as printed, (R,). axis: wavelengths (or the like) as printed, (R,); None where they are exact.
    """
    own = half_unit(index)
    if axis is None or np.ptp(np.diff(axis)) <= 1e-9 * np.ptp(axis):
        return own
    return np.asarray(own + np.abs(np.gradient(index, axis)) * half_unit(axis))
