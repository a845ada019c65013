"""Tables of numbers in text files: any usual separator, decimal points or commas, headers, comments.

What a file says is never repaired: rows of different length, cells that are no numbers, NaN, rows out of
order or twice at the same place are refused with file, line and value.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.files.cells import is_missing
from pulseprop.files.layout import COMMA_NUMBER, NUMBER, first_row, header_of, is_comment
from pulseprop.files.source import contents, decoded

__all__ = ["NumberTable", "numbers_in", "read_numbers"]

Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True, eq=False)
class NumberTable:
    """Rows of numbers as a file holds them.

    values: shape (rows, columns). lines: line in the file of each row, counted from 1. cells: what was
    printed. header: names above the columns, empty where there are none; comments: the other lines before the
    rows.
    """

    file: str
    values: Real
    lines: NDArray[np.int64]
    cells: tuple[tuple[str, ...], ...]
    header: tuple[str, ...] = ()
    comments: tuple[str, ...] = ()

    @property
    def columns(self) -> int:
        return int(self.values.shape[1])

    @cached_property
    def places(self) -> tuple[int, ...]:
        """Decimal places of each column: the most that any of its cells uses; negative for 1e3 and the
        like."""
        return tuple(max(map(decimal_places, column)) for column in zip(*self.cells, strict=True))

    def index_of(self, column: int | str | None, default: int) -> int:
        """Number, from 0, of a column called by its number from 1 or by its header; `default`, from 0, for
        None."""
        if column is None:
            found = default
        elif isinstance(column, str):
            found = self.header.index(column) if column in self.header else -1
        else:
            found = column - 1
        if not 0 <= found < self.columns:
            raise self.refused(
                "the table has no such column",
                value=default + 1 if column is None else column,
                allowed=f"1 to {self.columns}" + (f", or {', '.join(self.header)}" if self.header else ""),
            )
        return found

    def column(self, column: int | str | None = None, default: int = 0) -> Real:
        """Values of a column, shape (rows,); see `index_of`."""
        return self.values[:, self.index_of(column, default)]

    def refused(
        self,
        problem: str,
        *,
        row: int | None = None,
        value: object = None,
        allowed: str = "",
        remedy: str = "",
    ) -> InputError:
        """An error that names this file and the line of a row (counted from 0)."""
        line = "" if row is None else f":{self.lines[row]}"
        return InputError(problem, value=value, allowed=allowed, remedy=remedy, file=self.file + line)

    def reversed(self) -> NumberTable:
        """The same rows from the last to the first."""
        return NumberTable(
            file=self.file,
            values=self.values[::-1],
            lines=self.lines[::-1],
            cells=self.cells[::-1],
            header=self.header,
            comments=self.comments,
        )

    def ascending(self, column: int | str | None = None, default: int = 0) -> NumberTable:
        """The table in ascending order of a column. Descending tables are turned round; any other order is
        refused."""
        x = self.column(column, default)
        steps = np.diff(x)
        if np.all(steps > 0):
            return self
        if np.all(steps < 0):
            return self.reversed()
        direction = 1.0 if np.count_nonzero(steps > 0) >= np.count_nonzero(steps < 0) else -1.0
        row = int(np.flatnonzero(direction * steps <= 0)[0]) + 1
        cell = self.cells[row][self.index_of(column, default)]
        if x[row] == x[row - 1]:
            raise self.refused(
                "two rows stand at the same place", row=row, value=cell, remedy="Keep one of them"
            )
        raise self.refused(
            "the rows are out of order",
            row=row,
            value=cell,
            allowed="rising or falling from the first row to the last",
            remedy="Sort the rows, or check this one",
        )


def decimal_places(cell: str) -> int:
    """Places behind the decimal sign that a printed number uses: 3 for "1.450", 5 for "1.20e-3", -3 for
    "1e3"."""
    mantissa, _, exponent = cell.replace(",", ".").lower().replace("d", "e").partition("e")
    return len(mantissa.partition(".")[2]) - int(exponent or 0)


def read_numbers(path: str | Path, *, columns: int = 2, rows: int = 2) -> NumberTable:
    """The table of numbers in a file, with at least so many columns and rows.

    Raises InputError with file, line and value for whatever is no such table.
    """
    path = Path(path)
    table = numbers_in(decoded(contents(path), str(path)), str(path))
    if table.columns < columns:
        raise table.refused(
            "the table has too few columns", row=0, value=table.columns, allowed=f"{columns} or more"
        )
    if len(table.values) < rows:
        raise table.refused("the table has too few rows", value=len(table.values), allowed=f"{rows} or more")
    return table


def numbers_in(text: str, file: str) -> NumberTable:
    """The table of numbers in a text; `file` is named in messages."""
    lines = text.splitlines()
    found = first_row(lines)
    if found is None:
        raise _no_rows(lines, file)
    first, style = found
    rows, numbers = [], []
    for number, line in enumerate(lines[first:], start=first + 1):
        if not line.strip() or is_comment(line, style):
            continue
        rows.append(style.cells(line))
        numbers.append(number)
    values = _values(rows, numbers, file)
    above = [line.strip() for line in lines[:first] if line.strip()]
    header = header_of(above, style, values.shape[1])
    return NumberTable(
        file=file,
        values=values,
        lines=np.array(numbers),
        cells=tuple(rows),
        header=header,
        comments=tuple(above),
    )


def _no_rows(lines: list[str], file: str) -> InputError:
    words = next((line.strip() for line in lines if line.strip()), None)
    problem = "the file is empty" if words is None else "the file holds no row of numbers"
    return InputError(problem, value=words and words[:60], allowed="columns of numbers", file=file)


def _values(rows: list[tuple[str, ...]], numbers: list[int], file: str) -> Real:
    """The cells as numbers, shape (rows, columns)."""
    width = len(rows[0])
    for cells, line in zip(rows, numbers, strict=True):
        if len(cells) != width:
            raise InputError(
                "the row has another number of cells than the first",
                value=" ".join(cells)[:60],
                allowed=f"{width} cells",
                file=f"{file}:{line}",
            )
    try:
        values = np.array([[float(cell) for cell in cells] for cells in rows])
    except ValueError:
        values = np.array(
            [[_number(cell, line, file) for cell in cells] for cells, line in zip(rows, numbers, strict=True)]
        )
    if not np.isfinite(values).all():
        row, column = np.argwhere(~np.isfinite(values))[0]
        raise _not_finite(rows[row][column], numbers[row], file)
    return values


def _number(cell: str, line: int, file: str) -> float:
    """One cell; Fortran's D in exponents is read too."""
    if NUMBER.fullmatch(cell):
        return float(cell.replace("D", "E").replace("d", "e"))
    if is_missing(cell):
        raise _not_finite(cell, line, file)
    comma = COMMA_NUMBER.fullmatch(cell)
    raise InputError(
        "the cell is not a number",
        value=cell[:60],
        allowed="a number such as 1.5 or 2e-3",
        remedy="Write decimal points throughout" if comma else "Remove the line, or begin it with #",
        file=f"{file}:{line}",
    )


def _not_finite(cell: str, line: int, file: str) -> InputError:
    return InputError(
        "the cell holds no number",
        value=cell,
        allowed="finite numbers",
        remedy="Remove the row",
        file=f"{file}:{line}",
    )
