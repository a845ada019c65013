"""What a report is made of, before anybody decides whether it becomes text or a page."""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["Column", "Paragraph", "Section", "Table", "padded_rows"]


@dataclass(frozen=True)
class Column:
    """Heading and unit of a column; words wrap and stand left, numbers line up on their points."""

    heading: str
    unit: str = ""
    words: bool = False


@dataclass(frozen=True)
class Table:
    """Rows of ready-made text, one entry a column. footer: rows below a rule, such as totals."""

    columns: tuple[Column, ...]
    rows: tuple[tuple[str, ...], ...]
    footer: tuple[tuple[str, ...], ...] = ()


@dataclass(frozen=True)
class Paragraph:
    """A paragraph; a label in front of it sets it off as an entry of a list."""

    text: str
    label: str = ""


@dataclass(frozen=True)
class Section:
    """One part of a report. key: names it for templates; no spaces."""

    key: str
    title: str
    blocks: tuple[Table | Paragraph, ...]


def padded_rows(table: Table, space: str = " ") -> list[tuple[str, ...]]:
    """All rows, the footer last, with numbers padded on the right so that their points line up."""
    rows = [*table.rows, *table.footer]
    columns = [
        [row[at] for row in rows] if column.words else _padded([row[at] for row in rows], space)
        for at, column in enumerate(table.columns)
    ]
    return list(zip(*columns, strict=True))


def _padded(texts: list[str], space: str) -> list[str]:
    tails = [_tail(text) for text in texts]
    return [
        text + space * (max(tails) - tail) if text else "" for text, tail in zip(texts, tails, strict=True)
    ]


def _tail(text: str) -> int:
    """Characters from the decimal point on; a number without one ends before its first letter or space."""
    return next((len(text) - at for at, character in enumerate(text) if character in ".e %"), 0)
