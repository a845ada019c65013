"""What is typed beside a table, as the options of reading and of judging."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, fields
from typing import Any, Literal

from pulseprop.causality.bounds_strength import strength_of
from pulseprop.errors import InputError, PulsepropError
from pulseprop.units import Width, quantity, spectral_width
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.request import Anchor, Request
from pulseprop.vetting.uncertainty_text import uncertainties_in

__all__ = ["Asked", "asked_with"]

ANCHOR = re.compile(r"\s*(\S+)\s*(?:\+-|±)\s*(\S+)\s+at\s+(.+?)\s*")
RANGE = re.compile(r"\s*(.+?)\s+to\s+(.+?)\s*")
HIGHEST = 100.0
"""No matter has an index like this at any wavelength that tables are of (common practice, no source)."""
SEVERAL = ("at", "require", "anchor")
"""Options that may be given more than once."""


@dataclass(frozen=True, kw_only=True)
class Asked:
    """The options of `vet` as typed; None where not given.

    columns, unit, uncertainty, relative_to, wavelength_in, thickness: see `ReadOptions`. at: wavelengths or
    the like. require: requirements. medium: a catalogue name. anchor: "1.5230 +- 0.0002 at 589.3 nm".
    transparent: "300 nm to 2.5 um". composition, density: "SiO2", "2.2 g/cm^3". ceiling: the instrument's
    highest absorbance. resolution: "2 nm". angle, polarisation: of a mirror.
    """

    columns: str | None = None
    unit: str | None = None
    uncertainty: str | None = None
    relative_to: Literal["air", "vacuum"] | None = None
    wavelength_in: Literal["air", "vacuum"] | None = None
    thickness: str | float | None = None
    at: tuple[str, ...] = ()
    require: tuple[str, ...] = ()
    medium: str | None = None
    anchor: tuple[str, ...] = ()
    transparent: str | None = None
    composition: str | None = None
    density: str | None = None
    ceiling: float | None = None
    resolution: str | None = None
    angle: str | None = None
    polarisation: Literal["s", "p"] | None = None
    strict: bool = False

    @property
    def reading(self) -> ReadOptions:
        """What bears on reading the file."""
        return ReadOptions(
            columns=self.columns,
            unit=self.unit,
            relative_to=self.relative_to,
            wavelength_in=self.wavelength_in,
            thickness=self.thickness,
            uncertainty=self.uncertainty,
        )

    @property
    def request(self) -> Request:
        """What bears on judging it, SI. Raises InputError with the option that cannot be read."""
        stated = uncertainties_in(self.uncertainty) if self.uncertainty else {}
        return Request(
            uncertainty={str(name): size for name, size in stated.items()},
            at=tuple(_read("at", place, "spectral") for place in self.at),
            require=self.require,
            strict=self.strict,
            ceiling=self.ceiling,
            resolution=_width(self.resolution) if self.resolution else None,
            anchors=tuple(_anchor(text) for text in self.anchor),
            transparent=_range(self.transparent) if self.transparent else None,
            strength=self._strength(),
            claimed=self.medium,
            angle=_read("angle", self.angle, "angle") if self.angle else None,
            polarisation=self.polarisation,
        )

    def _strength(self) -> float | None:
        if (self.composition is None) != (self.density is None):
            missing = "density" if self.density is None else "composition"
            raise InputError(
                "composition and density go together",
                allowed='--composition SiO2 --density "2.2 g/cm^3"',
                remedy=f"Add --{missing}",
                place=f"--{missing}",
            )
        if self.composition is None or self.density is None:
            return None
        return strength_of(_read("density", self.density, "mass_density"), self.composition)


def asked_with(options: Mapping[str, Any]) -> Asked:
    """Options by name, as a caller gives them: a list, or one text where several may stand. Raises InputError
    for a name that is none."""
    known = {field.name: field for field in fields(Asked)}
    unknown = next((name for name in options if name not in known), None)
    if unknown is not None:
        raise InputError("there is no such option of vet", value=unknown, allowed=", ".join(known))
    given: dict[str, Any] = {
        name: _several(value) if name in SEVERAL else value for name, value in options.items()
    }
    return Asked(**given)


def _several(value: Any) -> tuple[str, ...]:
    return (value,) if isinstance(value, str) else tuple(value)


def _read(option: str, text: str, kind: str) -> float:
    try:
        return quantity(text, kind)
    except PulsepropError as error:
        raise error.located(place=f"--{option}") from None


def _width(text: str) -> Width:
    try:
        width = spectral_width(text)
    except PulsepropError as error:
        raise error.located(place="--resolution") from None
    if not 0 < width.value < float("inf"):
        raise InputError(
            "a resolution lies above 0", value=text, allowed='such as "2 nm"', place="--resolution"
        )
    return width


def _anchor(text: str) -> Anchor:
    match = ANCHOR.fullmatch(text)
    try:
        if match is None:
            raise ValueError
        index, error = float(match.group(1)), float(match.group(2))
    except ValueError:
        raise InputError(
            "this is no known index",
            value=text,
            allowed='such as "1.5230 +- 0.0002 at 589.3 nm"',
            place="--anchor",
        ) from None
    if not (0 < index < HIGHEST and 0 < error < HIGHEST):
        raise InputError(
            "no index and no uncertainty is like this",
            value=text,
            allowed=f"above 0 and below {HIGHEST:g}",
            place="--anchor",
        )
    return Anchor(omega=_read("anchor", match.group(3), "spectral"), index=index, error=error)


def _range(text: str) -> tuple[float, float]:
    match = RANGE.fullmatch(text)
    if match is None:
        raise InputError(
            "this is no range", value=text, allowed='such as "300 nm to 2.5 um"', place="--transparent"
        )
    low, high = sorted(_read("transparent", end, "spectral") for end in match.groups())
    if not 0 <= low < high:
        raise InputError(
            "a range needs two different ends, none below zero", value=text, place="--transparent"
        )
    return low, high
