"""Columns that nothing names, told from the size and course of their numbers; else the user is asked."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from pulseprop.vetting.axis_units import UNITS_ALLOWED, axis_of_unit
from pulseprop.vetting.heading_words import AXES, Meaning, is_generic
from pulseprop.vetting.headings import Heading
from pulseprop.vetting.number_columns import NumberColumns, Role
from pulseprop.vetting.sizes import axis_by_size, quantity_by_size

__all__ = ["sized_axis", "sized_quantities"]

QUESTION = "n, k, alpha, absorbance, internal_transmittance, transmittance, reflectance, gdd, …"
LARGEST_K = 10.0
SILENT = Heading(text="")


def sized_axis(
    columns: NumberColumns, heads: Mapping[int, Heading], unit: str | None, known: Mapping[int, Role]
) -> Role:
    """The first column as the axis, where its heading says nothing: by the stated unit, or by size."""
    first = columns.usable[0]
    head = heads.get(first, SILENT)
    if first in known or not is_generic(head.text):
        raise columns.refused(
            "no column is known as the spectral axis",
            value=", ".join(other.text for other in heads.values())[:60] or None,
            allowed=", ".join(AXES),
            remedy=f"Name the columns: --columns {columns.example(columns.usable[1:2], 'n')}",
        )
    if unit is not None:
        columns.tell("spectral axis", "the first column", "nothing names another", "--columns")
        return columns.role(first, axis_of_unit(unit), Heading(text=head.text, unit=unit))
    return _by_size(columns, first, head)


def _by_size(columns: NumberColumns, first: int, head: Heading) -> Role:
    beside = columns.values(columns.usable[1]) if len(columns.usable) > 1 else None
    axis, unit = axis_by_size(columns.values(first), beside)
    if axis is None:
        cells = columns.cells[first]
        raise columns.refused(
            f"the unit of the first column cannot be told: {unit}?",
            value=f"{cells[0]} to {cells[-1]}",
            allowed=UNITS_ALLOWED,
            remedy="Say it: --unit nm",
        )
    role = columns.role(first, axis, Heading(text=head.text, unit=unit))
    columns.tell("spectral axis", f"{role.name} in {unit}", f"{role.reach} in the first column", "--unit")
    return role


def sized_quantities(columns: NumberColumns, heads: Mapping[int, Heading], axes: Sequence[int]) -> list[Role]:
    """n, and k beside it, where no heading names a quantity; anything else is asked."""
    rest = [index for index in columns.usable if index not in axes]
    names = _names(columns, heads, rest)
    if not names:
        words = [heads[index].text for index in rest if index in heads and heads[index].text]
        raise columns.refused(
            "what the columns hold cannot be told",
            value=", ".join(words or [columns.cells[index][0] for index in rest])[:60] or None,
            allowed=QUESTION,
            remedy=f"Name each column: --columns {columns.example(rest[:1], 'k')}",
        )
    why = "an index lies between 1 and 6 and varies little" + ("; k stands beside it" * (len(names) > 1))
    columns.tell("columns", ", ".join(names), why, "--columns")
    return [
        columns.role(index, name, Heading(text=heads.get(index, SILENT).text))
        for index, name in zip(rest, names, strict=True)
    ]


def _names(columns: NumberColumns, heads: Mapping[int, Heading], rest: Sequence[int]) -> list[Meaning]:
    """What the columns are by size; empty where that cannot be told."""
    if not 1 <= len(rest) <= 2 or not all(is_generic(heads.get(index, SILENT).text) for index in rest):
        return []
    if quantity_by_size(columns.values(rest[0])) != "n":
        return []
    if len(rest) == 1:
        return ["n"]
    k = columns.values(rest[1])
    return ["n", "k"] if 0 <= np.nanmin(k) < 0.9 and np.nanmax(k) <= LARGEST_K else []
