"""Columns of a table as the scenario describes them: in SI, ascending, looked at for what often goes wrong.

Two columns taken for each other are caught by their headers, by the order of the rows, by the size of the
numbers in their unit, or, for an index, by which of the two varies more.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.errors import InputError
from pulseprop.files.number_table import NumberTable, read_numbers
from pulseprop.scenario.schema_files import AutocorrelationFile, SpectralFile, TraceFile
from pulseprop.units import to_si

__all__ = ["Columns", "spectral_columns", "time_columns"]

Real = NDArray[np.float64]

SHORTEST, LONGEST = 1e-8, 1.0
"""Vacuum wavelengths in m, from the far ultraviolet to radio waves, between which a table is believed."""

AXIS_WORDS = re.compile(
    r"\b(wavelengths?|wave|lambda|frequency|freq|wavenumbers?|energy|time|delay|nm|um|µm|thz)\b|λ",
    re.IGNORECASE,
)
INDEX_WORDS = re.compile(r"\s*(n|k|index|refractive index|absorbance|transmittance|counts)\s*", re.IGNORECASE)


@dataclass(frozen=True, kw_only=True, eq=False)
class Columns:
    """x: rad/s (wavelengths taken as they stand) or s, ascending, shape (R,). y: as printed, shape (R,).

    table: the rows in the order of x, for further columns, printed places and line numbers. x_column,
    y_column: from 0.
    """

    x: Real
    y: Real
    table: NumberTable
    x_column: int
    y_column: int

    def beside(self, column: int | str | None = None) -> Real | None:
        """Another column, by number from 1 or header; the one right of y for None; None where there is
        none."""
        if column is None and self.y_column + 1 >= self.table.columns:
            return None
        return self.table.column(column, self.y_column + 1)


def spectral_columns(path: Path, spec: SpectralFile, *, index: bool = False) -> Columns:
    """The two columns of a table over the spectrum; `index` says that y is a refractive index.

    Raises InputError with file and line: no such column, rows out of order, places not above zero, columns
    that look swapped, or numbers that do not fit the unit.
    """
    table = read_numbers(path)
    x_column, y_column = table.index_of(spec.x_column, 0), table.index_of(spec.y_column, 1)
    stated = spec.x_column is not None or spec.y_column is not None
    if not stated:
        _check_headers(table, x_column, y_column)
        _check_order(table, x_column, y_column)
    table = table.ascending(None, x_column)
    _check_size(table, spec, x_column, y_column)
    if index and not stated:
        _check_spans(table, x_column, y_column)
    omega = np.asarray(to_si(table.values[:, x_column], spec.x_unit, "spectral"))
    if omega[0] > omega[-1]:
        table, omega = table.reversed(), omega[::-1]
    return Columns(x=omega, y=table.values[:, y_column], table=table, x_column=x_column, y_column=y_column)


def time_columns(path: Path, spec: TraceFile | AutocorrelationFile) -> Columns:
    """The two columns of a table over time or delay. Raises InputError as `spectral_columns` does."""
    table = read_numbers(path)
    x_column, y_column = table.index_of(spec.x_column, 0), table.index_of(spec.y_column, 1)
    if spec.x_column is None and spec.y_column is None:
        _check_headers(table, x_column, y_column)
        _check_order(table, x_column, y_column)
    table = table.ascending(None, x_column)
    time = np.asarray(to_si(table.values[:, x_column], spec.x_unit, "time"))
    return Columns(x=time, y=table.values[:, y_column], table=table, x_column=x_column, y_column=y_column)


def _swapped(table: NumberTable, why: str) -> InputError:
    return table.refused(
        f"the columns look swapped: {why}",
        allowed="first the axis, then the values",
        remedy="If they stand as they should, say so with x_column and y_column",
    )


def _check_headers(table: NumberTable, x_column: int, y_column: int) -> None:
    if not table.header:
        return
    first, second = table.header[x_column], table.header[y_column]
    if AXIS_WORDS.search(second) and not AXIS_WORDS.search(first) and INDEX_WORDS.fullmatch(first):
        raise _swapped(table, f'their headers are "{first}" and "{second}"')


def _check_order(table: NumberTable, x_column: int, y_column: int) -> None:
    if not _in_order(table.values[:, x_column]) and _in_order(table.values[:, y_column]):
        raise _swapped(table, f"column {y_column + 1} is in order and column {x_column + 1} is not")


def _in_order(values: Real) -> bool:
    steps = np.diff(values)
    return bool(np.all(steps > 0) or np.all(steps < 0))


def _check_size(table: NumberTable, spec: SpectralFile, x_column: int, y_column: int) -> None:
    """Whether the numbers can be places on the spectrum in their unit."""
    outside = ~_believable(table.values[:, x_column], spec.x_unit)
    if not outside.any():
        return
    if outside.all() and _believable(table.values[:, y_column], spec.x_unit).all():
        raise _swapped(
            table, f"column {y_column + 1} fits the unit {spec.x_unit}, column {x_column + 1} does not"
        )
    row = int(np.flatnonzero(outside)[0])
    raise table.refused(
        f"this is no {spec.x.replace('_', ' ')} that could stand here",
        row=row,
        value=f"{table.cells[row][x_column]} {spec.x_unit}",
        allowed="vacuum wavelengths from 10 nm to 1 m, or what corresponds to them",
        remedy="Check x_unit and the column",
    )


def _believable(values: Real, unit: str) -> NDArray[np.bool_]:
    """Where the numbers, in that unit, lie between the shortest and the longest wavelength."""
    positive = values > 0
    omega = np.asarray(to_si(np.where(positive, values, 1.0), unit, "spectral"))
    wavelength = 2 * np.pi * SPEED_OF_LIGHT / omega
    return np.asarray(positive & (wavelength >= SHORTEST) & (wavelength <= LONGEST))


def _check_spans(table: NumberTable, x_column: int, y_column: int) -> None:
    """An index varies less than its wavelength: 3 times more, in order, says that the two were swapped."""
    x, y = table.values[:, x_column], table.values[:, y_column]
    varies = [float(np.ptp(values) / np.mean(np.abs(values))) for values in (x, y)]
    if _in_order(y) and varies[1] > 3 * varies[0] and x.min() >= 1 and x.max() <= 5:
        raise _swapped(
            table, f"column {x_column + 1} varies less than column {y_column + 1}, as an index does"
        )
