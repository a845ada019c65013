"""Absorption lines, relaxations and carriers of a medium."""

from __future__ import annotations

import math
from typing import Annotated

from pydantic import Field, model_validator

from pulseprop.scenario.fields import (
    Against,
    Name,
    Place,
    Range,
    SpectralWidth,
    Table,
    complain,
    exactly_one,
    measured,
    together,
)

__all__ = ["CarriersTable", "LineTable", "LinesFile", "RelaxationTable"]

Time = Annotated[float, measured("time", above=0)]
PlasmaFrequency = Annotated[float, measured("angular_frequency", above=0)]

HOMOGENEOUS = ("width", "half_width", "dephasing_time")
STRENGTHS = (
    "peak_absorption",
    "integrated_absorption",
    "oscillator_strength",
    "plasma_frequency",
    "static_susceptibility",
)


class LineTable(Table):
    """One line, as stated. `full_width` and `gaussian_width` are its FWHM in Hz whatever they were stated by.

    centre: a `Position`. width (FWHM), half_width, doppler_width (FWHM): `Width`; dephasing_time: T2 in s.
    peak_absorption: Napierian, 1/m; integrated_absorption: Hz/m; number_density: m^-3; plasma_frequency:
    rad/s. Negative strengths amplify.
    """

    centre: Place
    wavelength_in: Against = "vacuum"
    width: SpectralWidth | None = None
    half_width: SpectralWidth | None = None
    dephasing_time: Time | None = None
    doppler_width: SpectralWidth | None = None
    peak_absorption: Annotated[float, measured("inverse_length")] | None = None
    integrated_absorption: Annotated[float, measured("integrated_absorption")] | None = None
    oscillator_strength: float | None = None
    number_density: Annotated[float, measured("number_density", above=0)] | None = None
    plasma_frequency: PlasmaFrequency | None = None
    static_susceptibility: float | None = None

    @property
    def full_width(self) -> float:
        """FWHM of the homogeneous line, Hz; 0 for a purely Gaussian one."""
        if self.dephasing_time is not None:
            return 1 / (math.pi * self.dephasing_time)
        if self.half_width is not None:
            return 2 * self.half_width.about(self.centre.omega)
        return 0.0 if self.width is None else self.width.about(self.centre.omega)

    @property
    def gaussian_width(self) -> float:
        """FWHM of the Gaussian broadening, Hz."""
        return 0.0 if self.doppler_width is None else self.doppler_width.about(self.centre.omega)

    @property
    def strength_kind(self) -> str:
        """Which of the strengths is given."""
        return self.given(*STRENGTHS)[0]

    @model_validator(mode="after")
    def _consistent(self) -> LineTable:
        exactly_one(self, *STRENGTHS)
        together(self, "oscillator_strength", "number_density")
        together(self, "number_density", "oscillator_strength")
        if len(self.given(*HOMOGENEOUS)) > 1 or not self.doppler_width:
            exactly_one(
                self,
                *HOMOGENEOUS,
                remedy="width is the FWHM, half_width the HWHM, dephasing_time T2 = 1/(pi width)",
            )
        self._check_widths()
        if self.wavelength_in == "air" and self.centre.axis != "wavelength":
            raise complain(
                "a frequency is the same in air and in vacuum",
                at="wavelength_in",
                allowed="with wavelengths only",
            )
        return self

    def _check_widths(self) -> None:
        for key in self.given("width", "half_width", "doppler_width"):
            if getattr(self, key).value < 0:
                raise complain("a width is negative", at=key, allowed="0 or more")
        if self.full_width + self.gaussian_width <= 0:
            raise complain("the line has no width", allowed="a homogeneous width or a doppler_width above 0")


class LinesFile(Table):
    """A file with a line a row, its columns named quantity_unit. wavelength_in: for centres given as
    wavelengths."""

    file: Name
    wavelength_in: Against = "vacuum"


class RelaxationTable(Table):
    """A Debye term. time: s. valid: (low, high) in rad/s where it may be used."""

    static_susceptibility: Annotated[float, Field(ge=0)]
    time: Time
    valid: Range | None = None


class CarriersTable(Table):
    """A Drude term. plasma_frequency: rad/s; scattering_time: s."""

    plasma_frequency: PlasmaFrequency
    scattering_time: Time
