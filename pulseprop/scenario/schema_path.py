"""The elements of a path."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from typing import Annotated, Literal

from pydantic import Field, model_validator

from pulseprop.scenario.fields import Fraction, Name, complain, exactly_one, measured
from pulseprop.scenario.schema_compressors import (
    GratingPairTable,
    GrismPairTable,
    PrismPairTable,
    StretcherTable,
)
from pulseprop.scenario.schema_element import RIGHT_ANGLE, ElementTable, OrdersTable
from pulseprop.scenario.schema_mirrors import ChirpedMirrorTable, CoatingTable, GiresTournoisTable
from pulseprop.scenario.schema_optics import GasCellTable, LensTable, WaveplateTable, WedgePairTable
from pulseprop.scenario.schema_shaper import ShaperTable

__all__ = [
    "Element",
    "ElementTable",
    "KnownOrdersTable",
    "LossTable",
    "RepeatTable",
    "SlabTable",
    "all_elements",
]


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


class RepeatTable(ElementTable):
    """Elements that the beam goes through several times, in their order. path, or elements: what they are."""

    kind: Literal["repeat"]
    times: Annotated[int, Field(ge=1, le=10_000)]
    path: Annotated[list[Element], Field(min_length=1)] | None = None
    elements: Annotated[list[Element], Field(min_length=1)] | None = None

    @model_validator(mode="after")
    def _one_list(self) -> RepeatTable:
        exactly_one(self, "path", "elements")
        return self

    @property
    def inner_key(self) -> str:
        """Under which key the elements stand."""
        return "elements" if self.path is None else "path"

    @property
    def inner(self) -> list[Element]:
        """The elements."""
        return self.path or self.elements or []


Element = Annotated[
    SlabTable
    | LossTable
    | KnownOrdersTable
    | ShaperTable
    | GratingPairTable
    | StretcherTable
    | PrismPairTable
    | GrismPairTable
    | LensTable
    | WaveplateTable
    | WedgePairTable
    | GasCellTable
    | RepeatTable
    | ChirpedMirrorTable
    | CoatingTable
    | GiresTournoisTable,
    Field(discriminator="kind"),
]
"""Any element, told apart by `kind`."""


def all_elements(path: Iterable[ElementTable]) -> Iterator[ElementTable]:
    """The elements of a path, each repeat followed by those inside it."""
    for element in path:
        yield element
        if isinstance(element, RepeatTable):
            yield from all_elements(element.inner)
