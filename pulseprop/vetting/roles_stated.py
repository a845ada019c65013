"""Columns as an option names them; headings only add units."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from pulseprop.vetting.heading_units import AXIS_OF_DIMENSION, dimension
from pulseprop.vetting.heading_words import AXES, Meaning
from pulseprop.vetting.headings import Heading
from pulseprop.vetting.kinds import KIND_OF
from pulseprop.vetting.number_columns import NumberColumns, Role
from pulseprop.vetting.read_options import Named, named_columns

__all__ = ["stated_roles"]


def stated_roles(columns: NumberColumns, option: str, heads: Mapping[int, Heading]) -> list[Role]:
    """The columns that the option names. Raises InputError where it does not fit the table."""
    roles = []
    for index, name in _placed(columns, named_columns(option)).items():
        if name.meaning is None:
            continue
        if index not in columns.cells:
            raise columns.refused(
                f"column {index + 1} holds no numbers", value=name.meaning, allowed="numbers"
            )
        head = heads.get(index, Heading(text=""))
        unit = name.unit if name.unit is not None else _fitting_unit(head, name.meaning)
        roles.append(columns.role(index, name.meaning, replace(head, unit=unit)))
    return roles


def _placed(columns: NumberColumns, names: tuple[Named, ...]) -> dict[int, Named]:
    """Each column with its name: all columns are named, or all that hold numbers."""
    for places in (tuple(range(columns.block.width)), columns.usable):
        if len(places) == len(names):
            return dict(zip(places, names, strict=True))
    count = len(columns.usable)
    raise columns.refused(
        "the table has another number of columns than are named",
        value=f"{len(names)} names",
        allowed=f"{count} names, one for each column of numbers",
        remedy='"-" leaves a column out, as in --columns wavelength,n,-',
    )


def _fitting_unit(head: Heading, meaning: Meaning) -> str | None:
    """The heading's unit, where it can be one of what the option calls the column."""
    if not head.unit:
        return head.unit
    if meaning in AXES:
        return head.unit if AXIS_OF_DIMENSION.get(dimension(head.unit)) == meaning else None
    return head.unit if meaning in KIND_OF else None
