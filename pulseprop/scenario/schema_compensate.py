"""[compensate]: the compensators at hand, and what is wanted of the pulse."""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import Field, model_validator

from pulseprop.errors import InputError
from pulseprop.scenario.fields import Table, complain, measured
from pulseprop.scenario.schema_path import Element
from pulseprop.units import quantity

__all__ = ["CompensateTable"]

GOAL_KINDS = {
    "peak power": ("fraction", "a peak ratio such as 0.95"),
    "two-photon": ("fraction", "a ratio such as 0.9"),
    "duration": ("time", 'a time such as "12 fs"'),
    "flat phase": ("angle", 'an rms phase such as "0.1 rad"'),
    "contrast": ("fraction", "a share of the energy outside the window such as 0.01"),
}
"""What the target of a goal is, and an example."""


class CompensateTable(Table):
    """with_: elements that may be added; their `place` says where. goal: what is wanted most; target: in its
    terms, SI.

    transmission_weight: 0 asks for quality alone, 1 counts what gets through in full. size_weight: what a
    metre of bench costs, 1/m. window: s, for the goal "contrast". best: how many designs that differ in kind.
    """

    with_: Annotated[list[Element], Field(alias="with", default_factory=list)]
    goal: Literal["peak power", "duration", "flat phase", "two-photon", "contrast"] = "peak power"
    target: Any = None
    transmission_weight: Annotated[float, Field(ge=0)] = 0.0
    size_weight: Annotated[float, Field(ge=0)] = 0.0
    window: Annotated[float, measured("time", above=0)] | None = None
    best: Annotated[int, Field(ge=1, le=50)] = 3
    seed: Annotated[int, Field(ge=0)] = 1

    @model_validator(mode="after")
    def _fits(self) -> CompensateTable:
        if self.goal == "contrast" and self.window is None:
            raise complain('the goal "contrast" needs a window', at="goal", remedy='Add window = "100 fs"')
        if self.window is not None and self.goal != "contrast":
            raise complain('a window belongs to the goal "contrast"', at="window")
        if self.target is not None:
            self._check_target()
        seen: set[str] = set()
        for element in self.with_:
            if element.name in seen:
                raise complain("two compensators have the same name", at="with", value=element.name)
            seen.update([element.name] if element.name else [])
        return self

    def _check_target(self) -> None:
        kind, example = GOAL_KINDS[self.goal]
        try:
            right = quantity(self.target, kind) > 0
        except InputError:
            right = False
        if not right:
            raise complain(
                f'this is no target of the goal "{self.goal}"',
                at="target",
                value=self.target,
                allowed=f"{example}, above 0",
            )

    @property
    def target_si(self) -> float | None:
        """The target in SI units: a ratio, s, rad or a share."""
        return None if self.target is None else quantity(self.target, GOAL_KINDS[self.goal][0])
