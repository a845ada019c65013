"""Reports as plain text, 110 columns at most."""

from __future__ import annotations

import re
import textwrap
from collections.abc import Iterable
from typing import TYPE_CHECKING

from pulseprop.reports.blocks import Column, Paragraph, Section, Table, padded_rows

if TYPE_CHECKING:
    from pulseprop.propagation.result import Run

__all__ = ["WIDTH", "blocks_text", "printable", "section_text", "table_text", "text_report"]

WIDTH = 108
GAP = "  "
NARROWEST = 16
"""A column of words is not wrapped below this many characters."""


def text_report(run: Run) -> str:
    """The report of a run for a person. Its first line answers the question."""
    from pulseprop.reports.content import sections

    opening = [*_wrapped(run.headline), ""]
    opening += [line for text in _about(run) for line in _wrapped(text)]
    parts = ["\n".join(opening), *(section_text(section) for section in sections(run))]
    return printable("\n\n".join(parts)) + "\n"


def printable(text: str) -> str:
    """Text without control characters, with which a scenario could steer a terminal."""
    return re.sub(r"[\x00-\x09\x0b-\x1f\x7f-\x9f]", "\ufffd", text)


def _about(run: Run) -> list[str]:
    title = run.scenario if not run.file or run.file == run.scenario else f"{run.scenario} ({run.file})"
    asked = run.question and f"Asked: {run.question}"
    expected = run.answer and f"Expected: {run.answer}"
    return [text for text in (title, asked, expected, run.note) if text]


def section_text(section: Section) -> str:
    """A heading, and what stands below it."""
    return f"{section.title.upper()}\n{blocks_text(section.blocks)}"


def blocks_text(blocks: Iterable[Table | Paragraph]) -> str:
    """Paragraphs and tables, set apart by blank lines where tables stand."""
    lines: list[str] = []
    for block in blocks:
        if isinstance(block, Table):
            lines += ["", *table_text(block).splitlines(), ""]
        else:
            lines += _paragraph(block)
    return "\n".join(lines).rstrip()


def _paragraph(block: Paragraph) -> list[str]:
    if not block.label:
        return _wrapped(block.text)
    return _wrapped(
        f"{block.label}  {block.text}" if block.label[0] == "[" else f"{block.label}: {block.text}", "    "
    )


def _wrapped(text: str, hanging: str = "") -> list[str]:
    return textwrap.wrap(
        text, WIDTH, subsequent_indent=hanging, break_long_words=False, break_on_hyphens=False
    ) or [""]


def table_text(table: Table) -> str:
    """A table with units below the headings, numbers aligned on their points, words wrapped to fit."""
    rows = padded_rows(table)
    cells = _fitted(table.columns, [[row[at] for row in rows] for at in range(len(table.columns))])
    heads = [(column.heading, column.unit) for column in table.columns]
    widths = [
        max(len(part) for part in [*head, *(line for cell in column for line in cell)])
        for head, column in zip(heads, cells, strict=True)
    ]
    lines = [_line(table.columns, [head[0] for head in heads], widths)]
    if any(column.unit for column in table.columns):
        lines.append(_line(table.columns, [head[1] for head in heads], widths))
    rule = "-" * (sum(widths) + len(GAP) * (len(widths) - 1))
    lines.append(rule)
    for number in range(len(rows)):
        if table.footer and number == len(table.rows):
            lines.append(rule)
        lines += _row_lines(table.columns, [column[number] for column in cells], widths)
    return "\n".join(lines)


def _fitted(columns: tuple[Column, ...], cells: list[list[str]]) -> list[list[list[str]]]:
    """Cells as lists of lines: the widest column of words gives way until the table fits."""
    natural = [
        max([len(column.heading), len(column.unit), *map(len, texts)])
        for column, texts in zip(columns, cells, strict=True)
    ]
    excess = sum(natural) + len(GAP) * (len(natural) - 1) - WIDTH
    wordy = [at for at, column in enumerate(columns) if column.words]
    if excess > 0 and wordy:
        widest = max(wordy, key=lambda at: natural[at])
        natural[widest] = max(natural[widest] - excess, NARROWEST)
    return [
        [_broken(text, width) if column.words else [text] for text in texts]
        for column, texts, width in zip(columns, cells, natural, strict=True)
    ]


def _broken(text: str, width: int) -> list[str]:
    return textwrap.wrap(text, width, subsequent_indent="  ") or [""]


def _row_lines(columns: tuple[Column, ...], cells: list[list[str]], widths: list[int]) -> list[str]:
    """The lines of one row; numbers stand on its first line."""
    height = max(len(cell) for cell in cells)
    padded = [cell + [""] * (height - len(cell)) for cell in cells]
    return [_line(columns, [cell[at] for cell in padded], widths) for at in range(height)]


def _line(columns: tuple[Column, ...], texts: list[str], widths: list[int]) -> str:
    parts = [
        text.ljust(width) if column.words else text.rjust(width)
        for column, text, width in zip(columns, texts, widths, strict=True)
    ]
    return GAP.join(parts).rstrip()
