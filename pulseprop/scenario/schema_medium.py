"""The media that a scenario describes itself."""

from __future__ import annotations

import math
from typing import Annotated, Any, Literal

from pydantic import Field, PlainValidator, model_validator

from pulseprop.constants import TWO_PI_C
from pulseprop.scenario.fields import (
    Fraction,
    Name,
    Place,
    Table,
    Temperature,
    complain,
    exactly_one,
    measured,
    together,
)
from pulseprop.scenario.schema_files import AbsorptionFile, Anchor, IndexFile
from pulseprop.scenario.schema_formula import Formula
from pulseprop.scenario.schema_lines import CarriersTable, LinesFile, LineTable, RelaxationTable

__all__ = ["ComponentTable", "GasTable", "KerrTable", "MediumTable", "OrdersOnlyTable"]


class GasTable(Table):
    """A gas scaled by density. pressure: Pa; temperature: K; humidity: relative, of water."""

    medium: Name
    pressure: Annotated[float, measured("pressure", above=0)]
    temperature: Temperature
    humidity: Fraction | None = None


class ComponentTable(Table):
    """A part of a mixture; fraction of the volumes before mixing."""

    medium: Name
    fraction: Fraction


class OrdersOnlyTable(Table):
    """A medium of which only orders are known. SI: s^2/m, s^3/m, s^4/m; dispersion s/m^2 and its slope s/m^3.

    `second_order` and `third_order` are gvd and tod whichever way they were given.
    """

    at: Place
    index: Annotated[float, Field(gt=0)] | None = None
    group_index: float | None = None
    gvd: Annotated[float, measured("gvd")] | None = None
    tod: Annotated[float, measured("tod_per_length")] | None = None
    fod: Annotated[float, measured("fod_per_length")] | None = None
    dispersion: Annotated[float, measured("dispersion")] | None = None
    dispersion_slope: Annotated[float, measured("dispersion_slope")] | None = None

    @property
    def second_order(self) -> float:
        """d2k/d omega2 in s^2/m; from D = -2 pi c / lambda^2 times it."""
        if self.dispersion is not None:
            return -self._scale * self.dispersion
        return self.gvd or 0.0

    @property
    def third_order(self) -> float:
        """d3k/d omega3 in s^3/m; from S = dD/d lambda: (lambda^2 / 2 pi c)^2 (S + 2 D / lambda)."""
        if self.dispersion is not None and self.dispersion_slope is not None:
            return self._scale**2 * (self.dispersion_slope + 2 * self.dispersion / self.at.wavelength)
        return self.tod or 0.0

    @property
    def _scale(self) -> float:
        return self.at.wavelength**2 / (TWO_PI_C)

    @model_validator(mode="after")
    def _consistent(self) -> OrdersOnlyTable:
        exactly_one(self, "gvd", "dispersion")
        together(self, "dispersion_slope", "dispersion")
        if self.given("tod", "dispersion_slope"):
            exactly_one(self, "tod", "dispersion_slope")
        return self


class KerrTable(Table):
    """The instantaneous and delayed third-order response. n2: m^2/W; two_photon: m/W. Used by nonlinear
    runs only."""

    n2: Annotated[float, measured("nonlinear_index")]
    steepening: bool = False
    raman: Any = "none"
    two_photon: Annotated[float, measured("two_photon", least=0)] = 0.0


def _background(value: Any) -> str | float:
    if isinstance(value, str) and value:
        return value
    if isinstance(value, int | float) and not isinstance(value, bool) and 1 <= value < math.inf:
        return float(value)
    raise complain(
        "a background is a medium or a constant index",
        value=value,
        allowed="a name, or a number of 1 or more",
    )


BASES = ("background", "formula", "index", "gas", "mixture", "orders")
ADDED = ("lines", "lines_file", "relaxations", "carriers", "absorption")
RULES = Literal["lorentz-lorenz", "maxwell garnett", "bruggeman"]


class MediumTable(Table):
    """[medium.NAME]. One base at most (vacuum where there is none), to which lines, terms and absorption add.

    background: a medium's name or a constant index. absolute: turn an index against air into one against
    vacuum. as_printed: use an index table though it contradicts itself. temperature: K.
    """

    background: Annotated[str | float, PlainValidator(_background)] | None = None
    formula: Formula | None = None
    index: IndexFile | None = None
    gas: GasTable | None = None
    mixture: Annotated[list[ComponentTable], Field(min_length=2)] | None = None
    rule: RULES = "lorentz-lorenz"
    orders: OrdersOnlyTable | None = None
    lines: list[LineTable] = Field(default_factory=list)
    lines_file: LinesFile | None = None
    relaxations: list[RelaxationTable] = Field(default_factory=list)
    carriers: list[CarriersTable] = Field(default_factory=list)
    absorption: AbsorptionFile | None = None
    anchor: list[Anchor] = Field(default_factory=list)
    absolute: bool = False
    as_printed: bool = False
    kerr: KerrTable | None = None
    temperature: Temperature | None = None
    source: str = ""
    note: str = ""

    @model_validator(mode="before")
    @classmethod
    def _plain_lines_file(cls, data: Any) -> Any:
        if isinstance(data, dict) and isinstance(data.get("lines_file"), str):
            return data | {"lines_file": {"file": data["lines_file"]}}
        return data

    @property
    def base(self) -> str:
        """Which of the bases is given; "" for none."""
        return next(iter(self.given(*BASES)), "")

    @model_validator(mode="after")
    def _consistent(self) -> MediumTable:
        if len(self.given(*BASES)) > 1:
            exactly_one(self, *BASES)
        if not self.given(*BASES, *ADDED):
            raise complain(
                "the medium says nothing of its response",
                allowed=f"one or more of {', '.join(BASES + ADDED)}",
            )
        if self.orders is not None and self.given(*ADDED):
            raise complain(
                "orders are no causal response to which others could add", at=self.given(*ADDED)[0]
            )
        together(self, "anchor", "absorption")
        together(self, "rule", "mixture")
        together(self, "as_printed", "index")
        self._check_mixture()
        self._check_absolute()
        return self

    def _check_mixture(self) -> None:
        parts = self.mixture or []
        total = sum(part.fraction for part in parts)
        if parts and abs(total - 1) > 1e-6:
            raise complain(
                "the fractions do not add up to 1", at="mixture", value=f"{total:.7g}", allowed="a sum of 1"
            )
        if self.rule != "lorentz-lorenz" and len(parts) > 2:
            raise complain(f"the rule {self.rule} takes two media", at="mixture", value=f"{len(parts)} media")

    def _check_absolute(self) -> None:
        printed = self.formula or self.index
        if self.absolute and printed is not None and printed.relative_to is None:
            raise complain(
                "absolute = true needs to know what the printed index is against",
                at="absolute",
                remedy='Add relative_to = "air" or "vacuum" to the formula or index table',
            )
