"""Half a unit of the last printed place, from the cells as printed.

The text of a cell tells what its number does not: "1.450" has three places. Where a program dropped zeros at
the end, the finest place of the column is that of all, as in `material.printed_digits`; columns of
significant digits (small entries go to finer places) and cells with exponents keep their own.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

__all__ = ["half_units", "places_and_digits"]

Real = NDArray[np.float64]

FINER = 2
"""Entries below a tenth of the largest, this many places finer than the others, show significant digits."""
MOST_DIGITS = 8
"""More digits than these come from arithmetic, not from measurement."""


def places_and_digits(cell: str) -> tuple[int, int]:
    """Decimal places and significant digits: (3, 4) for "1.450", (5, 3) for "1.20e-3"; (0, 0) for no
    number."""
    mantissa, _, exponent = cell.replace(",", ".").lower().replace("d", "e").partition("e")
    whole, _, rest = mantissa.lstrip("+-").partition(".")
    try:
        return len(rest) - int(exponent or 0), len((whole + rest).lstrip("0"))
    except ValueError:
        return 0, 0


def half_units(cells: Sequence[str], values: Real) -> Real:
    """Half a unit of the last place of each cell, (R,), in the unit of the printed values.

    values: (R,), the numbers of the cells; NaN for missing ones, for which the result means nothing.
    """
    places, digits = (np.array(part) for part in zip(*map(places_and_digits, cells), strict=True))
    known = np.isfinite(values)
    if not known.any():
        return np.zeros(len(values))
    size = np.abs(values)
    largest = float(np.max(size[known]))
    if largest == 0:
        return np.full(len(values), 0.5 * 10.0 ** -float(np.max(places[known])))
    large = known & (size >= largest / 10)
    coarsest = np.floor(np.log10(largest)) + 1 - MOST_DIGITS
    if _has_exponent(cells) or np.max(places[known]) >= np.max(places[large]) + FINER:
        smallest = np.min(size[known & (size > 0)])
        leading = np.floor(np.log10(np.where(known & (size > 0), size, smallest)))
        used = min(int(np.max(digits[known])), MOST_DIGITS)
        return np.asarray(0.5 * 10.0 ** (leading + 1 - used))
    return np.full(len(values), 0.5 * 10.0 ** max(-float(np.max(places[known])), coarsest))


def _has_exponent(cells: Sequence[str]) -> bool:
    return any("e" in cell or "E" in cell for cell in cells)
