"""Columns as their headings call them; headings that can be meant in two ways are refused."""

from __future__ import annotations

from collections.abc import Mapping

from pulseprop.vetting.heading_units import dimension
from pulseprop.vetting.headings import Heading, headings_of
from pulseprop.vetting.number_columns import NumberColumns, Role
from pulseprop.vetting.read_options import MOLAR_REMEDY

__all__ = ["headed_roles", "headings_by_column"]


def headings_by_column(columns: NumberColumns) -> dict[int, Heading]:
    """Headings of the columns that hold numbers; empty where there are none."""
    heads = headings_of(columns.block, columns.block.width)
    if heads:
        return {index: heads[index] for index in columns.usable}
    heads = headings_of(columns.block, len(columns.usable))
    if heads:
        return dict(zip(columns.usable, heads, strict=True))
    _check_commas(columns)
    return {}


def headed_roles(columns: NumberColumns, heads: Mapping[int, Heading]) -> dict[int, Role]:
    """The columns whose headings are understood. Raises InputError for those with two meanings."""
    for index, head in heads.items():
        _check_heading(columns, index, head)
    roles = {
        index: columns.role(index, head.meaning, head)
        for index, head in heads.items()
        if head.meaning is not None
    }
    if roles:
        taken = ", ".join(role.name + (f" in {role.unit}" if role.unit else "") for role in roles.values())
        words = ", ".join(f'"{role.heading}"' for role in roles.values())
        columns.tell("columns", taken, f"headings {words}", "--columns, --unit")
    return roles


def _check_heading(columns: NumberColumns, index: int, head: Heading) -> None:
    if head.extinction:
        raise columns.refused(
            "extinction has several meanings: k, absorbance, or molar absorption?",
            value=head.text,
            allowed="k, absorbance, alpha",
            remedy=f"Say which: --columns {columns.example([index], 'k')}",
        )
    if head.molar and (head.meaning in (None, "alpha")):
        raise columns.refused(
            "absorption per amount of substance gives an absorption only with the concentration",
            value=head.text,
            allowed="alpha (Napierian, per length), absorbance, k",
            remedy=MOLAR_REMEDY,
        )
    if head.scaled:
        raise columns.refused(
            "the heading holds a power of ten, which can be meant either way",
            value=head.text,
            allowed="numbers written out",
            remedy="Write the numbers out, and take the power of ten from the heading",
        )
    if head.meaning in ("k", "n") and head.unit and dimension(head.unit) == "m^-1":
        raise columns.refused(
            f"{head.meaning} has no unit; a coefficient per length is alpha",
            value=head.text,
            allowed=f"{head.meaning} as a plain number, or alpha with a unit",
            remedy=f"Say which: --columns {columns.example([index], 'alpha')}",
        )


def _check_commas(columns: NumberColumns) -> None:
    """0,4,1,4701 under two headings: decimal commas in a file that is separated by commas."""
    width = columns.block.width
    if width % 2 or width < 4 or not headings_of(columns.block, width // 2):
        return
    if all(cell.lstrip("+-").isdigit() for column in columns.cells.values() for cell in column):
        raise columns.refused(
            "commas are the decimal sign and separate the columns as well",
            value=",".join(columns.block.rows[0])[:60],
            allowed="decimal points, or semicolons between columns",
        )
