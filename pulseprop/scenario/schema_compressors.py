"""Pairs of gratings, prisms and grisms."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, model_validator

from pulseprop.scenario.fields import Length, Name, complain, measured
from pulseprop.scenario.schema_element import RIGHT_ANGLE, ElementTable

__all__ = ["GratingPairTable", "GrismPairTable", "GroovesTable", "PrismPairTable", "StretcherTable"]

Distance = Annotated[float, measured("length", least=0)]
Angle = Annotated[float, measured("angle")]
Passes = Annotated[int, Field(ge=1)]
Share = Annotated[float, measured("fraction", above=0, most=1)]


class GroovesTable(ElementTable):
    """Two parallel gratings. grooves: 1/m. incidence: rad. separation: along the normal, m. order: not 0.
    passes: two where a mirror sends the light back. efficiency: of one diffraction. width: of the second
    grating, m."""

    grooves: Annotated[float, measured("groove_density", above=0)]
    incidence: Angle
    separation: Distance
    order: int = -1
    passes: Passes = 2
    efficiency: Share = 1.0
    width: Length | None = None

    @model_validator(mode="after")
    def _meets_the_grating(self) -> GroovesTable:
        if not abs(self.incidence) < RIGHT_ANGLE:
            raise complain(
                "the beam would not meet the grating", at="incidence", allowed="angles below 90 deg"
            )
        if self.order == 0:
            raise complain("order 0 is a mirror", at="order", value=0, allowed="-1, 1, -2, ...")
        return self


class GratingPairTable(GroovesTable):
    """A compressor."""

    kind: Literal["grating pair"]


class StretcherTable(GroovesTable):
    """The opposite sign: a telescope without aberration between the gratings."""

    kind: Literal["stretcher"]


class PrismPairTable(ElementTable):
    """apex_separation: tip to tip along the carrier at insertion 0, m. insertion: of both prisms, m, from the
    tip along the bisector to the carrier; second_insertion: where the second one's differs. apex_angle: rad;
    that of Brewster's incidence at minimum deviation unless given. faces: what they reflect."""

    kind: Literal["prism pair"]
    medium: Name
    apex_separation: Distance
    insertion: Distance = 0.0
    second_insertion: Distance | None = None
    apex_angle: Annotated[float, measured("angle", above=0)] | None = None
    passes: Passes = 2
    faces: Literal["ideal", "fresnel"] = "ideal"
    polarisation: Literal["p", "s"] = "p"


class GrismPairTable(GroovesTable):
    """Transmission gratings on prisms of apex_angle (rad) between entry face and gratings. incidence: on the
    entry face, rad. insertion: of both, m, along the grating from the edge to the carrier."""

    kind: Literal["grism pair"]
    medium: Name
    apex_angle: Annotated[float, measured("angle", least=0)]
    insertion: Distance
    second_insertion: Distance | None = None
