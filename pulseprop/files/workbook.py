"""Blocks of numbers in a workbook (xlsx, xls, ods), read by python-calamine.

A sheet stores numbers, not digits: cells come as the shortest decimal of what is stored.
"""

from __future__ import annotations

import io
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from typing import Any

from pulseprop.errors import InputError
from pulseprop.files.blocks import Block, Line, blocks_of
from pulseprop.files.cells import tidy

__all__ = ["Sheet", "first_sheet", "is_workbook"]

SIGNATURES = (b"PK\x03\x04", b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1")
"""Zip archives (xlsx, ods) and compound files (xls)."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Sheet:
    """A sheet that holds numbers. others: names of the sheets after it, which were not read."""

    name: str
    blocks: list[Block]
    others: tuple[str, ...]


def is_workbook(data: bytes) -> bool:
    """Whether the bytes begin as a workbook does."""
    return data.startswith(SIGNATURES)


def first_sheet(data: bytes, file: str, is_heading: Callable[[str], bool]) -> Sheet:
    """The first sheet with a block of numbers; lines are its row numbers, from 1.

    Raises InputError where the bytes are no workbook, or no sheet holds numbers.
    """
    names, rows_of = _opened(data, file)
    for position, name in enumerate(names):
        lines = [Line(number, _text(row), row) for number, row in _rows(rows_of(name))]
        try:
            blocks = blocks_of(lines, f"{file}[{name}]", is_heading, padded=True)
        except InputError:
            continue
        return Sheet(name=name, blocks=blocks, others=tuple(names[position + 1 :]))
    raise InputError(
        "no sheet of the workbook holds rows of numbers",
        value=", ".join(names)[:60],
        allowed="columns of numbers on a sheet",
        file=file,
    )


def _opened(data: bytes, file: str) -> tuple[list[str], Callable[[str], list[list[Any]]]]:
    """Names of the sheets, and what reads one."""
    import python_calamine

    def guarded(action: Callable[[], Any]) -> Any:
        try:
            return action()
        except Exception as error:
            raise InputError(
                f"the workbook cannot be read: {str(error)[:80]}",
                file=file,
                remedy="Save it again as xlsx, or as CSV",
            ) from None

    book = guarded(lambda: python_calamine.CalamineWorkbook.from_filelike(io.BytesIO(data)))

    def rows_of(name: str) -> list[list[Any]]:
        rows: list[list[Any]] = guarded(lambda: book.get_sheet_by_name(name).to_python(skip_empty_area=False))
        return rows

    return list(book.sheet_names), rows_of


def _rows(rows: list[list[Any]]) -> Iterator[tuple[int, tuple[str, ...]]]:
    for number, row in enumerate(rows, start=1):
        yield number, tuple(_cell(value) for value in row)


def _cell(value: Any) -> str:
    """A cell as text; numbers as their shortest decimal."""
    if isinstance(value, float):
        return str(int(value)) if value.is_integer() and abs(value) < 1e15 else repr(value)
    return tidy(str(value)).strip()


def _text(cells: tuple[str, ...]) -> str:
    return " ".join(filter(None, cells))
