"""The building blocks of the schema: strict tables, and quantities that become SI floats."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import partial
from typing import Annotated, Any, Literal, TypeVar

from pydantic import BaseModel, ConfigDict, Field, PlainValidator, model_validator
from pydantic_core import PydanticCustomError

from pulseprop.errors import Complaint, InputError
from pulseprop.units import KINDS, Position, Width, position, quantity, spectral_width, unit_from

__all__ = [
    "SPECTRAL_UNITS",
    "Against",
    "Column",
    "Fraction",
    "Length",
    "Name",
    "Place",
    "Range",
    "SpectralAxis",
    "SpectralWidth",
    "Table",
    "Temperature",
    "UnknownKey",
    "check_spectral_unit",
    "check_unit",
    "complain",
    "exactly_one",
    "measured",
    "together",
]

T = TypeVar("T")


@dataclass(frozen=True)
class UnknownKey:
    """Stands in for the value of a key that a table does not have, and tells which keys it has."""

    allowed: tuple[str, ...]
    value: Any


class Table(BaseModel):
    """A table of the file: no other keys than its own, no conversions, no NaN or infinity.

    Validators are built when the first file is read, and once for all tables: a third less time than one by
    one.
    """

    model_config = ConfigDict(extra="forbid", strict=True, frozen=True, allow_inf_nan=False, defer_build=True)

    @model_validator(mode="before")
    @classmethod
    def _mark_unknown_keys(cls, data: Any) -> Any:
        if not isinstance(data, Mapping):
            return data
        own = tuple(field.alias or name for name, field in cls.model_fields.items())
        return {key: value if key in own else UnknownKey(own, value) for key, value in data.items()}

    def given(self, *names: str) -> tuple[str, ...]:
        """Those of the keys that the file holds."""
        return tuple(name for name in names if name in self.model_fields_set)


def complain(
    problem: str, *, at: str = "", value: object = None, allowed: str = "", remedy: str = ""
) -> PydanticCustomError:
    """A complaint of our own for the validation library, which collects them; `at` is a key of the table
    checked."""
    complaint = InputError(problem, value=value, allowed=allowed, remedy=remedy).complaint
    return _collectable(complaint, at)


def _collectable(complaint: Complaint, at: str = "") -> PydanticCustomError:
    return PydanticCustomError("complaint", "{problem}", {"problem": "", "complaint": complaint, "at": at})


def collected(read: Callable[[Any], T], value: Any) -> T:
    """read(value), its InputError turned into one that the validation library collects."""
    try:
        return read(value)
    except InputError as error:
        raise _collectable(error.complaint) from None


def measured(
    kind: str, *, least: float | None = None, above: float | None = None, most: float | None = None
) -> PlainValidator:
    """A quantity of that kind, kept in its SI unit, at or above `least`, above `above`, at or below
    `most`."""

    def read(value: Any) -> float:
        si = quantity(value, kind)
        limit = _limit(si, kind, least, above, most)
        if limit:
            raise InputError(
                "the value is out of bounds", value=value, allowed=f"{KINDS[kind].words} {limit}"
            )
        return si

    return PlainValidator(partial(collected, read))


def _limit(si: float, kind: str, least: float | None, above: float | None, most: float | None) -> str:
    """The bound that si breaks, in words; empty where it keeps all."""
    unit = "" if kind == "fraction" else f" {KINDS[kind].si}"
    if least is not None and si < least:
        return f"of {least:g}{unit} or more"
    if above is not None and si <= above:
        return f"above {above:g}{unit}"
    return f"of {most:g}{unit} or less" if most is not None and si > most else ""


def _range(value: Any) -> tuple[float, float]:
    """Two places on the spectrum, in any order and any of their terms, as (low, high) in rad/s."""
    if not isinstance(value, list) or len(value) != 2:
        raise InputError("a range needs two ends", value=value, allowed='a pair such as ["300 nm", "2.5 um"]')
    low, high = sorted(quantity(end, "spectral") for end in value)
    if low < 0 or low == high:
        raise InputError("a range needs two different ends, none below zero", value=value)
    return low, high


def _column(value: Any) -> int | str:
    if (
        isinstance(value, bool)
        or not isinstance(value, int | str)
        or value == ""
        or value == 0
        or str(value)[0] == "-"
    ):
        raise complain(
            "this names no column",
            value=value,
            allowed="a number counted from 1, or the column's header",
        )
    return value


Length = Annotated[float, measured("length", above=0)]
Fraction = Annotated[float, measured("fraction", least=0, most=1)]
Temperature = Annotated[float, measured("temperature", above=0)]
Place = Annotated[Position, PlainValidator(partial(collected, position))]
SpectralWidth = Annotated[Width, PlainValidator(partial(collected, spectral_width))]
Range = Annotated[tuple[float, float], PlainValidator(partial(collected, _range))]
Name = Annotated[str, Field(min_length=1)]
Column = Annotated[int | str, PlainValidator(_column)]
"""A column of a table file: its number counted from 1, or its header."""
Against = Literal["air", "vacuum"]
SpectralAxis = Literal["wavelength", "frequency", "wavenumber", "photon_energy"]

SPECTRAL_UNITS: dict[str, tuple[tuple[str, ...], str]] = {
    "wavelength": (("m",), '"nm" or "um"'),
    "frequency": (("Hz", "rad s^-1"), '"THz" or "rad/fs"'),
    "wavenumber": (("m^-1",), '"cm^-1"'),
    "photon_energy": (("kg m^2 s^-2",), '"eV"'),
}
"""Dimensions that the unit of each axis may have, and examples."""


def check_spectral_unit(axis: str, unit: str, at: str = "x_unit") -> None:
    """Refuse a unit that is not one of the axis."""
    dimensions, examples = SPECTRAL_UNITS[axis]
    if _dimension(unit, at, examples) not in dimensions:
        raise complain(f"the unit does not belong to a {axis}", at=at, value=unit, allowed=examples)


def check_unit(kind: str, unit: str, at: str) -> None:
    """Refuse a unit that is not one of the kind."""
    examples = ", ".join(f'"{example.split(maxsplit=1)[1]}"' for example in KINDS[kind].examples)
    if _dimension(unit, at, examples) not in KINDS[kind].forms:
        raise complain(
            f"the unit does not belong to {KINDS[kind].words}", at=at, value=unit, allowed=examples
        )


def _dimension(unit: str, at: str, examples: str) -> str:
    try:
        return unit_from(unit).dimension
    except InputError:
        raise complain("this is not a unit", at=at, value=unit, allowed=examples) from None


def exactly_one(table: Table, *names: str, remedy: str = "") -> str:
    """The one of the keys that the file holds; complains where there is none or more than one."""
    found = table.given(*names)
    if len(found) == 1:
        return found[0]
    options = ", ".join(names)
    if found:
        raise complain(
            f"{' and '.join(found)} exclude each other",
            at=found[1],
            allowed=f"one of {options}",
            remedy=remedy,
        )
    raise complain(f"one of {options} is missing", remedy=remedy)


def together(table: Table, key: str, needed: str, reason: str = "") -> None:
    """Complain where `key` is given without `needed`."""
    if table.given(key) and not table.given(needed):
        raise complain(f"{key} needs {needed} beside it", at=key, remedy=reason)
