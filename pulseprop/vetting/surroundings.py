"""What a table is measured in and on: wavelengths in air or vacuum, index against either, thickness."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.material.wavelength_in_air import omegas_of_air_wavelengths
from pulseprop.units import to_si
from pulseprop.vetting.printed import Printed, Source
from pulseprop.vetting.remarks import Remark, axis_medium, index_medium, sample_thickness
from pulseprop.vetting.table import Inference

__all__ = ["axis_omega", "index_against", "thickness_of"]

Real = NDArray[np.float64]
Surrounding = Literal["air", "vacuum"]

SHORTEST, LONGEST = 10e-9, 1.0
"""Vacuum wavelengths in m, from the far ultraviolet to radio waves, between which a table is believed."""
ROUNDING = 1e-9
"""Relative, of a limit that is printed as a frequency or the like."""


def axis_omega(
    source: Source, axis: Printed, lines: NDArray[np.int64], remarks: Sequence[str], told: list[Inference]
) -> tuple[Surrounding, Real]:
    """What the wavelengths are measured in, and the angular frequency of each row in rad/s, (R,).

    Raises InputError, with the line, for a place that is not above zero, or beyond SHORTEST and LONGEST in
    the unit that an option states, and outside the range of the formula of air where an option says air.
    """
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
    if source.options.unit is not None:
        _check_stated_unit(source, axis, lines, TWO_PI_C / omega)
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


def _check_stated_unit(source: Source, axis: Printed, lines: NDArray[np.int64], wavelength: Real) -> None:
    """Refuses rows outside SHORTEST to LONGEST: a slip of the option. What the file itself calls so is read,
    for a wrong unit in it is a finding.
    """
    outside = np.flatnonzero(
        (wavelength < SHORTEST * (1 - ROUNDING)) | (wavelength > LONGEST * (1 + ROUNDING))
    )
    if len(outside):
        row = int(outside[0])
        raise InputError(
            f"in this unit the row stands at a vacuum wavelength of {wavelength[row]:.3g} m",
            value=f"{axis.cells[row]} {axis.unit}",
            allowed="vacuum wavelengths from 10 nm to 1 m, or what corresponds to them",
            remedy="Correct --unit (nm, um, cm^-1, THz, eV), or say which column is the axis: --columns",
            file=f"{source.place}:{lines[row]}",
        )


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


def index_against(source: Source, remarks: Sequence[str], told: list[Inference]) -> Surrounding | None:
    """What the index is against: as stated, as the words say, else None."""
    if source.options.relative_to is not None:
        return source.options.relative_to
    remark = index_medium(remarks)
    if remark is None:
        return None
    why = f'the file says "{remark.words[:80]}"'
    told.append(Inference(about="index", taken=f"against {remark.value}", why=why, overrule="--relative-to"))
    return "air" if remark.value == "air" else "vacuum"


def thickness_of(source: Source, told: list[Inference]) -> float | None:
    """As stated, as the heading of the column or a record of the spectrum says, or as the words around do."""
    stated = source.options.length()
    if stated is not None:
        return stated
    length, why = source.thickness, f"{source.thickness_said_by} says so"
    if length is None:
        remark = sample_thickness(source.words)
        if remark is None:
            return None
        length, why = remark.length, f'the file says "{remark.words[:80]}"'
    told.append(Inference(about="thickness", taken=f"{length * 1e3:g} mm", why=why, overrule="--thickness"))
    return length
