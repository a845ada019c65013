"""The uncertainty of each printed value: as stated, else what the printed digits say by themselves.

Stated: against it the verdict is given; where it is smaller than half a unit of the last printed place, the
rounding is added, for no statement can make a printed number better than its print. Not stated: half a unit
of the last place, and |slope| times half a unit of the axis unless the axis is evenly spaced as printed.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.material.printed_digits import half_unit
from pulseprop.vetting.request import Request
from pulseprop.vetting.table import Column, SentTable

__all__ = ["column_uncertainty", "is_stated", "stated_uncertainty"]

Real = NDArray[np.float64]

EVEN = 1e-9
"""Steps of the axis that differ by less than this share of its length are equal."""
AROUND = 2
"""Rows on either side over which the slope is the median, so that one bad row does not excuse itself."""


def is_stated(column: Column, request: Request) -> bool:
    """Whether the column's uncertainty was stated, in the file or by option."""
    return column.uncertainty is not None or column.quantity in request.uncertainty


def column_uncertainty(table: SentTable, column: Column, request: Request) -> Real:
    """Uncertainty of each value of the column, SI, above 0, (R,)."""
    stated = stated_uncertainty(column, request)
    if stated is None:
        return np.asarray(column.half_unit + _from_axis(table, column.values))
    return np.asarray(np.where(stated < column.half_unit, stated + column.half_unit, stated))


def stated_uncertainty(column: Column, request: Request) -> Real | None:
    """As stated, (R,); an option goes before the file. None where nothing was stated."""
    option = request.uncertainty.get(column.quantity)
    if option is not None:
        return np.asarray(option.absolute + option.relative * np.abs(column.values))
    return column.uncertainty


def _from_axis(table: SentTable, values: Real) -> Real:
    """|dv/d axis| times half a unit of the axis, 0 where the axis is evenly spaced as printed."""
    order = np.argsort(table.axis_values, kind="stable")
    axis = table.axis_values[order]
    good = np.isfinite(values[order]) & (np.diff(axis, prepend=-np.inf) > 0)
    axis, known = axis[good], values[order][good]
    if len(axis) < 3 or np.ptp(np.diff(axis)) <= EVEN * np.ptp(axis):
        return np.zeros(len(values))
    slope = _median_of_neighbours(np.abs(np.gradient(known, axis)))
    return np.interp(table.axis_values, axis, slope) * _axis_half_unit(table)


def _axis_half_unit(table: SentTable) -> Real:
    """As the cells show it ("400.50" has two places); from the numbers where the table has no cells."""
    return half_unit(table.axis_values) if table.axis_half_unit is None else table.axis_half_unit


def _median_of_neighbours(slope: Real) -> Real:
    padded = np.pad(slope, AROUND, mode="edge")
    windows = np.lib.stride_tricks.sliding_window_view(padded, 2 * AROUND + 1)
    return np.asarray(np.median(windows, axis=1))
