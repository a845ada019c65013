"""The elements of a path."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, model_validator

from pulseprop.scenario.fields import Fraction, Length, Name, Table, Temperature, complain, measured

__all__ = [
    "Element",
    "ElementTable",
    "KnownOrdersTable",
    "LossTable",
    "OrdersTable",
    "ShaperTable",
    "SlabTable",
]

RIGHT_ANGLE = 1.5707963267948966


class ElementTable(Table):
    """What every element may carry. kind: the word for its sort. beam_radius: 1/e^2 of the intensity, m.
    temperature: K. keep: never to be changed."""

    kind: str
    name: Name | None = None
    beam_radius: Length | None = None
    temperature: Temperature | None = None
    keep: bool = False


class SlabTable(ElementTable):
    """A plane slab. thickness: m. angle: of incidence outside, rad. reflectance: of one face, in place of
    faces."""

    kind: Literal["slab"]
    medium: Name
    thickness: Annotated[float, measured("length", least=0)]
    angle: Annotated[float, measured("angle", least=0)] = 0.0
    polarisation: Literal["p", "s"] | None = None
    faces: Literal["ideal", "fresnel", "echoes"] = "ideal"
    reflectance: Annotated[float, measured("fraction", least=0, most=1)] | None = None

    @model_validator(mode="after")
    def _consistent(self) -> SlabTable:
        if self.angle >= RIGHT_ANGLE:
            raise complain(
                "the beam would not meet the slab", at="angle", allowed="0 deg or more and below 90 deg"
            )
        if self.reflectance is not None and self.given("faces"):
            raise complain(
                "faces and reflectance exclude each other", at="reflectance", remedy="Give one of the two"
            )
        if self.angle > 0 and self.polarisation is None and self.faces != "ideal":
            raise complain(
                "Fresnel losses at an angle need the polarisation",
                at="angle",
                allowed='polarisation = "p" or "s"',
            )
        return self


class LossTable(ElementTable):
    """A loss that is the same at all frequencies. transmittance: energy out over energy in."""

    kind: Literal["loss"]
    transmittance: Annotated[float, measured("fraction", above=0, most=1)]


class OrdersTable(ElementTable):
    """Spectral phase by its orders at the pulse's centre: gdd in s^2, tod in s^3, fod in s^4; positive gdd
    is red first."""

    gdd: Annotated[float, measured("gdd")] = 0.0
    tod: Annotated[float, measured("tod")] = 0.0
    fod: Annotated[float, measured("fod")] = 0.0


class KnownOrdersTable(OrdersTable):
    """A device of which only orders are known. group_delay: s, against vacuum."""

    kind: Literal["known orders"]
    group_delay: Annotated[float, measured("time")] = 0.0
    transmittance: Fraction = 1.0

    @model_validator(mode="after")
    def _says_something(self) -> KnownOrdersTable:
        if not self.given("group_delay", "gdd", "tod", "fod"):
            raise complain("no order is given", allowed="one or more of group_delay, gdd, tod, fod")
        if self.transmittance == 0:
            raise complain("nothing would pass", at="transmittance", allowed="a share above 0")
        return self


class ShaperTable(OrdersTable):
    """A pulse shaper that sets orders."""

    kind: Literal["pulse shaper"]

    @model_validator(mode="after")
    def _says_something(self) -> ShaperTable:
        if not self.given("gdd", "tod", "fod"):
            raise complain("no order is given", allowed="one or more of gdd, tod, fod")
        return self


Element = Annotated[SlabTable | LossTable | KnownOrdersTable | ShaperTable, Field(discriminator="kind")]
"""Any element, told apart by `kind`."""
