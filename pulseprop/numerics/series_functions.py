"""Exponential and logarithm of truncated Taylor series (see `numerics.series`)."""

from __future__ import annotations

import numpy as np

from pulseprop.numerics.series import Numbers, Series

__all__ = ["exponential", "logarithm"]


def exponential(series: Series) -> Series:
    """exp(series), shape kept: from e' = s' e."""
    result = np.empty_like(series)
    result[0] = np.exp(series[0])
    for m in range(1, series.shape[0]):
        result[m] = sum(j * series[j] * result[m - j] for j in range(1, m + 1)) / m
    return result


def logarithm(series: Series, leading: Numbers) -> Series:
    """The logarithm whose leading coefficient is given (it chooses the branch), shape kept: from s l' = s'.

    The leading coefficient of `series` must not vanish.
    """
    result = np.empty(series.shape, dtype=np.result_type(series, leading))
    result[0] = leading
    for m in range(1, series.shape[0]):
        carried = sum(j * result[j] * series[m - j] for j in range(1, m))
        result[m] = (series[m] - carried / m) / series[0]
    return result
