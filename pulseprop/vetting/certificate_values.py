"""The numbers of a certificate as they are printed.

The digits state the uncertainty where nothing else does: half a unit of the last place. Zeros that end a
whole number may only hold the place, so they do not count: 1500 is 1500 +- 50, 1500. is 1500 +- 0.5.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import Decimal
from typing import Literal

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.units import from_si, position, quantity, unit_from
from pulseprop.vetting.requirement_quantities import LINE_C, LINE_D, LINE_F, plain_number

__all__ = ["PRINTABLE", "Certificate", "PrintedValue", "printed_value"]

NUMBER = re.compile(
    r"\s*(?P<number>[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?)\s*(?P<unit>.*?)\s*"
)

PRINTABLE: dict[str, str] = {
    "n_d": "number",
    "n_F": "number",
    "n_C": "number",
    "V_d": "number",
    "index": "number",
    "group index": "number",
    "gvd": "gvd",
    "tod": "tod_per_length",
    "fod": "fod_per_length",
    "zero dispersion wavelength": "length",
}
"""What a certificate may print, and the kind of its unit."""
SHORTEST, LONGEST = 1e-9, 1e-2
"""m."""
LINES = {"n_d": LINE_D, "n_F": LINE_F, "n_C": LINE_C, "V_d": LINE_D}


@dataclass(frozen=True, kw_only=True)
class PrintedValue:
    """value, error: SI (the error above 0); text, unit: as printed. omega: rad/s. line: in the file, 0 where
    it is not known. stated: whether the error was, and does not come from the digits."""

    quantity: str
    text: str
    value: float
    error: float
    unit: str
    omega: float
    stated: bool
    line: int = 0

    @property
    def words(self) -> str:
        """ "gvd at 800 nm"."""
        if self.quantity in LINES or self.quantity == "zero dispersion wavelength":
            return self.quantity
        return f"{self.quantity} at {1e9 * TWO_PI_C / self.omega:.6g} nm"

    def in_unit(self, value: float) -> float:
        """An SI value of the same quantity in the unit printed."""
        return float(from_si(value, self.unit, PRINTABLE[self.quantity])) if self.unit else value


@dataclass(frozen=True, kw_only=True)
class Certificate:
    """name: as printed, a claim where the catalogue has it. orientation: of a crystal: an axis or "random".

    transparent: (low, high), rad/s, where the material absorbs nothing, if stated. relative_to: what the
    index is against, if stated. temperature: as printed.
    """

    file: str
    sha256: str
    name: str
    values: tuple[PrintedValue, ...]
    relative_to: Literal["air", "vacuum"] | None = None
    temperature: str = ""
    source: str = ""
    orientation: str = ""
    transparent: tuple[float, float] | None = None


def printed_value(
    quantity_name: str,
    text: str,
    *,
    at: str | None = None,
    uncertainty: str | None = None,
    line: int = 0,
) -> PrintedValue:
    """A number as printed, with its unit where it has one. Raises InputError."""
    kind = PRINTABLE[quantity_name]
    found = NUMBER.fullmatch(text)
    if found is None:
        raise InputError("expected one number, with its unit where it has one", value=text)
    value, unit = _si(found["number"], found["unit"], kind), found["unit"]
    digits = half_unit(found["number"]) * (_per_unit(unit) if unit else 1.0)
    error = digits if uncertainty is None else _uncertainty(uncertainty, kind, unit, value, digits)
    return PrintedValue(
        quantity=quantity_name,
        text=text.strip(),
        value=value,
        error=error,
        unit=unit,
        omega=_place(quantity_name, at, value),
        stated=uncertainty is not None,
        line=line,
    )


def half_unit(number: str) -> float:
    """Of the last place that is known to be printed."""
    digits = Decimal(number)
    exponent = int(digits.as_tuple().exponent)
    mantissa = re.split("[eE]", number)[0]
    if "." not in mantissa and digits != 0:
        exponent += len(mantissa) - len(mantissa.rstrip("0"))
    return 0.5 * float(Decimal(10) ** exponent)


def _si(number: str, unit: str, kind: str) -> float:
    if kind != "number":
        return quantity(f"{number} {unit}", kind)
    return plain_number(number, unit)


def _per_unit(unit: str) -> float:
    return unit_from(unit).factor


def _uncertainty(text: str, kind: str, unit: str, value: float, digits: float) -> float:
    """As stated, alone a number in the unit of the value; less than the digits show cannot be meant alone."""
    found = NUMBER.fullmatch(text)
    if found is None:
        raise InputError("expected one number, with its unit where it has one", value=text)
    own = found["unit"] or unit
    error = abs(value) * float(found["number"]) / 100 if own == "%" else _si(found["number"], own, kind)
    if not error > 0:
        raise InputError("an uncertainty must be above zero", value=text)
    return error if error >= digits else error + digits


def _place(name: str, at: str | None, value: float) -> float:
    """Where the number belongs, rad/s."""
    omega = _unchecked_place(name, at, value)
    if not SHORTEST <= TWO_PI_C / omega <= LONGEST:
        raise InputError(
            "no optical material is printed at such a wavelength",
            value=at or f"{value:g} m",
            allowed="1 nm to 10 mm",
        )
    return omega


def _unchecked_place(name: str, at: str | None, value: float) -> float:
    if name in LINES or name == "zero dispersion wavelength":
        if at is not None:
            raise InputError(f"{name} takes no wavelength", value=at, remedy="Leave the key out")
        if name in LINES:
            return LINES[name]
        if value <= 0:
            raise InputError("a wavelength must be above zero", value=value)
        return TWO_PI_C / value
    if at is None:
        raise InputError(f"the wavelength of {name} is missing", remedy='Add at = "800 nm"')
    return position(at).omega
