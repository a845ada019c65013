"""Cells: what is a number, what is missing, which sign is the decimal one, and what is refused."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.files.cells import decimal_commas, is_missing, looks_numeric, numbers, tidy


@pytest.mark.parametrize("cell", ["1.5", "-7", "+.5", "2e-3", "1,064", "1.3D-4", "1'064", "99.5%", "99.5 %"])
def test_numbers_in_any_dress_are_meant_as_numbers(cell: str) -> None:
    assert looks_numeric(cell)


@pytest.mark.parametrize("cell", ["", "nm", "-", ".", "1.5x", "e5", "1 064", "2031-03-04", "12:30"])
def test_words_dates_and_gaps_are_not(cell: str) -> None:
    assert not looks_numeric(cell)


@pytest.mark.parametrize(
    "cell",
    ["", "-", "--", "–", "NaN", "n.d.", "n/a", "N.A.", "nd", "#N/A", "#DIV/0!", "null", "?", "...", "inf"],
)
def test_what_people_write_for_nothing_is_missing(cell: str) -> None:
    assert is_missing(cell)
    assert np.isnan(numbers([cell, "1"], False, [1, 2], "a.csv")[0])


@pytest.mark.parametrize(
    ("columns", "commas"),
    [
        ([["400", "410"], ["1.5", "1.4"]], False),
        ([["400,5", "410"], ["1,5", "-"]], True),
        ([["1,064", "1,100"], ["1,449", "1,448"]], True),
        ([["400", "410"], ["7", "8"]], False),
        ([["400", "410"], [".", "8"]], False),
    ],
)
def test_the_decimal_sign_is_that_of_the_whole_table(columns: list[list[str]], commas: bool) -> None:
    assert decimal_commas(columns, [1, 2], "a.csv") is commas


@pytest.mark.parametrize(
    ("columns", "line", "cell"),
    [
        ([["1,064", "1,100"], ["1.449", "1.448"]], 1, "1,064"),
        ([["999", "1,000"], ["1", "2"]], 2, "1,000"),
        ([["400", "410"], ["1.234,5", "2"]], 1, "1.234,5"),
        ([["1", "1,234,567"], ["1", "2"]], 2, "1,234,567"),
    ],
)
def test_signs_that_may_separate_thousands_are_refused(
    columns: list[list[str]], line: int, cell: str
) -> None:
    with pytest.raises(InputError) as caught:
        decimal_commas(columns, [1, 2], "a.csv")
    assert f"a.csv:{line}" in str(caught.value)
    assert cell in str(caught.value)


@pytest.mark.parametrize("cell", ["1'064", "1 064", "1.234.567"])
def test_thousands_are_not_read_as_something_else(cell: str) -> None:
    with pytest.raises(InputError, match=r"a\.csv:2: thousands are separated here"):
        numbers(["1", cell], False, [1, 2], "a.csv")


@pytest.mark.parametrize("cell", ["1.5x", "<0.01", "1_000", "1.2.3", "1.45(2)", "ok"])
def test_what_is_no_number_is_refused_at_its_line(cell: str) -> None:
    with pytest.raises(InputError, match=r"a\.csv:7: the cell is not a number"):
        numbers(["1", cell], False, [3, 7], "a.csv")


def test_fortran_exponents_and_long_numbers_are_read() -> None:
    values = numbers(["1.3D-4", "1,5e2", "1e999"], True, [1, 2, 3], "a.csv")
    assert values[:2].tolist() == [1.3e-4, 150]
    assert np.isnan(values[2])


def test_signs_of_typesetters_become_plain() -> None:
    assert tidy("−0.5\u00a0nm") == "-0.5 nm"
