"""Lenses, waveplates, wedge pairs and gas cells."""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import Field, PlainValidator, model_validator

from pulseprop.scenario.fields import (
    Fraction,
    Length,
    Name,
    Table,
    collected,
    complain,
    exactly_one,
    measured,
    together,
)
from pulseprop.scenario.schema_element import RIGHT_ANGLE, ElementTable
from pulseprop.units import quantity

__all__ = [
    "GasCellTable",
    "GlassTable",
    "LensTable",
    "PlateTable",
    "WaveplateTable",
    "WedgePairTable",
    "WindowTable",
]

Thickness = Annotated[float, measured("length", least=0)]
Reflectance = Annotated[float, measured("fraction", least=0, most=1)]
FocalLength = Annotated[float, measured("length")]


class FacedTable(ElementTable):
    """An element with faces. reflectance: of one face, in place of faces."""

    faces: Literal["ideal", "fresnel"] = "ideal"
    reflectance: Reflectance | None = None

    @model_validator(mode="after")
    def _one_kind_of_faces(self) -> FacedTable:
        if self.reflectance is not None and self.given("faces"):
            raise complain(
                "faces and reflectance exclude each other", at="reflectance", remedy="Give one of the two"
            )
        return self


class StackTable(FacedTable):
    """Plates in a row. air_spaced: each with two faces of its own; else cemented, with two in all."""

    air_spaced: bool = False

    def check_faces(self, count: int) -> None:
        """Refuse bare faces between cemented plates: their loss depends on the cement."""
        if self.faces == "fresnel" and count > 1 and not self.air_spaced:
            raise complain(
                "what cemented faces reflect is not computed",
                at="faces",
                value=self.faces,
                allowed='faces = "fresnel" beside air_spaced = true, or the reflectance of the outer faces',
            )


class GlassTable(Table):
    """One glass of a lens. centre_thickness: m, on the axis. focal_length: m, of this glass alone."""

    medium: Name
    centre_thickness: Thickness
    focal_length: FocalLength | None = None

    @model_validator(mode="after")
    def _bends(self) -> GlassTable:
        _check_focus(self.focal_length)
        return self


def _check_focus(focal_length: float | None) -> None:
    if focal_length == 0:
        raise complain(
            "no lens has this focal length", at="focal_length", value="0", allowed="a length, negative too"
        )


class LensTable(StackTable):
    """A lens. glasses: in the order of the beam. focal_length: m, of the whole."""

    kind: Literal["lens"]
    glasses: Annotated[list[GlassTable], Field(min_length=1)]
    focal_length: FocalLength | None = None

    @model_validator(mode="after")
    def _consistent(self) -> LensTable:
        _check_focus(self.focal_length)
        self.check_faces(len(self.glasses))
        return self


class PlateTable(Table):
    """One plate of a waveplate. medium: a crystal of the catalogue, or its two media by their names.
    crossed: its axes turned by 90 deg against those of plates that are not. thickness: m."""

    medium: Name | None = None
    ordinary: Name | None = None
    extraordinary: Name | None = None
    thickness: Thickness
    crossed: bool = False

    @model_validator(mode="after")
    def _of_one_crystal(self) -> PlateTable:
        exactly_one(self, "medium", "ordinary")
        together(self, "ordinary", "extraordinary")
        together(self, "extraordinary", "ordinary")
        return self


class WaveplateTable(StackTable):
    """A waveplate. axis: of the plates that are not crossed, along which the pulse is polarised."""

    kind: Literal["waveplate"]
    plates: Annotated[list[PlateTable], Field(min_length=1)]
    axis: Literal["ordinary", "extraordinary"] = "ordinary"

    @model_validator(mode="after")
    def _consistent(self) -> WaveplateTable:
        self.check_faces(len(self.plates))
        return self


def _incidence(value: Any) -> float | str:
    return value if value == "brewster" else collected(lambda angle: quantity(angle, "angle"), value)


class WedgePairTable(FacedTable):
    """Two thin wedges. glass: m, of both together; or insertion: m, of each of the `moved` wedges, from where
    there is `base` of glass, with their apex_angle (rad). angle: of incidence outside, rad, or "brewster"."""

    kind: Literal["wedge pair"]
    medium: Name
    glass: Thickness | None = None
    insertion: Annotated[float, measured("length")] | None = None
    base: Thickness = 0.0
    apex_angle: Annotated[float, measured("angle", above=0)] | None = None
    moved: Literal[1, 2] = 2
    angle: Annotated[float | str, PlainValidator(_incidence)] = 0.0
    polarisation: Literal["p", "s"] | None = None

    @model_validator(mode="after")
    def _consistent(self) -> WedgePairTable:
        exactly_one(self, "glass", "insertion")
        together(self, "insertion", "apex_angle", "The glass that a move adds depends on it")
        together(self, "base", "insertion")
        together(self, "moved", "insertion")
        if self.apex_angle is not None and self.apex_angle >= RIGHT_ANGLE:
            raise complain("no wedge has this angle", at="apex_angle", allowed="below 90 deg")
        if not isinstance(self.angle, str) and not 0 <= self.angle < RIGHT_ANGLE:
            raise complain(
                "the beam would not meet the wedges", at="angle", allowed="0 deg or more and below 90 deg"
            )
        if self.angle != 0 and self.polarisation is None and self.faces != "ideal":
            raise complain(
                "Fresnel losses at an angle need the polarisation",
                at="angle",
                allowed='polarisation = "p" or "s"',
            )
        return self


class WindowTable(Table):
    """A window of a cell. thickness: m."""

    medium: Name
    thickness: Thickness


class GasCellTable(FacedTable):
    """A cell of gas. gas: of the catalogue. pressure: absolute, Pa. length: of the gas, m. windows: none, or
    one at each end. humidity: relative, of air. faces, reflectance: of the windows."""

    kind: Literal["gas cell"]
    gas: Name
    pressure: Annotated[float, measured("pressure", least=0)]
    length: Length
    humidity: Fraction | None = None
    windows: list[WindowTable] = Field(default_factory=list)

    @model_validator(mode="after")
    def _complete(self) -> GasCellTable:
        if self.temperature is None:
            raise complain(
                "the density of the gas needs its temperature", remedy='Add temperature, such as "22 degC"'
            )
        if len(self.windows) not in (0, 2):
            raise complain(
                "a cell has a window at each end",
                at="windows",
                value=len(self.windows),
                allowed="none, or two in the order of the beam",
            )
        return self
