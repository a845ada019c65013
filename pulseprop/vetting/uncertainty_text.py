"""Uncertainties as an option states them: "n=1e-4,k=2%", "alpha=0.1 cm^-1+1%", "transmittance=0.3%".

A percentage is one of the value, except for transmittances and reflectance, where it means percentage points
(0.3% is 0.003 of T, whatever T is), as instruments state them. Quantities that have a unit need one.
"""

from __future__ import annotations

import math
import re

from pulseprop.errors import InputError
from pulseprop.units import quantity
from pulseprop.vetting.heading_words import QUANTITIES, meaning_of
from pulseprop.vetting.kinds import FRACTIONS, KIND_OF
from pulseprop.vetting.request import Stated
from pulseprop.vetting.table import Quantity

__all__ = ["uncertainties_in"]

ALLOWED = 'a list such as "n=1e-4,k=2%" or "alpha=0.1 cm^-1+1%"'
NUMBER = r"[0-9]+\.?[0-9]*(?:[eE][+-]?[0-9]+)?|\.[0-9]+(?:[eE][+-]?[0-9]+)?"
TERM = re.compile(rf"(?P<number>{NUMBER})\s*(?P<unit>[^0-9\s.+][^+]*)?")


def uncertainties_in(text: str) -> dict[Quantity, Stated]:
    """The stated uncertainty of each quantity. Raises InputError for whatever is no such list."""
    found: dict[Quantity, Stated] = {}
    for part in text.split(","):
        name, sign, amount = part.partition("=")
        if not sign or not amount.strip():
            raise _refused("an uncertainty is a quantity, = and a number", part)
        called = _quantity(name.strip())
        if called in found:
            raise _refused("the same quantity stands twice", part)
        found[called] = _stated(called, amount, part)
    return found


def _quantity(name: str) -> Quantity:
    meaning = name if name in QUANTITIES else meaning_of(name)
    for known in QUANTITIES:
        if meaning == known:
            return known
    raise InputError("no such quantity", value=name, allowed=", ".join(QUANTITIES), place="uncertainty")


def _stated(called: Quantity, amount: str, part: str) -> Stated:
    """The sum of the absolute and the relative terms."""
    absolute = relative = 0.0
    for term in re.split(r"(?<![eE])\+", amount):
        match = TERM.fullmatch(term.strip())
        if match is None:
            raise _refused("this is no uncertainty", part)
        number, unit = match["number"], (match["unit"] or "").strip()
        if unit == "%" and called not in FRACTIONS:
            relative += float(number) / 100
        else:
            absolute += _absolute(called, number, unit, part)
    if not (absolute + relative > 0 and math.isfinite(absolute + relative)):
        raise _refused("an uncertainty must be above zero", part)
    return Stated(absolute=absolute, relative=relative)


def _absolute(called: Quantity, number: str, unit: str, part: str) -> float:
    kind = KIND_OF.get(called)
    if kind is None:
        if unit:
            raise _refused(f"{called} has no unit", part)
        return float(number)
    if not unit and called not in FRACTIONS:
        raise _refused(f"the uncertainty of {called} needs its unit", part)
    return float(number) if not unit else quantity(f"{number} {unit}", kind)


def _refused(problem: str, value: str) -> InputError:
    return InputError(problem, value=value.strip(), allowed=ALLOWED, place="uncertainty")
