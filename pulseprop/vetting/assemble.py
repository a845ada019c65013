"""From columns that are known to a table in SI: units, percent, rows with gaps, air and vacuum."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.material.wavelength_in_air import omegas_of_air_wavelengths
from pulseprop.units import to_si
from pulseprop.vetting.heading_words import Axis
from pulseprop.vetting.kinds import FRACTIONS, KIND_OF, USUAL_UNIT
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.remarks import Remark, axis_medium, index_medium, sample_thickness
from pulseprop.vetting.sizes import is_percent
from pulseprop.vetting.table import Column, Inference, Quantity, SentTable

__all__ = ["Printed", "Source", "table_of"]

Real = NDArray[np.float64]
Surrounding = Literal["air", "vacuum"]

MOST_NAMED = 12
"""Lines that are named one by one; of more the first and the last are."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Printed:
    """A column as printed. values, half: (R,), in its unit; values are NaN for missing cells. unit: "" for a
    plain number, None where none was said."""

    name: str
    unit: str | None
    heading: str
    cells: tuple[str, ...]
    values: Real
    half: Real


@dataclass(frozen=True, kw_only=True)
class Source:
    """Where a table comes from, and the words around it. place: file and sheet, for messages."""

    file: str
    place: str
    sha256: str
    options: ReadOptions
    words: tuple[str, ...] = ()
    title: str = ""
    thickness: float | None = None


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
    wavelength_in, omega = _omega(source, axis, lines, remarks, told)
    return SentTable(
        file=source.file,
        sha256=source.sha256,
        lines=lines,
        axis=_axis_name(axis.name),
        axis_unit=axis.unit or "",
        axis_cells=axis.cells,
        axis_values=axis.values,
        axis_half_unit=axis.half,
        omega=omega,
        columns=tuple(_column(source, name, _rows(printed, keep), told) for name, printed in columns),
        relative_to=_relative_to(source, remarks, told),
        wavelength_in=wavelength_in,
        thickness=_thickness(source, told),
        title=source.title,
        comments=source.words,
        inferred=tuple(told),
    )


def _axis_name(name: str) -> Axis:
    names: dict[str, Axis] = {
        "wavelength": "wavelength",
        "frequency": "frequency",
        "wavenumber": "wavenumber",
        "photon_energy": "photon_energy",
    }
    return names[name]


def _rows(printed: Printed, keep: NDArray[np.bool_]) -> Printed:
    if keep.all():
        return printed
    cells = tuple(cell for cell, kept in zip(printed.cells, keep, strict=True) if kept)
    return replace(printed, cells=cells, values=printed.values[keep], half=printed.half[keep])


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


def _omega(
    source: Source, axis: Printed, lines: NDArray[np.int64], remarks: Sequence[str], told: list[Inference]
) -> tuple[Surrounding, Real]:
    """Angular frequency of each row, and what the wavelengths are measured in."""
    bad = np.flatnonzero(~(axis.values > 0))
    if len(bad):
        raise InputError(
            "a place on the spectrum must be above zero",
            value=f"{axis.cells[bad[0]]} {axis.unit}",
            allowed=f"a {axis.name.replace('_', ' ')} above zero",
            remedy="Check which column is the spectral axis (--columns)",
            file=f"{source.place}:{lines[bad[0]]}",
        )
    omega = np.asarray(to_si(axis.values, axis.unit or "", "spectral"))
    if not (np.isfinite(omega).all() and np.all(omega > 0)):
        raise InputError("the spectral axis is beyond all measure", file=f"{source.place}:{lines[0]}")
    if axis.name != "wavelength":
        return "vacuum", omega
    if source.options.wavelength_in == "air":
        try:
            return "air", omegas_of_air_wavelengths(omega)
        except InputError as error:
            raise error.located(file=source.place) from None
    remark = axis_medium(remarks)
    if source.options.wavelength_in is None and remark is not None and remark.value == "air":
        return _in_air(omega, remark, told)
    return "vacuum", omega


def _in_air(omega: Real, remark: Remark, told: list[Inference]) -> tuple[Surrounding, Real]:
    """Wavelengths said to be in air, where the formula of air covers them all."""
    about, why, overrule = "wavelengths", f'the file says "{remark.words[:80]}"', "--wavelength-in vacuum"
    try:
        converted = omegas_of_air_wavelengths(omega)
    except InputError:
        why += ", but the formula of air covers 230 to 1690 nm only"
        told.append(Inference(about=about, taken="as they stand", why=why, overrule="--wavelength-in"))
        return "vacuum", omega
    told.append(Inference(about=about, taken="in air", why=why, overrule=overrule))
    return "air", converted


def _relative_to(source: Source, remarks: Sequence[str], told: list[Inference]) -> Surrounding | None:
    if source.options.relative_to is not None:
        return source.options.relative_to
    remark = index_medium(remarks)
    if remark is None:
        return None
    why = f'the file says "{remark.words[:80]}"'
    told.append(Inference(about="index", taken=f"against {remark.value}", why=why, overrule="--relative-to"))
    return "air" if remark.value == "air" else "vacuum"


def _thickness(source: Source, told: list[Inference]) -> float | None:
    """As stated, as the column's heading says, or as the words around the table do."""
    stated = source.options.length()
    if stated is not None:
        return stated
    length, why = source.thickness, "the heading of the column says so"
    if length is None:
        remark = sample_thickness(source.words)
        if remark is None:
            return None
        length, why = remark.length, f'the file says "{remark.words[:80]}"'
    told.append(Inference(about="thickness", taken=f"{length * 1e3:g} mm", why=why, overrule="--thickness"))
    return length


def _column(source: Source, name: Quantity, printed: Printed, told: list[Inference]) -> Column:
    unit = _unit(source, name, printed, told)
    values, half = printed.values, printed.half
    kind = KIND_OF.get(name)
    if kind and unit:
        with np.errstate(over="ignore"):
            values = np.asarray(to_si(values, unit, kind))
            half = np.asarray(to_si(half, unit, kind))
        if not np.isfinite(values).all():
            raise InputError(f"a number of {name} is beyond all measure", file=source.place)
    return Column(
        quantity=name, header=printed.heading, unit=unit, cells=printed.cells, values=values, half_unit=half
    )


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
        to_si(1.0, unit, KIND_OF[name])
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
