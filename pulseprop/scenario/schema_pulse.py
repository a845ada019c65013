"""The pulse of a scenario."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, model_validator

from pulseprop.scenario.fields import (
    Against,
    Length,
    Place,
    SpectralWidth,
    Table,
    complain,
    exactly_one,
    measured,
)
from pulseprop.scenario.schema_files import AutocorrelationFile, SpectrumFile, TraceFile

__all__ = ["PulseTable"]

Duration = Annotated[float, measured("time", above=0)]


class PulseTable(Table):
    """[pulse]. SI: s, s^2, s^3, s^4, J, W, Hz, m, rad.

    centre: a `Position` (omega in rad/s); with wavelength_in = "air" its wavelength is one in air. duration:
    intensity FWHM at the transform limit; or bandwidth, a `Width`. energy or peak_power; neither for pulses
    of unknown energy. order: of a supergaussian. measured_duration: FWHM that an autocorrelator or the like
    showed; stands in place of gdd.
    """

    shape: Literal["gaussian", "sech2", "lorentzian", "supergaussian", "finite", "measured"]
    centre: Place | None = None
    wavelength_in: Against = "vacuum"
    duration: Duration | None = None
    bandwidth: SpectralWidth | None = None
    energy: Annotated[float, measured("energy", above=0)] | None = None
    peak_power: Annotated[float, measured("power", above=0)] | None = None
    repetition_rate: Annotated[float, measured("repetition_rate", above=0)] | None = None
    beam_radius: Length | None = None
    gdd: Annotated[float, measured("gdd")] = 0.0
    tod: Annotated[float, measured("tod")] = 0.0
    fod: Annotated[float, measured("fod")] = 0.0
    carrier_phase: Annotated[float, measured("phase")] = 0.0
    order: Annotated[int, Field(ge=1)] | None = None
    measured_duration: Duration | None = None
    spectrum: SpectrumFile | None = None
    trace: TraceFile | None = None
    autocorrelation: AutocorrelationFile | None = None

    @model_validator(mode="after")
    def _consistent(self) -> PulseTable:
        if self.shape == "measured":
            self._check_measured()
        else:
            self._check_named()
        if self.given("energy", "peak_power"):
            exactly_one(self, "energy", "peak_power")
        if self.measured_duration is not None and self.given("gdd"):
            raise complain(
                "measured_duration stands in place of gdd",
                at="measured_duration",
                remedy="Give one of the two",
            )
        if self.wavelength_in == "air" and (self.centre is None or self.centre.axis != "wavelength"):
            raise complain("wavelength_in speaks of a centre given as a wavelength", at="wavelength_in")
        return self

    def _check_measured(self) -> None:
        source = exactly_one(self, "spectrum", "trace")
        for key in self.given("duration", "bandwidth", "order"):
            raise complain(f"{key} has no meaning for a measured pulse: the file tells it", at=key)
        if source == "trace" and self.measured_duration is not None:
            raise complain(
                "a waveform carries its own chirp",
                at="measured_duration",
                remedy="Leave measured_duration out",
            )

    def _check_named(self) -> None:
        for key in self.given("spectrum", "trace"):
            raise complain(f"{key} belongs to shape = 'measured'", at=key, value=self.shape)
        if self.centre is None:
            raise complain("centre is missing", remedy='Add centre, such as "800 nm" or "375 THz"')
        exactly_one(
            self,
            "duration",
            "bandwidth",
            remedy="duration is that at the transform limit; a longer one is measured_duration",
        )
        if self.order is not None and self.shape != "supergaussian":
            raise complain("order belongs to shape = 'supergaussian'", at="order", value=self.order)
