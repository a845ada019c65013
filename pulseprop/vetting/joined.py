"""Blocks over the same axis, n in one and k in the other, are one table."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import numpy as np

from pulseprop.vetting.table import Inference, SentTable

__all__ = ["joined"]


def joined(tables: Sequence[SentTable]) -> list[SentTable]:
    """The tables, each put beside an earlier one that has the same axis and other quantities."""
    kept: list[SentTable] = []
    for table in tables:
        place = next((place for place, other in enumerate(kept) if _belong(other, table)), None)
        if place is None:
            kept.append(table)
        else:
            kept[place] = _side_by_side(kept[place], table)
    return kept


def _belong(first: SentTable, second: SentTable) -> bool:
    """The same axis, row by row, from different lines, and no quantity in both."""
    quantities = [{column.quantity for column in table.columns} for table in (first, second)]
    return (
        not quantities[0] & quantities[1]
        and not np.array_equal(first.lines, second.lines)
        and _kind(first) == _kind(second)
        and np.array_equal(first.omega, second.omega)
    )


def _kind(table: SentTable) -> tuple[object, ...]:
    return table.axis, table.wavelength_in, table.title, table.thickness


def _side_by_side(first: SentTable, second: SentTable) -> SentTable:
    names = ", ".join(column.quantity for column in second.columns)
    note = Inference(
        about=names,
        taken=f"beside the rows from line {first.lines[0]}",
        why=f"the block from line {second.lines[0]} has the same {first.axis.replace('_', ' ')}s",
        overrule="put the blocks in files of their own",
    )
    told = dict.fromkeys((*first.inferred, *second.inferred, note))
    comments = dict.fromkeys((*first.comments, *second.comments))
    return replace(
        first,
        columns=(*first.columns, *second.columns),
        relative_to=first.relative_to or second.relative_to,
        comments=tuple(comments),
        inferred=tuple(told),
    )
