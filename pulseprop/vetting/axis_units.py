"""The unit of a spectral axis: stated, in its heading, or the usual one in which its numbers make sense."""

from __future__ import annotations

from dataclasses import replace

from pulseprop.errors import InputError
from pulseprop.vetting.heading_units import AXIS_OF_DIMENSION, dimension
from pulseprop.vetting.heading_words import Axis
from pulseprop.vetting.number_columns import NumberColumns, Role
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.sizes import unit_by_size

__all__ = ["UNITS_ALLOWED", "axis_of_unit", "with_axis_unit"]

UNITS_ALLOWED = "nm, um, cm^-1, THz, eV"


def axis_of_unit(unit: str) -> Axis:
    """The axis that a stated unit belongs to. Raises InputError where there is none."""
    axis = AXIS_OF_DIMENSION.get(dimension(unit))
    if axis is None:
        raise InputError(
            "this is no unit of a spectral axis", value=unit, allowed=UNITS_ALLOWED, place="unit"
        )
    return axis


def with_axis_unit(columns: NumberColumns, role: Role, options: ReadOptions) -> Role:
    """The axis with its unit. Raises InputError with the option that says it, where it cannot be told."""
    stated = options.axis_unit()
    if stated is not None:
        return _with_stated(columns, role, stated, named=options.columns is not None)
    if not role.unit:
        return replace(role, unit=_usual_unit(columns, role))
    if AXIS_OF_DIMENSION.get(dimension(role.unit)) != role.meaning:
        raise columns.refused(
            f"the unit is not one of a {role.name}",
            value=role.heading or role.unit,
            allowed=UNITS_ALLOWED,
            remedy="Say what it is: --columns, --unit",
        )
    return role


def _with_stated(columns: NumberColumns, role: Role, unit: str, *, named: bool) -> Role:
    """The stated unit goes before the heading's, but not against a stated axis."""
    axis = axis_of_unit(unit)
    if named and axis != role.meaning:
        raise columns.refused(
            "the unit does not fit the axis",
            value=f"{role.name} in {unit}",
            allowed=f"a unit of a {role.name}",
        )
    if role.unit and role.unit != unit and not named:
        why = f'--unit goes before the heading "{role.heading}"'
        columns.tell(f"unit of the {axis.replace('_', ' ')}", unit, why, "--unit")
    return replace(role, unit=unit, meaning=axis)


def _usual_unit(columns: NumberColumns, role: Role) -> str:
    unit = unit_by_size(role.axis, role.values) if role.axis else None
    if unit is None:
        raise columns.refused(
            f"the unit of the {role.name} cannot be told",
            value=f"{role.cells[0]} to {role.cells[-1]}",
            allowed=UNITS_ALLOWED,
            remedy="Say it: --unit nm",
        )
    columns.tell(f"unit of the {role.name}", unit, f"{role.reach} fits no other usual one", "--unit")
    return unit
