"""Settings of a compensation in words."""

from __future__ import annotations

import math
from collections.abc import Iterable

from pulseprop.compensation.result import Design, Setting
from pulseprop.propagation.numerals import NOTHING, fixed, significant

__all__ = ["move_text", "parameter_words", "setting_text", "used", "value_text"]

IN_CAPITALS = ("gdd", "tod", "fod")

DIGITS = 5
"""Of a value of which no tolerance is known."""

FINENESS = 0.05
"""A value is told in steps of at most this share of what it may be off."""


def parameter_words(parameter: str) -> str:
    """A key as a person says it: "plates.1.thickness" is the thickness of plate 1."""
    *holders, last = parameter.split(".")
    word = last.upper() if last in IN_CAPITALS else last.replace("_", " ")
    said = " ".join(holder if holder.isdecimal() else _one_of(holder) for holder in holders)
    return f"{word} of {said}" if said else word


def _one_of(holder: str) -> str:
    """The singular of a list's key."""
    word = holder.replace("_", " ")
    return word[:-2] if word.endswith("sses") else word.removesuffix("s")


def value_text(one: Setting, design: Design) -> str:
    """Value with its unit, as finely as its tolerance in the design asks for."""
    if isinstance(one.value, str):
        return one.value
    return f"{_number(one.value, one, design)} {one.unit}".rstrip()


def move_text(one: Setting, design: Design) -> str:
    """The move from today's setting with its sign, a dash where none is known."""
    if one.move is None:
        return NOTHING
    number = _number(one.move, one, design)
    return f"{'' if number.startswith('-') or number == '0' else '+'}{number} {one.unit}".rstrip()


def _number(value: float, one: Setting, design: Design) -> str:
    distances = [
        distance
        for drift in design.tolerance
        if (drift.element, drift.parameter) == (one.element, one.parameter)
        for distance in (drift.below, drift.above)
        if distance
    ]
    if distances:
        return fixed(value, math.floor(math.log10(FINENESS * min(distances))))
    return f"{value:g}" if value == round(value) else significant(value, DIGITS)


def setting_text(one: Setting, design: Design) -> str:
    """A setting with its move: "separation 260.66 mm (+10.66 mm from today)"."""
    moved = "" if one.move is None else f" ({move_text(one, design)} from today)"
    return f"{parameter_words(one.parameter)} {value_text(one, design)}{moved}"


def used(design: Design) -> str:
    """The settings of a design in words, element by element."""
    by_element: dict[str, list[Setting]] = {}
    for setting in design.settings:
        by_element.setdefault(setting.element, []).append(setting)
    parts = [f"{element} ({_listed(settings, design)})" for element, settings in by_element.items()]
    parts += [f"without {name}" for name in design.left_out]
    return "; ".join(parts) or "as it stands, with nothing added"


def _listed(settings: Iterable[Setting], design: Design) -> str:
    return ", ".join(f"{parameter_words(one.parameter)} {value_text(one, design)}" for one in settings)
