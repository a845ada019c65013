"""Half a unit of the last printed place, from the cells as printed.

The text of a cell tells what its number does not: "1.450" has three places. Where a program dropped zeros at
the end, the finest place of the column is that of all, as in `material.printed_digits`; columns of
significant digits (small entries go to finer places) and cells with exponents keep their own.
"""

from __future__ import annotations

import re
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

__all__ = ["half_units", "significant_digits"]

Real = NDArray[np.float64]

EXPONENT = re.compile("[eEdD]")
FINER = 2
"""Entries below a tenth of the largest, this many places finer than the others, show significant digits."""
MOST_DIGITS = 8
"""More digits than these come from arithmetic, not from measurement."""


def half_units(cells: Sequence[str], values: Real) -> Real:
    """Half a unit of the last place of each cell, (R,), in the unit of the printed values.

    values: (R,), the numbers of the cells; NaN for missing ones, for which the result means nothing.
    """
    known = np.isfinite(values)
    size = np.abs(np.where(known, values, 0.0))
    largest = float(np.max(size, initial=0.0))
    plain = not any(EXPONENT.search(cell) for cell, kept in zip(cells, known, strict=True) if kept)
    places = _decimal_places(cells) if plain else np.zeros(len(cells), dtype=np.int64)
    finest = int(np.max(places[known], initial=0))
    large = known & (size >= largest / 10)
    if largest > 0 and (not plain or finest >= np.max(places[large]) + FINER):
        return _of_digits(cells, size)
    coarsest = _leading(largest) + 1 - MOST_DIGITS if largest > 0 else -finest
    return np.full(len(values), 0.5 * 10.0 ** max(-finest, coarsest))


def _of_digits(cells: Sequence[str], size: Real) -> Real:
    """Half a unit of the last significant digit, of which each cell has as many as any."""
    used = min(max(map(significant_digits, cells)), MOST_DIGITS)
    smallest = float(np.min(size[size > 0]))
    return np.asarray(0.5 * 10.0 ** (_leading(np.where(size > 0, size, smallest)) + 1 - used))


def _leading(size: Real | float) -> Real:
    """Power of ten of the first digit; the smallest doubles may lie one beside it."""
    return np.asarray(np.floor(np.log10(size)))


def _decimal_places(cells: Sequence[str]) -> NDArray[np.int64]:
    """Decimal places of each cell without an exponent, (R,)."""
    signs = [max(cell.rfind("."), cell.rfind(",")) for cell in cells]
    return np.array(
        [len(cell) - 1 - sign if sign >= 0 else 0 for cell, sign in zip(cells, signs, strict=True)],
        dtype=np.int64,
    )


def significant_digits(cell: str) -> int:
    """3 for "1.20e-3" and for "0.0120", 0 for no number."""
    mantissa = EXPONENT.split(cell)[0].replace(".", "").replace(",", "")
    return len(mantissa.lstrip("+-0"))
