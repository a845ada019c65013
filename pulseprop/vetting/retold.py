"""The same table told in another way: copies with a column changed, never the table itself."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.vetting.table import Column, Quantity, SentTable

__all__ = ["as_quantity", "on_axis", "only_rows", "reordered", "scaled", "swapped", "with_column"]

Real = NDArray[np.float64]
Rows = NDArray[np.int64]


def with_column(table: SentTable, old: Column, new: Column) -> SentTable:
    """The table with one column in place of another."""
    columns = tuple(new if column is old else column for column in table.columns)
    return replace(table, columns=columns)


def scaled(column: Column, factor: float | Real) -> Column:
    """Values and uncertainties times a factor above 0."""
    return replace(
        column,
        values=column.values * factor,
        half_unit=column.half_unit * factor,
        uncertainty=None if column.uncertainty is None else column.uncertainty * factor,
    )


def as_quantity(column: Column, quantity: Quantity) -> Column:
    """The same numbers as another quantity."""
    return replace(column, quantity=quantity)


def reordered(column: Column, rows: Rows) -> Column:
    """The column's cells in another order."""
    return replace(
        column,
        cells=tuple(column.cells[row] for row in rows),
        values=column.values[rows],
        half_unit=column.half_unit[rows],
        uncertainty=None if column.uncertainty is None else column.uncertainty[rows],
    )


def swapped(table: SentTable, one: Column, other: Column) -> SentTable:
    """Two columns under each other's heading."""
    first, second = as_quantity(one, other.quantity), as_quantity(other, one.quantity)
    return with_column(with_column(table, one, first), other, second)


def on_axis(table: SentTable, omega: Real) -> SentTable:
    """The same rows at other frequencies, rad/s."""
    return replace(table, omega=omega)


def only_rows(table: SentTable, keep: Rows) -> SentTable:
    """Only these rows of the table."""
    return replace(
        table,
        lines=table.lines[keep],
        axis_cells=tuple(table.axis_cells[row] for row in keep),
        axis_values=table.axis_values[keep],
        axis_half_unit=None if table.axis_half_unit is None else table.axis_half_unit[keep],
        omega=table.omega[keep],
        columns=tuple(reordered(column, keep) for column in table.columns),
    )
