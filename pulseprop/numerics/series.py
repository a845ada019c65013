"""Truncated Taylor series as arrays: coefficient m of (omega - omega0)^m stands at index m of axis 0.

All series in one call have the same number of terms; the remaining axes are free (one series per frequency).
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import NDArray

__all__ = ["Numbers", "Series", "compose", "power", "product", "quotient", "reciprocal", "root", "variable"]

Numbers = NDArray[np.inexact[Any]]
"""Real or complex arrays."""

Series = Numbers
"""Taylor coefficients along axis 0."""


def variable(centre: Series, count: int) -> Series:
    """The series of omega itself about each centre; shape (count, *centre.shape)."""
    centre = np.asarray(centre)
    series = np.zeros((count, *centre.shape), dtype=np.result_type(centre, np.float64))
    series[0] = centre
    if count > 1:
        series[1] = 1.0
    return series


def product(left: Series, right: Series) -> Series:
    """Cauchy product, truncated to the number of terms of both, (count, ...); shapes broadcast."""
    if left.shape[0] == 1:
        return np.asarray(left * right)
    shape = np.broadcast_shapes(left.shape, right.shape)
    total = np.zeros(shape, dtype=np.result_type(left, right))
    for m in range(shape[0]):
        for j in range(m + 1):
            total[m] += left[j] * right[m - j]
    return total


def reciprocal(series: Series) -> Series:
    """1 / series, shape kept; the leading coefficient must not vanish."""
    inverse = np.empty_like(series)
    inverse[0] = 1.0 / series[0]
    for m in range(1, series.shape[0]):
        carried = series[1] * inverse[m - 1]
        for j in range(2, m + 1):
            carried += series[j] * inverse[m - j]
        inverse[m] = -carried * inverse[0]
    return inverse


def quotient(left: Series, right: Series) -> Series:
    """left / right; the leading coefficient of `right` must not vanish."""
    return product(left, reciprocal(right))


def root(series: Series, leading: Series) -> Series:
    """The square root whose leading coefficient is given (it chooses the branch); that must not vanish."""
    result = np.empty(series.shape, dtype=np.result_type(series, leading))
    result[0] = leading
    for m in range(1, series.shape[0]):
        rest = series[m] - sum(result[j] * result[m - j] for j in range(1, m))
        result[m] = rest / (2 * leading)
    return result


def power(series: Series, exponent: int) -> Series:
    """An integer power, negative ones through the reciprocal."""
    if exponent == 0:
        unit = np.zeros_like(series)
        unit[0] = 1.0
        return unit
    base = series if exponent > 0 else reciprocal(series)
    result = base
    for _ in range(abs(exponent) - 1):
        result = product(result, base)
    return result


def compose(outer: Series, inner: Series) -> Series:
    """outer(inner), where outer[m] are Taylor coefficients about inner[0] (Horner); both (count, ...)."""
    shift = inner.copy()
    shift[0] = 0.0
    total = np.zeros(np.broadcast_shapes(outer.shape, inner.shape), dtype=np.result_type(outer, inner))
    for coefficient in outer[::-1]:
        total = product(total, shift)
        total[0] += coefficient
    return total
