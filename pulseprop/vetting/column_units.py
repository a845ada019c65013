"""A printed column in SI: its unit as said, percent by size, or the usual unit of data sheets."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.units import to_si
from pulseprop.vetting.heading_units import is_dispersion_parameter
from pulseprop.vetting.kinds import FRACTIONS, KIND_OF, USUAL_UNIT
from pulseprop.vetting.printed import Printed, Source
from pulseprop.vetting.sizes import is_percent
from pulseprop.vetting.table import Column, Inference, Quantity

__all__ = ["column_in_si"]

Real = NDArray[np.float64]


def column_in_si(
    source: Source, name: Quantity, printed: Printed, omega: Real, told: list[Inference]
) -> Column:
    """The column; what is inferred goes to `told`. omega: of the rows, rad/s, (R,). Raises InputError for a
    unit that is missing or not one of the quantity."""
    unit = _unit(source, name, printed, told)
    values, half = printed.values, printed.half
    if unit and name in KIND_OF:
        with np.errstate(over="ignore"):
            values = _in_si(values, unit, name, omega)
            half = np.abs(_in_si(half, unit, name, omega))
        if not np.isfinite(values).all():
            raise InputError(f"a number of {name} is beyond all measure", file=source.place)
    if is_dispersion_parameter(unit):
        told.append(_as_gvd(printed))
    return Column(
        quantity=name,
        header=printed.heading,
        unit=unit,
        cells=printed.cells,
        values=values,
        half_unit=half,
        uncertainty=_uncertainty(source, name, unit, values, omega, printed),
    )


def _in_si(values: Real, unit: str, name: Quantity, omega: Real) -> Real:
    """GVD = -D lambda^2 / (2 pi c) where the unit is one of D; all else by its unit alone."""
    if is_dispersion_parameter(unit):
        return -np.asarray(to_si(values, unit, "dispersion")) * TWO_PI_C / omega**2
    return np.asarray(to_si(values, unit, KIND_OF.get(name, "fraction")))


def _as_gvd(printed: Printed) -> Inference:
    return Inference(
        about="dispersion parameter",
        taken="turned to GVD = -D wavelength^2 / (2 pi c)",
        why=f'the unit of "{printed.heading or printed.name}" is one of D',
        overrule="--columns gvd/UNIT",
    )


def _uncertainty(
    source: Source, name: Quantity, unit: str, values: Real, omega: Real, printed: Printed
) -> Real | None:
    """As another column states it, SI; None where none does. Raises InputError for another's unit."""
    spread = printed.spread
    if spread is None:
        return None
    if spread.unit == "%" and name not in FRACTIONS:
        return spread.values / 100 * np.abs(values)
    unit = unit if spread.unit is None else spread.unit
    if not unit:
        return spread.values
    try:
        return np.abs(_in_si(spread.values, unit, name, omega))
    except InputError as error:
        raise error.located(file=source.place, place=f"uncertainty of {name}") from None


def _unit(source: Source, name: Quantity, printed: Printed, told: list[Inference]) -> str:
    """The unit of a column: as said, percent by size, or the usual one; "" for a plain number."""
    if name not in KIND_OF:
        return ""
    heading = f'"{printed.heading}" ' if printed.heading else ""
    if name in FRACTIONS:
        if printed.unit in ("%", ""):
            return printed.unit
        if printed.unit:
            raise _no_unit(source, name, printed, 'a fraction, or "%"')
        percent = is_percent(printed.values)
        taken = "in percent" if percent else "as fractions of 1"
        why = f"the largest is {np.max(printed.values):g}"
        told.append(
            Inference(about=f"column {heading}{name}", taken=taken, why=why, overrule=f"--columns {name}/%")
        )
        return "%" if percent else ""
    if printed.unit:
        return _checked(source, name, printed)
    usual = USUAL_UNIT.get(name)
    if usual is None:
        raise _no_unit(source, name, printed, "cm^-1, mm^-1, 1/m, dB/m")
    why = "no unit is said, and data sheets use this one"
    told.append(Inference(about=f"unit of {name}", taken=usual, why=why, overrule=f"--columns {name}/UNIT"))
    return usual


def _checked(source: Source, name: Quantity, printed: Printed) -> str:
    """The printed unit, where it is one of that quantity."""
    unit = printed.unit or ""
    try:
        to_si(1.0, unit, "dispersion" if is_dispersion_parameter(unit) else KIND_OF[name])
    except InputError as error:
        raise error.located(file=source.place, place=printed.heading or name) from None
    return unit


def _no_unit(source: Source, name: Quantity, printed: Printed, allowed: str) -> InputError:
    return InputError(
        f"the unit of {name} is missing or not one of it",
        value=printed.unit or printed.heading or None,
        allowed=allowed,
        remedy=f"Say it behind the name: --columns wavelength,{name}/{allowed.split(',')[0].split()[-1]}",
        file=source.place,
    )
