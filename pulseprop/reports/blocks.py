"""What a report is made of, before anybody decides whether it becomes text or a page."""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["Column", "Paragraph", "Section", "Table"]


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
