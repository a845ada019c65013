"""Rows of a measured table: put in order, or refused with their numbers."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError

__all__ = ["noise_of", "ordered_rows", "row_list"]

Real = NDArray[np.float64]
Indices = NDArray[np.intp]


def ordered_rows(omega: Real, *columns: Real, numbers: Sequence[int] | None = None) -> tuple[Real, ...]:
    """(omega, columns…, row numbers) with omega ascending, all copies; a descending table is turned round.

    omega: rad/s, above 0, monotonic, shape (R,). numbers: how the file counts its rows; 1, 2, … if not given.
    Raises InputError with the number of the first bad row.
    """
    table = [np.array(column, dtype=float) for column in (omega, *columns)]
    count = len(table[0])
    if any(column.shape != (count,) for column in table):
        raise InputError("columns differ in length", value=[len(column) for column in table])
    rows = np.arange(1, count + 1) if numbers is None else np.asarray(numbers)
    _require(np.all(np.isfinite(table), axis=0), rows, "a value is missing or not a number", table[0])
    _require(table[0] > 0, rows, "a wavelength or frequency is not positive", table[0])
    falling = count > 1 and table[0][0] > table[0][-1]
    if falling:
        table, rows = [column[::-1] for column in table], rows[::-1]
    step = np.diff(table[0])
    if np.any(step <= 0):
        raise _disorder(table, rows, step, falling)
    return (*(column.copy() for column in table), rows.astype(float))


def row_list(rows: Real) -> str:
    """Row numbers for a message: "row 7", "rows 3, 4, 5 and 12 more"."""
    shown = [str(int(row)) for row in np.sort(rows)[:5]]
    more = f" and {len(rows) - 5} more" if len(rows) > 5 else ""
    return f"{'rows' if len(rows) > 1 else 'row'} {', '.join(shown)}{more}"


def noise_of(values: Real) -> float:
    """Standard deviation of the noise from third differences (median, so that structure counts little)."""
    if len(values) < 8:
        return 0.0
    return float(np.median(np.abs(np.diff(values, 3))) / (0.6745 * np.sqrt(20.0)))


def _require(good: NDArray[np.bool_], rows: Indices, problem: str, values: Real) -> None:
    bad = np.flatnonzero(~good)
    if len(bad):
        raise InputError(problem, value=float(values[bad[0]]), place=row_list(rows[bad].astype(float)))


def _disorder(table: list[Real], rows: Indices, step: Real, falling: bool) -> InputError:
    first = int(np.flatnonzero(step <= 0)[-1 if falling else 0])
    place = f"row {int(rows[first if falling else first + 1])}"
    if step[first] == 0:
        return InputError(
            "a wavelength or frequency stands twice", place=place, remedy="Remove or average one of the rows."
        )
    swapped = any(np.all(np.diff(column) > 0) or np.all(np.diff(column) < 0) for column in table[1:])
    guess = "The other column is in order: are the two columns swapped?" if swapped else "Sort the rows."
    return InputError("rows are out of order", place=place, allowed="one direction", remedy=guess)
