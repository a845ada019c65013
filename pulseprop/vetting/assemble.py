"""From columns that are known to a table in SI; rows with gaps are left out and told."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.vetting.column_units import column_in_si
from pulseprop.vetting.heading_words import AXES
from pulseprop.vetting.printed import Printed, Source
from pulseprop.vetting.surroundings import axis_omega, index_against, thickness_of
from pulseprop.vetting.table import Inference, Quantity, SentTable

__all__ = ["table_of"]

MOST_NAMED = 12
"""Lines that are named one by one; of more the first and the last are."""


def table_of(
    source: Source,
    axis: Printed,
    columns: Sequence[tuple[Quantity, Printed]],
    lines: NDArray[np.int64],
    notes: Sequence[Inference],
) -> SentTable:
    """The table, rows with gaps left out and told. `axis.name` is the axis, with a unit.

    Raises InputError, with the line, for a place that is not above zero, a missing unit, or no complete row.
    """
    told = list(notes)
    keep = _complete(source, axis, [printed for _, printed in columns], lines, told)
    lines, axis = lines[keep], _rows(axis, keep)
    remarks = [*source.words, axis.heading, *(printed.heading for _, printed in columns)]
    wavelength_in, omega = axis_omega(source, axis, lines, remarks, told)
    return SentTable(
        file=source.file,
        sha256=source.sha256,
        lines=lines,
        axis=next(name for name in AXES if name == axis.name),
        axis_unit=axis.unit or "",
        axis_cells=axis.cells,
        axis_values=axis.values,
        axis_half_unit=axis.half,
        omega=omega,
        columns=tuple(
            column_in_si(source, name, _rows(printed, keep), omega, told) for name, printed in columns
        ),
        relative_to=index_against(source, remarks, told),
        wavelength_in=wavelength_in,
        thickness=thickness_of(source, told),
        title=source.title,
        comments=source.words,
        inferred=tuple(told),
    )


def _rows(printed: Printed, keep: NDArray[np.bool_]) -> Printed:
    if keep.all():
        return printed
    cells = tuple(cell for cell, kept in zip(printed.cells, keep, strict=True) if kept)
    spread = printed.spread and replace(printed.spread, values=printed.spread.values[keep])
    return replace(printed, cells=cells, values=printed.values[keep], half=printed.half[keep], spread=spread)


def _complete(
    source: Source, axis: Printed, columns: Sequence[Printed], lines: NDArray[np.int64], told: list[Inference]
) -> NDArray[np.bool_]:
    """True for rows without a gap; the others are told column by column."""
    keep = np.ones(len(lines), dtype=bool)
    for printed in (axis, *columns):
        gaps = np.isnan(printed.values)
        if gaps.any():
            keep &= ~gaps
            cells = sorted({printed.cells[row] or "nothing" for row in np.flatnonzero(gaps)})
            told.append(
                Inference(
                    about=_named_lines(lines[gaps]),
                    taken="left out",
                    why=f"the cells of {printed.heading or printed.name} hold {', '.join(cells[:4])}",
                    overrule='fill the cells in, or leave the column out with "-" in --columns',
                )
            )
    if not keep.any():
        raise InputError("no row of the table is complete", file=f"{source.place}:{lines[0]}")
    return keep


def _named_lines(lines: NDArray[np.int64]) -> str:
    if len(lines) == 1:
        return f"line {lines[0]}"
    if len(lines) <= MOST_NAMED:
        return "lines " + ", ".join(map(str, lines))
    return f"{len(lines)} lines from {lines[0]} to {lines[-1]}"
