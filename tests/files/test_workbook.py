"""Workbooks: the first sheet with numbers, its row numbers, numbers as stored."""

from __future__ import annotations

import io
import zipfile

import openpyxl
import pytest

from pulseprop.errors import InputError
from pulseprop.files.workbook import first_sheet, is_workbook


def workbook(**sheets: list[list[object]]) -> bytes:
    book = openpyxl.Workbook()
    book.remove(book.active)  # type: ignore[arg-type]
    for name, rows in sheets.items():
        sheet = book.create_sheet(name)
        for row in rows:
            sheet.append(row)
    buffer = io.BytesIO()
    book.save(buffer)
    return buffer.getvalue()


def no_heading(line: str) -> bool:
    return False


def test_the_first_sheet_with_numbers_is_taken_with_its_own_row_numbers() -> None:
    rows: list[list[object]] = [[], ["Lot 7"], [], ["nm", "n"], [400, 1.4701], [500.5, "1.4620"]]
    data = workbook(Cover=[["words"]], Data=rows, Later=[[1, 2]])
    assert is_workbook(data)
    sheet = first_sheet(data, "lot.xlsx", no_heading)
    assert (sheet.name, sheet.others) == ("Data", ("Later",))
    (block,) = sheet.blocks
    assert block.numbers == [5, 6]
    assert block.rows == [("400", "1.4701"), ("500.5", "1.4620")]
    assert block.file == "lot.xlsx[Data]"


def test_numbers_come_as_the_shortest_decimal() -> None:
    data = workbook(A=[[1 / 3, 1e-8], [1e22, -3.0]])
    (block,) = first_sheet(data, "a.xlsx", no_heading).blocks
    assert block.rows == [("0.3333333333333333", "1e-08"), ("1e+22", "-3")]


def test_sheets_without_numbers_are_refused_by_name() -> None:
    with pytest.raises(InputError, match=r"no sheet of the workbook holds rows .*\(got 'One, Two'\)"):
        first_sheet(workbook(One=[["a"]], Two=[]), "a.xlsx", no_heading)


def test_broken_workbooks_are_refused() -> None:
    empty = io.BytesIO()
    zipfile.ZipFile(empty, "w").writestr("x", "y")
    for data in (b"PK\x03\x04 cut", workbook(A=[[1, 2]])[:700], empty):
        content = data.getvalue() if isinstance(data, io.BytesIO) else data
        with pytest.raises(InputError, match=r"a\.xlsx: the workbook cannot be read"):
            first_sheet(content, "a.xlsx", no_heading)
