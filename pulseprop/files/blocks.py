"""Blocks of numbers in rows of cells, as people send them: with words around and between, and gaps.

The strict reader of `number_table` refuses whatever is not one clean table; here several blocks may follow
each other in one file (n, then k), columns may hold words, and cells may be missing. Nothing is dropped
without being told: what stands around a block goes with it.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.files.cells import is_missing, looks_numeric

__all__ = ["Block", "Line", "blocks_of"]

MOST_COLUMNS = 1000
BROKEN = frozenset("0123456789+-.,<>~")
"""A cell that begins so and is no number was meant as one."""


@dataclass(frozen=True, slots=True)
class Line:
    """One line of a file or row of a sheet. cells: as its style splits it, or None for a comment."""

    number: int
    text: str
    cells: tuple[str, ...] | None


@dataclass(kw_only=True, eq=False)
class Block:
    """Rows of equally many cells.

    rows: cells as printed, R tuples of W. above, below: other lines around them. padded: whether missing
    cells at the end of a row may be added (false for white space, where a gap cannot be told). follows:
    whether another block stands before it.
    """

    file: str
    padded: bool
    follows: bool = False
    rows: list[tuple[str, ...]] = field(default_factory=list)
    numbers: list[int] = field(default_factory=list)
    above: list[Line] = field(default_factory=list)
    below: list[Line] = field(default_factory=list)

    @property
    def width(self) -> int:
        return len(self.rows[0])

    @property
    def lines(self) -> NDArray[np.int64]:
        """Line in the file of each row, (R,)."""
        return np.array(self.numbers, dtype=np.int64)

    def column(self, index: int) -> tuple[str, ...]:
        """Cells of one column, from 0."""
        return tuple(row[index] for row in self.rows)

    def as_lines(self) -> list[Line]:
        """All that was read into it, as lines."""
        pairs = zip(self.numbers, self.rows, strict=True)
        return [*self.above, *(Line(number, " ".join(row), row) for number, row in pairs), *self.below]

    def take(self, line: Line, cells: tuple[str, ...]) -> None:
        """One row more. Raises InputError where it has another number of cells, or too many."""
        if len(cells) > MOST_COLUMNS:
            raise InputError(
                "the row has too many cells",
                value=len(cells),
                allowed=f"{MOST_COLUMNS} cells",
                remedy="Write a row a line",
                file=f"{self.file}:{line.number}",
            )
        short = self.width - len(cells) if self.rows else 0
        if short < 0 or (short and not self.padded):
            raise InputError(
                "the row has another number of cells than the first",
                value=line.text.strip()[:60],
                allowed=f"{self.width} cells",
                file=f"{self.file}:{line.number}",
            )
        self.rows.append(cells + ("",) * short)
        self.numbers.append(line.number)


def blocks_of(
    lines: Iterable[Line], file: str, is_heading: Callable[[str], bool], *, padded: bool
) -> list[Block]:
    """The blocks, in order. `is_heading` tells a line that names columns: there a new block begins.

    Raises InputError, with the line, for a row that does not fit, or where there are no rows at all.
    """
    found: list[Block] = []
    waiting: list[Line] = []
    blank = False
    for line in lines:
        cells = line.cells
        if not line.text.strip():
            blank = True
        elif cells is None or not _is_row(cells):
            waiting.append(line)
        else:
            apart = bool(waiting) or blank
            if not found or (apart and _begins(found[-1], cells, waiting, blank, is_heading)):
                found.append(Block(file=file, padded=padded, follows=bool(found), above=waiting))
            else:
                found[-1].below += waiting
            found[-1].take(line, cells)
            waiting, blank = [], False
    if not found:
        raise _no_rows(waiting, file)
    found[-1].below += waiting
    return _without_preamble(found, is_heading)


def _is_row(cells: Sequence[str]) -> bool:
    """Two numbers, or one with nothing but gaps beside it."""
    count = sum(map(looks_numeric, cells))
    if count >= 2:
        return True
    rest = [cell for cell in cells if not looks_numeric(cell)]
    return count == 1 and len(cells) > 1 and all(is_missing(cell) or cell[0] in BROKEN for cell in rest)


def _begins(
    block: Block, cells: Sequence[str], waiting: list[Line], blank: bool, is_heading: Callable[[str], bool]
) -> bool:
    """Whether a row is the first of another block."""
    if any(is_heading(line.text) for line in waiting):
        return True
    apart = blank or any(line.cells is not None for line in waiting)
    if apart and len(cells) != block.width:
        return True
    return any(line.cells is not None for line in waiting)


def _without_preamble(found: list[Block], is_heading: Callable[[str], bool]) -> list[Block]:
    """The true blocks; rows of numbers in a preamble become words above the first of them."""
    longest = max(found, key=lambda block: (len(block.rows), not _led_by_words(block)))
    count = next(place for place, block in enumerate(found) if not _is_preamble(block, longest, is_heading))
    before = [line for block in found[:count] for line in block.as_lines()]
    kept = found[count:]
    kept[0].above, kept[0].follows = before + kept[0].above, False
    return kept


def _is_preamble(block: Block, longest: Block, is_heading: Callable[[str], bool]) -> bool:
    """Rows that begin with words where true rows do not, or a lone row unlike them, and no heading above."""
    if block is longest or any(is_heading(line.text) for line in block.above):
        return False
    if _led_by_words(block):
        return not _led_by_words(longest)
    return len(block.rows) < 2 and block.width != longest.width


def _led_by_words(block: Block) -> bool:
    return not any(looks_numeric(row[0]) for row in block.rows)


def _no_rows(lines: list[Line], file: str) -> InputError:
    words = next((line.text.strip() for line in lines if line.text.strip()), None)
    problem = "the file is empty" if words is None else "the file holds no row of numbers"
    return InputError(problem, value=words and words[:60], allowed="columns of numbers", file=file)
