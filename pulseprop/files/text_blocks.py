"""Blocks of numbers in a text: separator found from the rows, quotes taken off, comments told apart."""

from __future__ import annotations

import csv
from collections import Counter
from collections.abc import Callable, Iterator

from pulseprop.files.blocks import Block, Line, blocks_of
from pulseprop.files.cells import looks_numeric, tidy
from pulseprop.files.layout import COMMENT, Style

__all__ = ["cells_of", "text_blocks"]

ENOUGH = 200
"""Rows that decide on the separator."""
DIGITS = frozenset("0123456789")


def text_blocks(text: str, file: str, is_heading: Callable[[str], bool]) -> list[Block]:
    """The blocks of numbers of a text; see `blocks_of`. Cells stay as printed, decimal commas included."""
    texts = tidy(text).splitlines()
    separator = _separator(texts)
    return blocks_of(_lines(texts, separator), file, is_heading, padded=separator is not None)


def cells_of(line: str, separator: str | None) -> tuple[str, ...]:
    """The cells of a line; a separator within quotes belongs to its cell."""
    if '"' in line and separator is not None:
        try:
            row = next(csv.reader([line.strip()], delimiter=separator, skipinitialspace=True), [])
        except csv.Error:
            row = line.split(separator)
        return tuple(cell.strip().strip('"').strip() for cell in row)
    return tuple(map(str.strip, line.split(separator)))


def _lines(texts: list[str], separator: str | None) -> Iterator[Line]:
    for number, text in enumerate(texts, start=1):
        cells = cells_of(text, separator)
        marked = text[:1] not in DIGITS and text.lstrip().startswith(COMMENT)
        remark = marked and not all(map(looks_numeric, filter(None, cells)))
        yield Line(number, text, None if remark else cells)


def _separator(texts: list[str]) -> str | None:
    """The separator of most of the first rows; one of numbers alone counts for more than one with words."""
    votes: Counter[str | None] = Counter()
    rows = 0
    for text in texts:
        separator = _separator_of(text)
        cells = cells_of(text, separator)
        count = sum(map(looks_numeric, cells))
        if count < 2:
            continue
        votes[separator] += 1 + 9 * (count == len(list(filter(None, cells))))
        rows += 1
        if rows == ENOUGH:
            break
    return votes.most_common(1)[0][0] if votes else None


def _separator_of(text: str) -> str | None:
    """The separator of one line, were it a row."""
    if '"' in text:
        return _quoted(text)
    return "|" if "|" in text else Style.of(text).separator


def _quoted(text: str) -> str | None:
    """The separator of a line with quotes: what stands outside them most."""
    outside = "".join(text.split('"')[::2])
    found = Counter(sign for sign in outside if sign in ";,\t").most_common(1)
    return found[0][0] if found else None
