"""Pulse shapers."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, model_validator

from pulseprop.scenario.fields import Column, Name, Range, check_unit, complain, measured, together
from pulseprop.scenario.schema_element import OrdersTable
from pulseprop.scenario.schema_files import SpectralFile

__all__ = ["ShaperFile", "ShaperTable"]


class ShaperFile(SpectralFile):
    """A table of what the mask does. y: the second column; the other of the two may stand in a column named
    by its key. The field goes as exp(+i phase_sign phase); transmission is of energy, as a share or in %."""

    y: Literal["phase", "transmission"]
    phase: Column | None = None
    phase_unit: Name = "rad"
    phase_sign: Literal[1, -1] = 1
    transmission: Column | None = None
    transmission_unit: Literal["%"] | None = None

    @model_validator(mode="after")
    def _columns_fit(self) -> ShaperFile:
        check_unit("phase", self.phase_unit, "phase_unit")
        if self.given(self.y):
            raise complain(
                f"{self.y} stands in the column of y already",
                at=self.y,
                remedy="Name its column with y_column, or leave it out",
            )
        return self


class ShaperTable(OrdersTable):
    """A pulse shaper. gdd, tod, fod and a table's phase add. range: rad/s, blocked outside; by default that
    of the table. pixels: over the range, equal in pixels_in; spot: 1/e^2 radius of the focus on them, in
    pixels. limit: rad, the largest phase step from pixel to pixel. transmittance: of all that stands around
    the mask.
    """

    kind: Literal["pulse shaper"]
    table: ShaperFile | None = None
    range: Range | None = None
    pixels: Annotated[int, Field(ge=2, le=1_000_000)] | None = None
    pixels_in: Literal["wavelength", "frequency"] = "wavelength"
    spot: Annotated[float, Field(gt=0, le=100)] = 1.0
    limit: Annotated[float, measured("phase", above=0)] | None = None
    transmittance: Annotated[float, measured("fraction", above=0, most=1)] = 1.0

    @model_validator(mode="after")
    def _says_something(self) -> ShaperTable:
        if not self.given("gdd", "tod", "fod", "table"):
            raise complain("no order is given", allowed="one or more of gdd, tod, fod, or a table")
        for key in ("pixels_in", "spot", "limit"):
            together(self, key, "pixels")
        if self.pixels is not None and self.range is None and self.table is None:
            raise complain(
                "pixels need the range that they cover",
                at="pixels",
                remedy='Add range, such as ["700 nm", "900 nm"]',
            )
        return self
