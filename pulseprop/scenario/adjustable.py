"""Settings that are ranges or lists: found in the element tables of a file, and put in their place as values.

    separation = { from = "2 mm", to = "80 mm", now = "31 mm" }       any value between
    bounces = { from = 0, to = 12, step = 2 }                         in steps
    medium = ["fused silica", "SF10"]                                 one of a list
    thickness = { choices = ["1 mm", "3 mm"], now = "1 mm" }          the same, with today's value

`held` beside them tells how well the setting is held in the workshop, one standard deviation.
"""

from __future__ import annotations

import copy
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Any

from pulseprop.errors import Complaint, InputError
from pulseprop.scenario.places import Keys
from pulseprop.scenario.suggest import did_you_mean
from pulseprop.units import Unit, unit_from
from pulseprop.units.text import NUMBER

__all__ = ["NoSetting", "Raw", "Setting", "find_settings", "put", "settled"]

Raw = str | int | float
"""A value as TOML gives it: text with a unit, or a plain number."""

WORDS = ("from", "to", "step", "now", "choices", "held")
BETWEEN = ("from", "to")


class NoSetting(Exception):
    """A range or list that is none: where it stands, and what is wrong."""

    def __init__(self, keys: Keys, complaint: Complaint) -> None:
        super().__init__(complaint.text)
        self.keys, self.complaint = keys, complaint


@dataclass(frozen=True, kw_only=True)
class Setting:
    """keys: where in the document it stands. low, high, step, choices, now, held: numbers in `unit`, or words
    for choices that are no numbers. unit: as the file writes it, empty for plain numbers; unit_size: in SI.

    whole: plain integers.
    """

    keys: Keys
    unit: str = ""
    unit_size: float = 1.0
    low: float = 0.0
    high: float = 0.0
    step: float | None = None
    choices: tuple[Raw, ...] = ()
    now: Raw | None = None
    held: float | None = None
    whole: bool = False

    @property
    def first(self) -> Raw:
        """What stands for the setting while nothing is chosen: today's value, else the last of the range."""
        if self.now is not None:
            return self.now
        return self.choices[0] if self.choices else self.high

    def raw(self, value: Raw) -> Raw:
        """A number in `unit`, or a word, as the file would write it."""
        if isinstance(value, str):
            return value
        if self.whole:
            return round(value)
        return f"{float(value)!r} {self.unit}" if self.unit else float(value)


def find_settings(element: Mapping[str, Any], lists: frozenset[str], keys: Keys) -> Iterator[Setting]:
    """The settings of an element's table, at any depth; lists: keys that hold lists by their nature.

    Raises NoSetting for a range or list that is none.
    """
    for key, value in element.items():
        if isinstance(value, list) and key not in lists and value and all(map(_plain, value)):
            yield _choice({"choices": value}, (*keys, key))
        elif isinstance(value, dict) and any(word in value for word in WORDS):
            yield _setting(value, (*keys, key))
        else:
            yield from _deeper(value, lists, (*keys, key))


def _deeper(value: Any, lists: frozenset[str], keys: Keys) -> Iterator[Setting]:
    if isinstance(value, dict):
        yield from find_settings(value, lists, keys)
    elif isinstance(value, list):
        for number, entry in enumerate(value):
            if isinstance(entry, dict):
                yield from find_settings(entry, lists, (*keys, number))


def _setting(table: Mapping[str, Any], keys: Keys) -> Setting:
    for word in table:
        if word not in WORDS:
            raise _unknown((*keys, word), word)
    if "choices" in table:
        if any(word in table for word in BETWEEN):
            raise _refused(keys, "a setting is a range or a list", "both", "from and to, or choices")
        return _choice(table, keys)
    if not all(word in table for word in BETWEEN):
        raise _refused(keys, "a range needs both ends", ", ".join(table), '{ from = "2 mm", to = "80 mm" }')
    return _range(table, keys)


def _range(table: Mapping[str, Any], keys: Keys) -> Setting:
    given = {word: _number(table[word], (*keys, word)) for word in WORDS if word in table}
    unit, size, dimension = _unit_of(given, (*keys, "to"))
    numbers = {}
    for word, (number, own) in given.items():
        found = _found(own, (*keys, word)) if own else None
        if (found.dimension if found else "") != dimension:
            raise _refused((*keys, word), "the units do not fit together", table[word], unit or "no unit")
        numbers[word] = number if own == unit else number * (found.factor if found else 1.0) / size
    if numbers["from"] > numbers["to"]:
        raise _refused(keys, "a range ends before it begins", table["from"], "the lower end first")
    if not numbers.get("step", 1.0) > 0:
        raise _refused((*keys, "step"), "a step must lead on", table["step"], "above 0")
    if not numbers.get("held", 1.0) >= 0:
        raise _refused((*keys, "held"), "a deviation is negative", table["held"], "0 or more")
    whole = all(isinstance(table[word], int) for word in ("from", "to", "step") if word in table)
    return Setting(
        keys=keys,
        unit=unit,
        unit_size=size,
        low=numbers["from"],
        high=numbers["to"],
        step=numbers.get("step", 1.0 if whole and not unit else None),
        now=numbers.get("now"),
        held=numbers.get("held"),
        whole=whole and not unit,
    )


def _choice(table: Mapping[str, Any], keys: Keys) -> Setting:
    choices, now = table["choices"], table.get("now")
    if not isinstance(choices, list) or not choices or not all(map(_plain, choices)):
        raise _refused((*keys, "choices"), "choices are a list of values", choices, '["1 mm", "3 mm"]')
    if now is not None and now not in choices:
        raise _refused(
            (*keys, "now"), "today's value is none of the choices", now, ", ".join(map(str, choices))
        )
    if "step" in table:
        raise _refused((*keys, "step"), "a list of choices has no steps", table["step"], "choices, now")
    return _counted(choices, now, keys) or Setting(keys=keys, choices=tuple(choices), now=now)


def _counted(choices: list[Raw], now: Raw | None, keys: Keys) -> Setting | None:
    """Choices that are all numbers, in the unit of the first; None where they are words."""
    given = [_split(choice) for choice in choices]
    if None in given:
        return None
    numbers = [one for one in given if one is not None]
    unit = numbers[0][1]
    found = _found(unit, keys) if unit else None
    if found is not None and found.offset:
        return None
    sizes = []
    for at, (_, own) in enumerate(numbers):
        other = _found(own, (*keys, at)) if own else None
        if (other.dimension if other else "") != (found.dimension if found else ""):
            raise _refused(keys, "the units of the choices do not fit together", choices, unit or "no unit")
        sizes.append((other.factor if other else 1.0) / (found.factor if found else 1.0))
    values = tuple(
        number if own == unit else number * size for (number, own), size in zip(numbers, sizes, strict=True)
    )
    return Setting(
        keys=keys,
        unit=unit,
        unit_size=found.factor if found else 1.0,
        choices=values,
        now=None if now is None else values[choices.index(now)],
        whole=all(isinstance(choice, int) for choice in choices),
    )


def _split(value: Raw) -> tuple[float, str] | None:
    """Number and unit, None for words."""
    if not isinstance(value, str):
        return float(value), ""
    match = NUMBER.fullmatch(value)
    return (float(match.group(1)), match.group(2)) if match else None


def _found(unit: str, keys: Keys) -> Unit:
    try:
        return unit_from(unit)
    except InputError as error:
        raise NoSetting(keys, error.complaint) from None


def _unit_of(given: Mapping[str, tuple[float, str]], keys: Keys) -> tuple[str, float, str]:
    """Unit of the range as a whole: that of its upper end; its size and dimension."""
    unit = given["to"][1]
    if not unit:
        return "", 1.0, ""
    found = _found(unit, keys)
    return unit, found.factor, found.dimension


def _number(value: Any, keys: Keys) -> tuple[float, str]:
    """Number and unit of a raw value."""
    if isinstance(value, int | float) and not isinstance(value, bool):
        return float(value), ""
    match = NUMBER.fullmatch(value) if isinstance(value, str) else None
    if match is None:
        raise _refused(keys, "this is no number with a unit", value, 'such as "2 mm", or a plain number')
    unit = match.group(2)
    if unit and _found(unit, keys).offset:
        raise _refused(keys, "a range cannot be in this unit", value, "a unit that begins at zero, such as K")
    return float(match.group(1)), unit


def _plain(value: Any) -> bool:
    return isinstance(value, str | int | float) and not isinstance(value, bool)


def _unknown(keys: Keys, word: str) -> NoSetting:
    problem, allowed = f'there is no key "{word}" here', ", ".join(WORDS)
    return NoSetting(keys, Complaint(problem=problem, allowed=allowed, remedy=did_you_mean(word, WORDS)))


def _refused(keys: Keys, problem: str, value: object, allowed: str) -> NoSetting:
    return NoSetting(keys, Complaint(problem=problem, value=value, allowed=allowed))


def settled(document: Mapping[str, Any], settings: tuple[Setting, ...]) -> dict[str, Any]:
    """A copy of the document with a value in place of each setting: today's where it is known."""
    changed = copy.deepcopy(dict(document))
    for setting in settings:
        put(changed, setting.keys, setting.raw(setting.first))
    return changed


def put(document: Any, keys: Keys, value: Raw) -> None:
    """Put a value at the keys of a document, in place."""
    holder = document
    for key in keys[:-1]:
        holder = holder[key]
    holder[keys[-1]] = value
