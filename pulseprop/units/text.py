"""Quantities from text, and back to text.

A quantity is one number and one unit: "3 mm", "-40 fs^2", "22 degC". Decimal commas, sums, two numbers, a
missing unit, NaN and infinity are refused, each with its own hint.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from decimal import Decimal
from typing import TYPE_CHECKING, Any, Literal, TypeGuard

from pulseprop.constants import SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.units.kinds import KINDS, Kind, form_of, kind_named
from pulseprop.units.symbols import Unit, unit_from

if TYPE_CHECKING:
    from pulseprop.units.kinds import Values

__all__ = ["Position", "Width", "from_si", "position", "quantity", "show", "spectral_width", "to_si"]

NUMBER = re.compile(
    r"\s*([+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?)(?![0-9.])\s*(.*?)\s*", re.DOTALL
)

Axis = Literal["wavelength", "frequency"]


@dataclass(frozen=True)
class Position:
    """A place on the spectrum. omega: rad/s; axis: whether it was given as a wavelength or in the terms of
    frequency."""

    omega: float
    axis: Axis = "frequency"

    @property
    def wavelength(self) -> float:
        """Vacuum wavelength, m (of a value that was given in air: as given)."""
        return TWO_PI_C / self.omega


@dataclass(frozen=True)
class Width:
    """A width on the spectrum: in m of wavelength, or in Hz of ordinary frequency, as `axis` says."""

    value: float
    axis: Axis = "frequency"

    def about(self, omega: float) -> float:
        """The width in Hz of a feature that has its two edges symmetric in frequency about omega (rad/s).

        c/(f - D/2) - c/(f + D/2) = value is solved for D.
        """
        if self.axis == "frequency":
            return self.value
        f = omega / (2 * math.pi)
        reach = self.value * f
        return 2 * reach * f / (SPEED_OF_LIGHT + math.hypot(SPEED_OF_LIGHT, reach))


def quantity(value: object, kind: str) -> float:
    """The SI value of a text such as "3 mm", in the unit that `KINDS[kind].si` names.

    Of kind "fraction" a plain number will do. Raises InputError with what is allowed for anything else.
    """
    wanted = kind_named(kind)
    if kind == "fraction" and _is_number(value):
        return _finite(float(value), value, wanted)
    number, unit = _split(value, wanted)
    return _converted(number, unit, wanted, value)


def position(value: object) -> Position:
    """A place on the spectrum from text, "800 nm" or "375 THz" and the like."""
    wanted = KINDS["spectral"]
    number, unit = _split(value, wanted)
    omega = _converted(number, unit, wanted, value)
    if not (omega > 0 and math.isfinite(omega)):
        raise InputError("a place on the spectrum must be above zero", value=value, allowed=wanted.allowed)
    return Position(omega, "wavelength" if unit.dimension == "m" else "frequency")


def spectral_width(value: object) -> Width:
    """A width on the spectrum from text: a length is one of wavelength, all else of frequency."""
    wanted = KINDS["width"]
    number, unit = _split(value, wanted)
    if unit.dimension == "m":
        return Width(_si(number, unit), "wavelength")
    return Width(_converted(number, unit, wanted, value))


def to_si(values: Values, unit: str, kind: str) -> Values:
    """Numbers (any shape) that stand in `unit`, as the SI values of `kind`."""
    known = unit_from(unit)
    form = form_of(kind_named(kind), known.dimension, unit)
    return form.inward(values * known.factor + known.offset)


def from_si(values: Values, unit: str, kind: str) -> Values:
    """The inverse of `to_si`."""
    known = unit_from(unit)
    form = form_of(kind_named(kind), known.dimension, unit)
    return (form.outward(values) - known.offset) / known.factor


def show(value: float, unit: str, digits: int = 4, *, kind: str | None = None) -> str:
    """ "36.16 fs^2/mm": an SI value in a unit with significant digits; with `kind` as that kind is kept in
    SI."""
    number = from_si(value, unit, kind) if kind else (value - unit_from(unit).offset) / unit_from(unit).factor
    return f"{significant(float(number), digits)} {unit}"


def significant(value: float, digits: int) -> str:
    """A number with that many significant digits, without an exponent between 1e-4 and 1e6."""
    if value == 0 or not math.isfinite(value):
        return "0" if value == 0 else str(value)
    rounded = float(f"{value:.{digits - 1}e}")
    size = math.floor(math.log10(abs(rounded)))
    if not -4 <= size < 6:
        return f"{rounded:.{digits - 1}e}"
    return f"{rounded:.{max(digits - 1 - size, 0)}f}"


def _is_number(value: object) -> TypeGuard[float]:
    return isinstance(value, int | float) and not isinstance(value, bool)


def _split(value: object, wanted: Kind) -> tuple[str, Unit]:
    """The number, as written, and the unit."""
    if not isinstance(value, str):
        raise _refused_type(value, wanted)
    match = NUMBER.fullmatch(value)
    if match is None or not match[2]:
        raise _refused_text(value, match, wanted)
    try:
        return match[1], unit_from(match[2])
    except InputError:
        raise _refused_tail(value, match[1], match[2], wanted) from None


def _si(number: str, unit: Unit) -> float:
    """number times factor, rounded once: "30 fs" is the float 3e-14."""
    return float(Decimal(number) * Decimal(repr(unit.factor)) + Decimal(repr(unit.offset)))


def _converted(number: str, unit: Unit, wanted: Kind, value: object) -> float:
    form = form_of(wanted, unit.dimension, value)
    try:
        return _finite(float(form.inward(_si(number, unit))), value, wanted)
    except ZeroDivisionError:
        raise InputError("a wavelength must be above zero", value=value, allowed=wanted.allowed) from None


def _finite(number: float, value: object, wanted: Kind) -> float:
    if not math.isfinite(number):
        raise InputError("the number is not finite", value=value, allowed=wanted.allowed)
    return number


def _refused_type(value: object, wanted: Kind) -> InputError:
    if _is_number(value):
        return InputError(
            "the unit is missing",
            value=value,
            allowed=wanted.allowed,
            remedy="Write it in quotes with its unit",
        )
    return InputError(f"expected {wanted.words} as text", value=_brief(value), allowed=wanted.allowed)


def _refused_text(value: str, match: re.Match[str] | None, wanted: Kind) -> InputError:
    if match is not None:
        return InputError("the unit is missing", value=value, allowed=wanted.allowed, remedy="Add the unit")
    if re.match(r"\s*[+-]?(nan|inf)", value, re.IGNORECASE):
        return InputError("the number is not finite", value=value, allowed=wanted.allowed)
    return InputError(
        f"expected {wanted.words}: one number and its unit", value=value, allowed=wanted.allowed
    )


def _refused_tail(value: str, number: str, tail: str, wanted: Kind) -> InputError:
    comma = re.match(r",([0-9]+)(.*)", tail)
    if comma:
        problem = "a comma is no decimal point here"
        remedy = f'Write "{number}.{comma[1]}{comma[2]}" with a point'
    elif re.search(r"(^|[-+;,±\s])[0-9.]", tail):
        problem, remedy = "more than one number stands here", "Give one number and one unit"
    else:
        problem, remedy = f'"{tail}" is not a unit', _unit_hint(tail)
    return InputError(problem, value=value, allowed=wanted.allowed, remedy=remedy)


def _unit_hint(tail: str) -> str:
    if re.search(r"[A-Za-z][0-9]", tail):
        return f'Write powers with a sign, "{re.sub(r"(?<=[A-Za-z])(?=[0-9])", "^", tail)}"'
    if "/" in tail and " " in tail:
        return "Put a divisor of several factors in parentheses, as in ps/(nm km)"
    return "Check the spelling; capitals count"


def _brief(value: Any) -> object:
    """The value as it came, cut where it is long."""
    return value if len(repr(value)) <= 60 else repr(value)[:57] + "..."
