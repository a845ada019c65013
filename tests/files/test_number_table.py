"""Number tables: every usual way to write them, and each way they go wrong with file, line and value."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from pulseprop.errors import InputError
from pulseprop.files.number_table import decimal_places, numbers_in, read_numbers

ROWS = [[400.5, 0.12], [401.0, 1.3e-4], [402.0, -7.0]]


@pytest.mark.parametrize(
    "text",
    [
        "400.5,0.12\n401.0,1.3e-4\n402,-7\n",
        "400.5, 0.12\n401.0, 1.3e-4\n402, -7\n",
        "400.5;0.12\n401.0;1.3E-4\n402;-7\n",
        "400,5;0,12\n401,0;1,3e-4\n402;-7\n",
        "400.5\t0.12\n401.0\t1.3e-4\n402\t-7\n",
        "400,5\t0,12\n401\t1,3e-4\n402\t-7\n",
        "400,5 0,12\n401 1,3e-4\n402 -7\n",
        "  400.5   0.12  \n\t401.0\t 1.3e-4\n\n402  -7\n",
        "400.5,0.12,\n401.0,1.3e-4,\n402,-7,\n",
        "400.5 .12\n401. 1.3D-4\n402 -7",
        "# invented\r\n# rows\r\nnm,A\r\n400.5,0.12\r\n401,1.3e-4\r\n; a note\r\n402,-7\r\n",
        '% c\n// d\n"made up"\n! e\n400.5 0.12\n401 1.3e-4 \n# end of the first part\n402 -7\n# end\n',
        "Invented spectrometer 7\nDate 2031\n12\nnm counts\n400.5 0.12\n401 1.3e-4\n402 -7\n",
    ],
)
def test_all_usual_separators_signs_and_comments_are_read(text: str) -> None:
    assert numbers_in(text, "a.csv").values.tolist() == ROWS


def test_header_lines_places_and_line_numbers_are_kept() -> None:
    table = numbers_in("# an invented glass\nwavelength,n\n0.40,1.4701\n\n0.5,1.46\n", "glass.csv")
    assert table.header == ("wavelength", "n")
    assert table.comments == ("# an invented glass", "wavelength,n")
    assert table.places == (2, 4)
    assert table.lines.tolist() == [3, 5]
    assert table.cells == (("0.40", "1.4701"), ("0.5", "1.46"))
    assert table.column("n").tolist() == [1.4701, 1.46]
    assert table.column(2).tolist() == [1.4701, 1.46]


@pytest.mark.parametrize(
    ("cell", "places"), [("1.450", 3), ("12", 0), ("1.20e-3", 5), ("1e3", -3), ("0,25", 2), ("1.5D2", -1)]
)
def test_decimal_places_are_those_printed(cell: str, places: int) -> None:
    assert decimal_places(cell) == places


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("", ["a.csv: the file is empty"]),
        ("\n \n", ["a.csv: the file is empty"]),
        ("# only words\n", ["a.csv: the file holds no row of numbers (got '# only words')"]),
        ("1 2\n2 nan\n", ["a.csv:2", "holds no number (got 'nan')", "finite"]),
        ("1,2\n2,\n3,4\n", ["a.csv:2", "another number of cells", "Allowed: 2 cells"]),
        ("x,y\n1,nan\n2,3\n", ["a.csv:2", "holds no number (got 'nan')"]),
        ("x,y\n1,-\n2,3\n", ["a.csv:2", "holds no number (got '-')"]),
        ("1,1.5\n2,\n".replace("2,", "2,,"), ["a.csv:2", "holds no number (got '')"]),
        ("1 2\n2 inf\n", ["a.csv:2", "holds no number (got 'inf')"]),
        ("1 2\n2 1e999\n", ["a.csv:2", "holds no number (got '1e999')"]),
        ("1 2\n2 3 4\n", ["a.csv:2", "another number of cells", "'2 3 4'", "2 cells"]),
        ("1 2\n2 3x\n", ["a.csv:2", "not a number (got '3x')", "begin it with #"]),
        ("1 2\n>>> end <<<\n", ["a.csv:2", "another number of cells"]),
        ("x,y\n1,2x\n2,3\n", ["a.csv:2", "not a number (got '2x')"]),
        ("1;2\n2;1.234,5\n", ["a.csv:2", "not a number (got '1.234,5')"]),
    ],
)
def test_broken_tables_are_refused_at_their_line(text: str, parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        numbers_in(text, "a.csv")
    for part in parts:
        assert part in str(caught.value)


def test_descending_rows_are_turned_round_with_all_that_belongs_to_them() -> None:
    table = numbers_in("3 1\n2 5\n1 7.5\n", "a.csv").ascending()
    assert table.values.tolist() == [[1, 7.5], [2, 5], [3, 1]]
    assert table.lines.tolist() == [3, 2, 1]
    assert table.cells[0] == ("1", "7.5")


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("1 0\n2 0\n4 0\n3 0\n5 0\n", ["a.csv:4", "out of order (got '3')", "rising or falling"]),
        ("5 0\n4 0\n4.5 0\n3 0\n", ["a.csv:3", "out of order (got '4.5')"]),
        ("1 0\n2 0\n2.0 0\n3 0\n", ["a.csv:3", "two rows stand at the same place (got '2.0')"]),
    ],
)
def test_rows_out_of_order_are_refused_at_their_line(text: str, parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        numbers_in(text, "a.csv").ascending()
    for part in parts:
        assert part in str(caught.value)


@pytest.mark.parametrize("column", [0, 3, "m", -1])
def test_columns_that_are_not_there_are_refused(column: int | str) -> None:
    with pytest.raises(InputError, match=r"no such column .* Allowed: 1 to 2, or x, y"):
        numbers_in("x,y\n1,2\n2,3\n", "a.csv").column(column)


def test_files_are_read_in_the_usual_encodings(tmp_path: Path) -> None:
    text = "Wellenlänge in nm;Zählrate\n400,5;3\n401;4\n"
    path = tmp_path / "spectrum.txt"
    for encoding in ("utf-8", "utf-8-sig", "latin-1", "utf-16"):
        path.write_bytes(text.encode(encoding))
        assert read_numbers(path).values.tolist() == [[400.5, 3], [401, 4]]


def test_files_that_hold_no_table_are_refused(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="there is no such file"):
        read_numbers(tmp_path / "absent.csv")
    with pytest.raises(InputError, match="not a file"):
        read_numbers(tmp_path)
    path = tmp_path / "a.bin"
    path.write_bytes(b"PK\x03\x04\x00\x00")
    with pytest.raises(InputError, match="no text file"):
        read_numbers(path)
    path.write_text("1\n2\n")
    with pytest.raises(InputError, match=r"too few columns \(got 1\)"):
        read_numbers(path)
    path.write_text("1 2\n")
    with pytest.raises(InputError, match=r"too few rows \(got 1\)"):
        read_numbers(path)
    with path.open("wb") as file:
        file.truncate(300 << 20)
    with pytest.raises(InputError, match=r"too large \(got '300 MiB'\)"):
        read_numbers(path)


finite = st.floats(allow_nan=False, allow_infinity=False)


@given(
    rows=st.lists(st.tuples(finite, finite), min_size=1, max_size=8),
    style=st.sampled_from([(",", "."), (";", "."), (";", ","), ("\t", ","), (" ", "."), (" ", ",")]),
)
def test_what_was_printed_comes_back(rows: list[tuple[float, float]], style: tuple[str, str]) -> None:
    separator, sign = style
    text = "\n".join(separator.join(repr(value).replace(".", sign) for value in row) for row in rows)
    assert np.array_equal(numbers_in(text, "a.csv").values, np.array(rows))


@given(text=st.text(alphabet='0123456789.,;eE-+ \t\n#xn"', max_size=60))
def test_any_text_is_a_finite_table_or_an_input_error(text: str) -> None:
    try:
        table = numbers_in(text, "a.csv")
    except InputError:
        return
    assert np.isfinite(table.values).all()
    assert len(table.values) == len(table.lines) == len(table.cells)
