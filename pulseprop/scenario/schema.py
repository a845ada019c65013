"""The scenario file as a whole: typed objects with SI floats.

Each table of the file has its class: `PulseTable`, the elements of `schema_path`, `MediumTable` and what
belongs to it. [[sweep]] and [study] belong to other commands: they are kept as they stand and not looked
into.
"""

from __future__ import annotations

import math
from typing import Annotated, Any, Literal

from pydantic import Field, PlainValidator, model_validator

from pulseprop.scenario.fields import Name, Table, complain, measured
from pulseprop.scenario.schema_compensate import CompensateTable
from pulseprop.scenario.schema_medium import MediumTable
from pulseprop.scenario.schema_path import Element, all_elements
from pulseprop.scenario.schema_pulse import PulseTable

__all__ = ["Expected", "GridTable", "PropagationTable", "ScenarioTable"]

Expected = tuple[float, float] | str | bool


class PropagationTable(Table):
    """[propagation]."""

    nonlinear: bool = False
    method: Literal["auto", "exact", "split-step"] = "auto"
    form: Literal["envelope", "field"] = "envelope"
    local_error: Annotated[float, Field(gt=0, lt=1)] = 1e-8

    @model_validator(mode="after")
    def _linear(self) -> PropagationTable:
        if self.nonlinear:
            raise complain(
                "nonlinear propagation is not part of this release",
                at="nonlinear",
                value=True,
                allowed="false",
                remedy="Leave it out: the path is then taken as linear, and n2 gives the B-integral only",
            )
        return self


class GridTable(Table):
    """[grid]. span: s; points: even; memory: bytes. What is not given sizes itself."""

    span: Annotated[float, measured("time", above=0)] | None = None
    points: Annotated[int, Field(ge=16, le=1 << 32, multiple_of=2)] | None = None
    memory: Annotated[float, measured("memory", above=0)] | None = None
    beyond_range: Literal["refuse", "causal"] = "refuse"


def _expected(value: Any) -> Expected:
    if isinstance(value, str | bool):
        return value
    if (
        isinstance(value, list)
        and len(value) == 2
        and all(_finite(number) for number in value)
        and value[1] >= 0
    ):
        return float(value[0]), float(value[1])
    raise complain(
        "this is no expectation", value=value, allowed="[value, tolerance], a text, or true or false"
    )


def _finite(value: Any) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool) and math.isfinite(value)


class ScenarioTable(Table):
    """The file. expect: key of the answer, such as "pulse_out.fwhm_fs", to (value, tolerance), a text or a
    truth value."""

    title: str = ""
    question: str = ""
    answer: str = ""
    note: str = ""
    laboratory: str = ""
    pulse: PulseTable
    path: list[Element] = Field(default_factory=list)
    medium: dict[Name, MediumTable] = Field(default_factory=dict)
    propagation: PropagationTable = Field(default_factory=PropagationTable)
    grid: GridTable = Field(default_factory=GridTable)
    expect: dict[Name, Annotated[Expected, PlainValidator(_expected)]] = Field(default_factory=dict)
    compensate: CompensateTable | None = None
    sweep: list[dict[str, Any]] = Field(default_factory=list)
    study: dict[str, Any] = Field(default_factory=dict)

    @model_validator(mode="after")
    def _names_are_unique(self) -> ScenarioTable:
        seen: set[str] = set()
        for element in all_elements(self.path):
            if element.place is not None:
                raise complain("a place belongs to [[compensate.with]]", at="path", value=element.place)
            if element.name in seen:
                raise complain(
                    "two elements have the same name", at="path", value=element.name, allowed="unique names"
                )
            seen.update([element.name] if element.name else [])
        return self
