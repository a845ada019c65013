"""Blocks of numbers in texts: separators, words around, several in one file, broken rows."""

from __future__ import annotations

import pytest

from pulseprop.errors import InputError
from pulseprop.files.blocks import Block
from pulseprop.files.text_blocks import cells_of, text_blocks

ROWS = [("400.5", "0.12"), ("401.0", "1.3e-4"), ("402", "-7")]


def blocks(text: str) -> list[Block]:
    """Lines with the word "nm" are headings."""
    return text_blocks(text, "a.csv", lambda line: "nm" in line)


@pytest.mark.parametrize("separator", [",", ";", "\t", "  ", ", ", " ; "])
@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"])
def test_separators_and_line_ends(separator: str, end: str) -> None:
    text = end.join(["# invented", "nm" + separator + "A", *(separator.join(row) for row in ROWS)])
    (block,) = blocks(text)
    assert block.rows == ROWS
    assert block.numbers == [3, 4, 5]
    assert [line.text for line in block.above] == ["# invented", "nm" + separator + "A"]


def test_quoted_cells_keep_their_commas() -> None:
    assert cells_of('"Wavelength, nm","0,5"', ",") == ("Wavelength, nm", "0,5")
    (block,) = blocks('"a","b"\n"400","0,5"\n"401","0,6"\n')
    assert block.rows == [("400", "0,5"), ("401", "0,6")]
    (block,) = blocks('"400,5";"0,5"\n"401";"0,6"\n')
    assert block.rows == [("400,5", "0,5"), ("401", "0,6")]


def test_a_preamble_with_lone_numbers_is_no_block() -> None:
    text = "Invented spectrometer 7\nDate 2031 12\nscans 3 4\n\nnm n\n400 1.5\n401 1.4\n"
    (block,) = blocks(text)
    assert block.rows == [("400", "1.5"), ("401", "1.4")]
    assert any("2031" in line.text for line in block.above)
    assert not block.follows


def test_remarks_and_blank_lines_do_not_end_a_block() -> None:
    (block,) = blocks("400 1.5\n\n# half way\n; and on\n401 1.4\nend of data\n")
    assert block.numbers == [1, 5]
    assert [line.text for line in block.below] == ["# half way", "; and on", "end of data"]


def test_a_heading_begins_another_block() -> None:
    first, second = blocks("nm,n\n400,1.5\n401,1.4\nnm,k\n400,1e-5\n401,2e-5\n")
    assert (first.follows, second.follows) == (False, True)
    assert second.rows == [("400", "1e-5"), ("401", "2e-5")]
    first, second = blocks("# nm n\n400 1.5\n401 1.4\n\n# nm k\n400 1e-5\n401 2e-5\n")
    assert second.numbers == [6, 7]


def test_another_width_after_a_gap_is_another_block() -> None:
    first, second = blocks("400 1.5\n401 1.4\n\n400 1 2\n401 3 4\n")
    assert (first.width, second.width) == (2, 3)


def test_missing_cells_at_the_end_are_gaps_where_there_are_separators() -> None:
    (block,) = blocks("nm,n,k\n400,1.5,1e-5\n401,1.4\n402,1.3,\n")
    assert block.rows[1:] == [("401", "1.4", ""), ("402", "1.3", "")]


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("", ["the file is empty"]),
        ("\n \n", ["the file is empty"]),
        ("only words\n", ["no row of numbers", "only words"]),
        ("400 1.5\n401 1.4 7\n", ["a.csv:2", "another number of cells", "2 cells"]),
        ("400 1.5 3\n401 1.4\n", ["a.csv:2", "another number of cells", "3 cells"]),
        ("400,1.5\n401,1.4,7\n", ["a.csv:2", "another number of cells"]),
    ],
)
def test_broken_files_are_refused(text: str, parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        blocks(text)
    for part in parts:
        assert part in str(caught.value)


def test_columns_of_words_do_not_hide_a_row() -> None:
    (block,) = blocks("Line;nm;n\nd;587.56;1.5168\nF;486.13;1.5224\n")
    assert block.column(0) == ("d", "F")
    assert block.column(2) == ("1.5168", "1.5224")
