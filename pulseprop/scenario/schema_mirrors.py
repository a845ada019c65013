"""Mirrors and coatings."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, model_validator

from pulseprop.scenario.fields import Length, Name, Table, check_unit, complain, measured
from pulseprop.scenario.schema_element import RIGHT_ANGLE, ElementTable
from pulseprop.scenario.schema_files import SpectralFile

__all__ = [
    "BounceTable",
    "ChirpedMirrorTable",
    "CoatingTable",
    "FilmTable",
    "GiresTournoisTable",
    "MirrorFile",
    "RippleTable",
]

Bounces = Annotated[int, Field(ge=0)]
Share = Annotated[float, measured("fraction", above=0, most=1)]
Incidence = Annotated[float, measured("angle", least=0)]
DEFAULT_UNITS = {"gdd": "fs^2", "group_delay": "fs", "phase": "rad"}
"""The unit of y, and by its kind what else may stand there."""
KINDS_OF_Y = {"gdd": "gdd", "group_delay": "time", "phase": "phase"}


class MirrorFile(SpectralFile):
    """A table of one bounce. y_unit: fs^2, fs or rad unless given. phase_sign: of a phase, where the field
    goes as exp(+i phase_sign phase)."""

    y: Literal["gdd", "group_delay", "phase"]
    y_unit: Name | None = None
    phase_sign: Literal[1, -1] = 1

    @model_validator(mode="after")
    def _y_fits(self) -> MirrorFile:
        check_unit(KINDS_OF_Y[self.y], self.unit_of_y, "y_unit")
        if self.given("phase_sign") and self.y != "phase":
            raise complain(
                f"a {self.y.replace('_', ' ')} has no sign to choose",
                at="phase_sign",
                allowed='beside y = "phase" only',
            )
        return self

    @property
    def unit_of_y(self) -> str:
        """As given, or the usual one."""
        return self.y_unit or DEFAULT_UNITS[self.y]


class RippleTable(Table):
    """A swing of the GDD about its mean: amplitude in s^2, period in Hz, phase in rad at the pulse's
    centre."""

    amplitude: Annotated[float, measured("gdd")]
    period: Annotated[float, measured("width", above=0)]
    phase: Annotated[float, measured("phase")] = 0.0


class BounceTable(Table):
    """One bounce: by its orders (s^2, s^3, s^4), with a ripple, or by a table."""

    gdd: Annotated[float, measured("gdd")] = 0.0
    tod: Annotated[float, measured("tod")] = 0.0
    fod: Annotated[float, measured("fod")] = 0.0
    ripple: RippleTable | None = None
    table: MirrorFile | None = None

    @model_validator(mode="after")
    def _one_way(self) -> BounceTable:
        _orders_or_table(self)
        return self


def _orders_or_table(table: Table) -> None:
    orders = table.given("gdd", "tod", "fod", "ripple")
    if orders and table.given("table"):
        raise complain(
            f"{orders[0]} and table exclude each other", at=orders[0], remedy="The table says it all"
        )
    if not orders and not table.given("table"):
        raise complain(
            "nothing is said of a bounce", allowed="one or more of gdd, tod, fod, ripple; or a table"
        )


class ChirpedMirrorTable(ElementTable):
    """A chirped mirror, or the two of a pair in turn. bounces: off each. reflectance: of a bounce."""

    kind: Literal["chirped mirror"]
    gdd: Annotated[float, measured("gdd")] = 0.0
    tod: Annotated[float, measured("tod")] = 0.0
    fod: Annotated[float, measured("fod")] = 0.0
    ripple: RippleTable | None = None
    table: MirrorFile | None = None
    pair: Annotated[list[BounceTable], Field(min_length=2, max_length=2)] | None = None
    bounces: Bounces = 1
    reflectance: Share = 1.0

    @model_validator(mode="after")
    def _one_way(self) -> ChirpedMirrorTable:
        if self.pair is None:
            _orders_or_table(self)
            return self
        beside = self.given("gdd", "tod", "fod", "ripple", "table")
        if beside:
            raise complain(
                f"{beside[0]} and pair exclude each other",
                at=beside[0],
                remedy="Say it of each mirror, inside pair",
            )
        return self


class FilmTable(Table):
    """One film: medium, thickness (m). Or films that repeat: films, times."""

    medium: Name | None = None
    thickness: Annotated[float, measured("length", least=0)] | None = None
    films: Annotated[list[FilmTable], Field(min_length=1)] | None = None
    times: Annotated[int, Field(ge=1)] | None = None

    @model_validator(mode="after")
    def _one_way(self) -> FilmTable:
        if self.given("medium", "thickness", "films", "times") not in (
            ("medium", "thickness"),
            ("films", "times"),
        ):
            raise complain("this is no film", allowed="medium and thickness, or films and times")
        return self


class CoatingTable(ElementTable):
    """Films on a substrate, the outermost first. side: the light that goes on. incidence: rad."""

    kind: Literal["coating"]
    films: list[FilmTable] = Field(default_factory=list)
    substrate: Name | None = None
    incidence: Incidence = 0.0
    polarisation: Literal["p", "s"] | None = None
    side: Literal["reflection", "transmission"] = "reflection"
    bounces: Bounces = 1

    @model_validator(mode="after")
    def _complete(self) -> CoatingTable:
        if not self.films and self.substrate is None:
            raise complain("nothing is there", allowed="films, a substrate, or both")
        if self.incidence >= RIGHT_ANGLE:
            raise complain("the beam would not meet the coating", at="incidence", allowed="below 90 deg")
        if self.incidence > 0 and self.polarisation is None:
            raise complain(
                "a coating at an angle needs the polarisation",
                at="incidence",
                allowed='polarisation = "p" or "s"',
            )
        return self


class GiresTournoisTable(ElementTable):
    """A spacer (medium, thickness in m) between a front and a back of these power reflectances."""

    kind: Literal["gires-tournois mirror"]
    medium: Name
    thickness: Length
    front: Annotated[float, measured("fraction", least=0, most=1)]
    back: Share = 1.0
    incidence: Incidence = 0.0
    bounces: Bounces = 1
