"""Tables that a scenario points to: which file, which columns, which units."""

from __future__ import annotations

import math
from typing import Annotated, Any, Literal, Self

from pydantic import Field, PlainValidator, model_validator

from pulseprop.scenario.fields import (
    Against,
    Column,
    Fraction,
    Length,
    Name,
    Place,
    SpectralAxis,
    Table,
    check_spectral_unit,
    check_unit,
    complain,
    measured,
)

__all__ = [
    "AbsorptionFile",
    "Anchor",
    "AutocorrelationFile",
    "IndexFile",
    "SpectrumFile",
    "Tails",
    "TraceFile",
    "Uncertainty",
]


class DataFile(Table):
    """file: path relative to the scenario. x_column, y_column: number counted from 1 or header; the first
    two by default."""

    file: Name
    x_column: Column | None = None
    y_column: Column | None = None


class SpectralFile(DataFile):
    """A table over the spectrum. wavelength_in: what its wavelengths are measured in."""

    x: SpectralAxis = "wavelength"
    x_unit: Name
    wavelength_in: Against = "vacuum"

    @model_validator(mode="after")
    def _units_fit(self) -> SpectralFile:
        check_spectral_unit(self.x, self.x_unit)
        if self.wavelength_in == "air" and self.x != "wavelength":
            raise complain(
                f"{self.x} is the same in air and in vacuum",
                at="wavelength_in",
                allowed="with wavelengths only",
            )
        return self


def _background(value: Any) -> float | str:
    if isinstance(value, str) and value:
        return value
    if isinstance(value, int | float) and not isinstance(value, bool) and math.isfinite(value):
        return float(value)
    raise complain(
        "this is no background", value=value, allowed="a number in the unit of y, or the name of a file"
    )


class SpectrumFile(SpectralFile):
    """A measured spectrum of the pulse.

    y: counts and power are power per x; amplitude is |A| of the field's spectrum over frequency, whatever x
    is, and takes no Jacobian. phase: column of the spectral
    phase, in phase_unit; the field goes as exp(+i phase_sign phase). background: a number of the unit of y,
    or a file of the same kind. noise_cut: share of the peak below which rows count as noise.
    """

    x: SpectralAxis
    y: Literal["counts", "power", "amplitude"]
    phase: Column | None = None
    phase_unit: Name = "rad"
    phase_sign: Literal[1, -1] = 1
    background: Annotated[float | str, PlainValidator(_background)] | None = None
    noise_cut: Fraction | None = None

    @model_validator(mode="after")
    def _phase_unit_fits(self) -> SpectrumFile:
        check_unit("phase", self.phase_unit, "phase_unit")
        return self


class TimeFile(DataFile):
    """A signal over time or delay, of any scale. x_unit: of the time."""

    x_unit: Name

    @model_validator(mode="after")
    def _units_fit(self) -> Self:
        check_unit("time", self.x_unit, "x_unit")
        return self


class TraceFile(TimeFile):
    """A measured waveform E(t)."""

    x: Literal["time"] = "time"
    y: Literal["field"] = "field"


class AutocorrelationFile(TimeFile):
    """A measured intensity autocorrelation; x is the delay between the two copies."""

    x: Literal["delay"] = "delay"
    y: Literal["intensity"] = "intensity"


class Tails(Table):
    """What is assumed of the absorption below and above the table in frequency: matched to its end row, or
    none."""

    below: Literal["matched", "none"] = "matched"
    above: Literal["matched", "none"] = "matched"


Y_UNITS = {"alpha": "inverse_length", "molar": "molar_absorption"}
"""The y whose unit must be stated, and the kind of it."""

NEEDS_LENGTH = ("absorbance", "napierian", "internal_transmittance", "transmittance")


class AbsorptionFile(SpectralFile):
    """A measured absorption.

    y: absorbance = log10(1/T), napierian = ln(1/T), alpha per length (Napierian), k, molar (decadic),
    internal_transmittance, or transmittance through both faces. path_length: m. concentration: mol/m^3.
    ceiling: value of y above which rows are only limits; for transmittances, the absorbance above which.
    """

    x: SpectralAxis
    y: Literal["absorbance", "napierian", "alpha", "k", "molar", "internal_transmittance", "transmittance"]
    y_unit: Name | None = None
    path_length: Length | None = None
    concentration: Annotated[float, measured("concentration", above=0)] | None = None
    ceiling: Annotated[float, Field(gt=0)] | None = None
    tails: Tails = Field(default_factory=Tails)

    @model_validator(mode="after")
    def _complete(self) -> AbsorptionFile:
        if self.y in NEEDS_LENGTH and self.path_length is None:
            raise complain(f"y = {self.y!r} needs path_length", remedy='Add path_length, such as "2 mm"')
        if self.y not in NEEDS_LENGTH and self.path_length is not None:
            raise complain(f"path_length has no meaning beside y = {self.y!r}", at="path_length")
        if (self.y == "molar") != (self.concentration is not None):
            raise complain("y = 'molar' and concentration belong together", remedy="Give both or neither")
        self._check_y_unit()
        return self

    def _check_y_unit(self) -> None:
        kind = Y_UNITS.get(self.y)
        if kind and self.y_unit is None:
            raise complain(f"y = {self.y!r} needs y_unit", remedy="Add y_unit")
        if kind and self.y_unit:
            check_unit(kind, self.y_unit, "y_unit")
        if not kind and self.y_unit is not None and not ("transmittance" in self.y and self.y_unit == "%"):
            allowed = '"%" or none' if "transmittance" in self.y else "no y_unit"
            raise complain(f"{self.y} has no such unit", at="y_unit", value=self.y_unit, allowed=allowed)


class Uncertainty(Table):
    """Uncertainties of a table of n and k: n absolute; k as a share of the value."""

    n: Annotated[float, Field(gt=0)] | None = None
    k: Annotated[float, measured("fraction", above=0)] | None = None


class IndexFile(SpectralFile):
    """A table of n over the spectrum and, where there, k in the next column."""

    relative_to: Against | None = None
    uncertainty: Uncertainty | None = None


class Anchor(Table):
    """A known index of the whole medium, background included, at one place."""

    at: Place
    index: Annotated[float, Field(gt=0)]
    uncertainty: Annotated[float, Field(gt=0)] | None = None
