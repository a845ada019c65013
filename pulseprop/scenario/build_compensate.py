"""From a scenario to the question that the compensation answers."""

from __future__ import annotations

import copy
from collections.abc import Callable, Iterator, Mapping
from functools import cache
from typing import Any

from pydantic import TypeAdapter, ValidationError

from pulseprop.compensation.problem import Adjustment, Goal, Part, Problem, Settings, Value
from pulseprop.elements.element import Element
from pulseprop.errors import InputError, PulsepropError
from pulseprop.material.medium import Medium
from pulseprop.scenario.adjustable import Raw, Setting, put
from pulseprop.scenario.build import grid_wish, media_of, pulse_of
from pulseprop.scenario.build_path import built_element
from pulseprop.scenario.build_site import Site
from pulseprop.scenario.complaints import findings_of
from pulseprop.scenario.places import Keys
from pulseprop.scenario.read import Scenario
from pulseprop.scenario.schema_compensate import CompensateTable
from pulseprop.scenario.schema_element import ElementTable
from pulseprop.scenario.schema_path import Element as AnyElement
from pulseprop.units import unit_from
from pulseprop.units.text import NUMBER

__all__ = ["problem_of"]

LOOSE = ("centre_thickness", "incidence", "apex_angle")
"""Settings that may be off by what a workshop or a mount leaves, beside what is adjusted."""

REMEMBERED = 256
"""Settings of an element whose elements are kept: a step of the search asks for them several times."""

TO_ORDER = {"gdd", "tod"}
"""A mirror whose orders are ranges is one to be made."""


class _Row:
    """One element of the path or at hand: its table with today's values, and its settings."""

    def __init__(self, scenario: Scenario, keys: Keys, centre: float, find: Callable[[str], Medium]) -> None:
        self.keys = keys
        self.settings = {
            _key(setting.keys[len(keys) :]): setting
            for setting in scenario.settings
            if setting.keys[: len(keys)] == keys
        }
        self.raw = copy.deepcopy(_at(scenario.document, keys))
        for setting in self.settings.values():
            put(self.raw, setting.keys[len(keys) :], setting.raw(setting.first))
        self.site = Site(
            scenario=scenario,
            keys=keys,
            number=str(int(keys[-1]) + 1),
            centre=centre,
            beam_radius=scenario.content.pulse.beam_radius,
            find=find,
        )
        self.table = self._checked(self.raw)
        self.name = self.site.name_of(self.table, self.table.kind)
        self._built: dict[tuple[tuple[str, Value], ...], tuple[Element, ...]] = {}

    def _checked(self, raw: Mapping[str, Any]) -> ElementTable:
        try:
            table: ElementTable = _elements().validate_python(raw)
        except ValidationError as error:
            keys, complaint = findings_of(error.errors(include_url=False), raw)[0]
            told = InputError(complaint.problem, value=complaint.value, allowed=complaint.allowed)
            raise self.site.blamed(told, *keys) from None
        return table

    def build(self, settings: Settings) -> tuple[Element, ...]:
        """The elements for SI values or words, by the key of each; the last few are remembered."""
        key = tuple(settings.items())
        if key not in self._built:
            if len(self._built) >= REMEMBERED:
                self._built.clear()
            self._built[key] = self._made(settings)
        return self._built[key]

    def _made(self, settings: Settings) -> tuple[Element, ...]:
        table = self._checked(self._with(settings)) if settings else self.table
        if getattr(table, "bounces", None) == 0:
            return ()
        try:
            return (built_element(table, self.site),)
        except PulsepropError as error:
            raise self.site.blamed(error) from None

    def _with(self, settings: Settings) -> dict[str, Any]:
        changed: dict[str, Any] = copy.deepcopy(self.raw)
        for key, value in settings.items():
            put(changed, _keys(key), self._raw(key, value))
        return changed

    def _raw(self, key: str, value: Value) -> Raw:
        setting = self.settings.get(key) or _loose_setting(self.raw, _keys(key))
        return value if isinstance(value, str) else setting.raw(value / setting.unit_size)

    def part(self, *, at_hand: bool) -> Part:
        """What the search is told of this element."""
        settings = {} if self.table.keep else self.settings
        adjustments = tuple(_adjustment(key, setting) for key, setting in settings.items())
        loose = () if self.table.keep else tuple(self._loose())
        ordered = self.table.kind == "chirped mirror" and bool(TO_ORDER & set(settings))
        return Part(
            name=self.name,
            build=self.build,
            adjustments=adjustments,
            optional=at_hand,
            drifts=loose,
            to_order=ordered,
        )

    def _loose(self) -> Iterator[Adjustment]:
        for key, value in self.raw.items():
            if key in LOOSE and key not in self.settings and isinstance(value, str):
                setting = _loose_setting(self.raw, (key,))
                yield _adjustment(key, setting)


def problem_of(scenario: Scenario) -> Problem:
    """The question of a scenario.

    Raises InputError with the place of what cannot be used: nothing to adjust, a place after no element, an
    element at hand that its settings do not allow.
    """
    asked = scenario.content.compensate or CompensateTable.model_validate({})
    pulse, _ = pulse_of(scenario)
    centre, find = pulse.centre, media_of(scenario).medium
    rows = [_Row(scenario, ("path", at), centre, find) for at in range(len(scenario.content.path))]
    at_hand = [_Row(scenario, ("compensate", "with", at), centre, find) for at in range(len(asked.with_))]
    _refuse_nothing(scenario, rows, at_hand)
    parts = [row.part(at_hand=False) for row in rows]
    names = [part.name for part in parts]
    starts, after, ends = [], dict[str, list[Part]](), []
    for row in at_hand:
        place = row.table.place or "end"
        part = row.part(at_hand=True)
        if place == "start":
            starts.append(part)
        elif place == "end":
            ends.append(part)
        else:
            name = _anchor(place, names, row)
            after.setdefault(name, []).append(part)
    ordered = [*starts, *(one for part in parts for one in (part, *after.get(part.name, ()))), *ends]
    return Problem(
        pulse=pulse,
        parts=tuple(ordered),
        goal=_goal(asked),
        best=asked.best,
        seed=asked.seed,
        grid=grid_wish(scenario),
        beyond_range=scenario.content.grid.beyond_range,
        title=scenario.content.title or scenario.file,
        file=scenario.file,
    )


def _goal(asked: CompensateTable) -> Goal:
    return Goal(
        name=asked.goal,
        target=asked.target_si,
        transmission_weight=asked.transmission_weight,
        size_weight=asked.size_weight,
        window=asked.window,
    )


def _refuse_nothing(scenario: Scenario, rows: list[_Row], at_hand: list[_Row]) -> None:
    if at_hand or any(row.settings and not row.table.keep for row in rows):
        return
    error = InputError(
        "there is nothing to set",
        allowed="ranges on elements of the path without keep, or elements at hand in [[compensate.with]]",
        remedy="Say what may be changed",
    )
    raise scenario.blamed(error, "compensate")


def _anchor(place: str, names: list[str], row: _Row) -> str:
    name = place.removeprefix("after:")
    if name in names:
        return name
    error = InputError(
        "no element of the path has this name", value=name, allowed=", ".join(map(repr, names)) or "none"
    )
    raise row.site.blamed(error, "place")


def _adjustment(key: str, setting: Setting) -> Adjustment:
    size = setting.unit_size
    now = setting.now * size if isinstance(setting.now, float) else setting.now
    if setting.choices:
        values = tuple(one if isinstance(one, str) else one * size for one in setting.choices)
        return Adjustment(parameter=key, unit=setting.unit, unit_size=size, choices=values, now=now)
    return Adjustment(
        parameter=key,
        unit=setting.unit,
        unit_size=size,
        low=setting.low * size,
        high=setting.high * size,
        step=None if setting.step is None else setting.step * size,
        now=now,
        sigma=None if setting.held is None else setting.held * size,
    )


def _loose_setting(raw: Mapping[str, Any], keys: Keys) -> Setting:
    """A fixed value as a setting without a range: it may be off, and is not set."""
    match = NUMBER.fullmatch(str(_at(raw, keys)))
    if match is None:
        raise InputError("this is no number with a unit", value=_at(raw, keys))
    unit, number = match.group(2), float(match.group(1))
    return Setting(
        keys=keys, unit=unit, unit_size=unit_from(unit).factor, low=number, high=number, now=number
    )


@cache
def _elements() -> TypeAdapter[Any]:
    return TypeAdapter(AnyElement)


def _at(document: Any, keys: Keys) -> Any:
    for key in keys:
        document = document[key]
    return document


def _key(keys: Keys) -> str:
    """Keys below an element as the user would write them: list entries counted from 1."""
    return ".".join(str(key + 1) if isinstance(key, int) else key for key in keys)


def _keys(key: str) -> Keys:
    return tuple(int(step) - 1 if step.isdecimal() else step for step in key.split("."))
