"""How a text table is laid out: separator, decimal sign, where its rows begin, what its columns are
called."""

from __future__ import annotations

import re
from dataclasses import dataclass

__all__ = ["COMMA_NUMBER", "NUMBER", "Style", "first_row", "header_of", "is_comment"]

COMMENT = ("#", "%", ";", "//", '"', "!")
"""What begins a line that is no row, unless the line is one all the same."""

NUMBER = re.compile(r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eEdD][+-]?[0-9]+)?")
COMMA_NUMBER = re.compile(r"[+-]?(?:[0-9]+,?[0-9]*|,[0-9]+)(?:[eE][+-]?[0-9]+)?")


@dataclass(frozen=True)
class Style:
    """How cells are told apart: a separator, or None for white space; a comma beside it is a decimal sign."""

    separator: str | None

    @classmethod
    def of(cls, line: str) -> Style:
        """The style of a row of numbers."""
        for separator in (";", "\t"):
            if separator in line.strip():
                return cls(separator)
        words = line.split()
        if len(words) > 1 and all(COMMA_NUMBER.fullmatch(word) and word[-1] != "," for word in words):
            return cls(None)
        return cls("," if "," in line else None)

    def cells(self, line: str) -> tuple[str, ...]:
        """The cells of a line as printed, with decimal points; an empty last cell is the end of the line."""
        parts = [part.strip() for part in line.split(self.separator)]
        if len(parts) > 1 and not parts[-1]:
            parts.pop()
        if self.separator == "," or "," not in line:
            return tuple(parts)
        return tuple(part.replace(",", ".") if COMMA_NUMBER.fullmatch(part) else part for part in parts)


def is_comment(line: str, style: Style) -> bool:
    """True for a line that begins as comments do and is no row all the same."""
    bare = line.strip()
    return bare.startswith(COMMENT) and not _all_numbers(style.cells(bare))


def first_row(lines: list[str]) -> tuple[int, Style] | None:
    """Where the rows begin, and their style: the first line of two numbers, or of one if none has two.

    Lines right above it that are rows but for a cell belong to them: they must be reported, not skipped.
    """
    single = None
    for index, line in enumerate(lines):
        style = Style.of(line)
        cells = style.cells(line)
        if _all_numbers(cells):
            if len(cells) > 1:
                return _with_broken_rows(lines, index, style), style
            single = (index, style) if single is None else single
    return single


def _all_numbers(cells: tuple[str, ...]) -> bool:
    return bool(cells) and all(NUMBER.fullmatch(cell) for cell in cells)


def _with_broken_rows(lines: list[str], first: int, style: Style) -> int:
    width = len(style.cells(lines[first]))
    while first > 0 and not is_comment(lines[first - 1], style):
        cells = style.cells(lines[first - 1])
        if len(cells) != width or not any(NUMBER.fullmatch(cell) for cell in cells):
            break
        first -= 1
    return first


def header_of(above: list[str], style: Style, columns: int) -> tuple[str, ...]:
    """The names above the columns: the last line before the rows, where it has as many cells as they."""
    if not above:
        return ()
    line = above[-1].lstrip("#%;!/ ").rstrip()
    for separator in (style.separator, ",", ";", "\t", None):
        names = tuple(name.strip().strip('"') for name in line.split(separator))
        if len(names) == columns and all(names):
            return names
    return ()
