"""What every builder of an element is handed: where the element stands, and how to get at what it names."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from pulseprop.material.medium import Medium
from pulseprop.scenario.read import Scenario
from pulseprop.scenario.schema_element import ElementTable

__all__ = ["Site", "length_words"]

SCALES = ((1.0, 1.0, "m"), (1e-4, 1e-3, "mm"), (1e-6, 1e-6, "um"), (0.0, 1e-9, "nm"))
"""From which length on, in m, a unit is used, and its size."""


@dataclass(frozen=True, kw_only=True)
class Site:
    """number: of the element in the path, from 1. centre: of the pulse, rad/s. beam_radius: of the pulse, m,
    where it is stated. medium: finds a medium by its name, its complaints placed.
    """

    scenario: Scenario
    number: int
    centre: float
    beam_radius: float | None
    medium: Callable[[str], Medium]

    def name_of(self, table: ElementTable, otherwise: str) -> str:
        """The element's own name, or that word and its number in the path."""
        return table.name or f"{otherwise} {self.number}"


def length_words(metres: float) -> str:
    """A length of 0 or more with four digits, in the unit people would use."""
    size, unit = next((size, unit) for least, size, unit in SCALES if metres >= least)
    return f"{metres / size:.4g} {unit}"
