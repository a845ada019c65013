"""A requirement in words, "gvd at 800 nm = 36.2 +- 0.5 fs^2/mm", as limits in SI.

    QUANTITY [at PLACE | from PLACE to PLACE] [for LENGTH]  = VALUE +- TOLERANCE UNIT
                                                            = VALUE .. VALUE UNIT
                                                            >= VALUE UNIT  |  <= VALUE UNIT

A tolerance in per cent is one of the value. Ranges of wavelength are for mirrors and coatings.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass

from pulseprop.errors import InputError
from pulseprop.units import from_si, position, quantity
from pulseprop.vetting.requirement_quantities import REQUIRABLE, Requirable, named_requirable, plain_number

__all__ = ["Requirement", "read_requirement"]

EXAMPLES = (
    '"gvd at 800 nm = 36.2 +- 0.5 fs^2/mm", "V_d = 64.17 +- 0.3", '
    '"gdd from 750 nm to 850 nm = -40 +- 5 fs^2", '
    '"internal transmittance at 1030 nm for 10 mm >= 0.998"'
)

NUMBER = r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?"
SENTENCE = re.compile(
    r"(?P<name>[A-Za-z_ ]+?)"
    r"(?:\s+at\s+(?P<at>.+?)|\s+from\s+(?P<first>.+?)\s+to\s+(?P<last>.+?))?"
    r"(?:\s+for\s+(?P<length>.+?))?"
    r"\s*(?P<sign>>=|<=|=)\s*(?P<limit>.+)"
)
TOLERANCE = re.compile(rf"(?P<value>{NUMBER})\s*(?P<unit>.*?)\s*\+-\s*(?P<width>{NUMBER})\s*(?P<of>.*)")
BETWEEN = re.compile(rf"(?P<low>{NUMBER})\s*(?P<unit>.*?)\s*\.\.\s*(?P<high>{NUMBER})\s*(?P<of>.*)")
SINGLE = re.compile(rf"(?P<value>{NUMBER})\s*(?P<unit>.*)")


@dataclass(frozen=True, kw_only=True)
class Requirement:
    """least, most: limits in SI, infinite where there is none. text: as given.

    low, high: place in rad/s, equal where it is one wavelength; None for quantities of fixed lines. unit: in
    which limits were given, "" for plain numbers. length: of the sample, m, where stated.
    """

    text: str
    quantity: Requirable
    least: float
    most: float
    unit: str
    low: float | None = None
    high: float | None = None
    length: float | None = None

    @property
    def at_one_place(self) -> bool:
        """Whether one wavelength is meant."""
        return self.low == self.high

    def in_unit(self, value: float) -> float:
        """An SI value in the unit of the requirement."""
        if self.quantity.kind == "number":
            return value
        return float(from_si(value, self.unit, self.quantity.kind)) if self.unit else value


def read_requirement(text: str) -> Requirement:
    """Raises InputError: what was read, what is allowed, an example."""
    found = SENTENCE.fullmatch(_plain(text))
    if found is None:
        raise _refused("this is no requirement", text)
    try:
        return _built(text, found)
    except InputError as error:
        raise _within(error, text) from None


def _built(text: str, found: re.Match[str]) -> Requirement:
    limit = found["limit"].strip()
    asked = named_requirable(found["name"].strip(), limit)
    low, high = _places(asked, found)
    least, most, unit = _limits(asked, found["sign"], limit)
    if least > most:
        raise InputError("the lower limit lies above the upper one", value=limit)
    return Requirement(
        text=text,
        quantity=asked,
        least=least,
        most=most,
        unit=unit,
        low=low,
        high=high,
        length=_length(asked, found["length"]),
    )


def _plain(text: str) -> str:
    """One spelling of signs."""
    for sign, plain in (("±", "+-"), ("+/-", "+-"), ("≥", ">="), ("≤", "<="), ("−", "-"), ("…", "..")):
        text = text.replace(sign, plain)
    return text.strip()


def _places(asked: Requirable, found: re.Match[str]) -> tuple[float | None, float | None]:
    stated = [part for part in (found["at"], found["first"], found["last"]) if part]
    if not asked.has_place:
        if stated:
            raise InputError(f"{asked.words} belongs to fixed lines and takes no wavelength", value=stated[0])
        return None, None
    if not stated:
        raise InputError(
            "the wavelength is missing", allowed=f'"{asked.name} at 800 nm …"', remedy="Say where"
        )
    if len(stated) == 2 and not asked.has_range:
        raise InputError(
            f"{asked.words} is guaranteed at single wavelengths",
            value=f"from {stated[0]} to {stated[1]}",
            remedy="State one requirement a wavelength",
        )
    low, *_, high = sorted(position(part.strip()).omega for part in (stated[0], stated[-1]))
    return low, high


def _length(asked: Requirable, text: str | None) -> float | None:
    if asked.has_length and text is None:
        raise InputError("the thickness is missing", allowed=f'"{asked.name} at 1030 nm for 10 mm >= 0.998"')
    if text is None:
        return None
    if not asked.has_length:
        raise InputError(f"{asked.words} does not depend on a thickness", value=f"for {text}")
    length = quantity(text.strip(), "length")
    if length <= 0:
        raise InputError("a thickness must be above zero", value=text)
    return length


def _limits(asked: Requirable, sign: str, limit: str) -> tuple[float, float, str]:
    """Least, most and the unit."""
    single = SINGLE.fullmatch(limit)
    if sign != "=":
        if single is None:
            raise InputError("the limit is no number with its unit", value=limit, allowed=asked.allowed)
        value = _value(asked, single["value"], single["unit"])
        return (value, math.inf, single["unit"]) if sign == ">=" else (-math.inf, value, single["unit"])
    if between := BETWEEN.fullmatch(limit):
        unit = between["of"] or between["unit"]
        low = _value(asked, between["low"], between["unit"] or unit)
        return low, _value(asked, between["high"], unit), unit
    if about := TOLERANCE.fullmatch(limit):
        return _about(asked, about)
    raise InputError(
        "an equality needs a tolerance, or two limits",
        value=limit,
        allowed=f'"= {asked.example}", "= VALUE .. VALUE UNIT", ">= VALUE UNIT" or "<= VALUE UNIT"',
    )


def _about(asked: Requirable, about: re.Match[str]) -> tuple[float, float, str]:
    relative = about["of"] == "%" and (asked.kind != "fraction" or bool(about["unit"]))
    unit = about["unit"] if relative else about["of"] or about["unit"]
    value = _value(asked, about["value"], about["unit"] or unit)
    width = abs(value) * float(about["width"]) / 100 if relative else _value(asked, about["width"], unit)
    if width < 0:
        raise InputError("a tolerance must not be negative", value=about["width"])
    return value - width, value + width, unit


def _value(asked: Requirable, number: str, unit: str) -> float:
    if asked.kind == "number" or (asked.kind == "fraction" and not unit):
        return plain_number(number, unit)
    return quantity(f"{number} {unit}", asked.kind)


def _within(error: InputError, text: str) -> InputError:
    """The same, with the requirement that it is about."""
    known = error.complaint
    return InputError(
        known.problem,
        value=known.value,
        allowed=known.allowed,
        remedy=known.remedy,
        file=f'requirement "{text}"',
    )


def _refused(problem: str, text: str) -> InputError:
    return InputError(
        problem,
        value=text,
        allowed=f"a quantity ({', '.join(REQUIRABLE)}), where, and a limit, as in {EXAMPLES}",
    )
