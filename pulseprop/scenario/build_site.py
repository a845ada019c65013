"""What every builder of an element is handed: where the element stands, and how to get at what it names."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

from pulseprop.errors import PulsepropError
from pulseprop.material.medium import Medium
from pulseprop.scenario.places import Keys
from pulseprop.scenario.read import Scenario
from pulseprop.scenario.schema_element import ElementTable

__all__ = ["Site", "length_words"]

SCALES = ((1.0, 1.0, "m"), (1e-4, 1e-3, "mm"), (1e-6, 1e-6, "um"), (0.0, 1e-9, "nm"))
"""From which length on, in m, a unit is used, and its size."""


@dataclass(frozen=True, kw_only=True)
class Site:
    """keys: of the element in the scenario, list entries from 0. number: of the element in the path, from 1;
    "3.2" for the second one inside the third. centre: of the pulse, rad/s. beam_radius: of the pulse, m,
    where it is stated. find: a medium by its name.
    """

    scenario: Scenario
    keys: Keys
    number: str
    centre: float
    beam_radius: float | None
    find: Callable[[str], Medium]

    def medium(self, name: str, *keys: str | int) -> Medium:
        """The medium that the element names at these keys of its own; its complaints are placed there."""
        try:
            return self.find(name)
        except PulsepropError as error:
            raise self.blamed(error, *(keys or ("medium",))) from None

    def blamed(self, error: PulsepropError, *keys: str | int) -> PulsepropError:
        """The error with the place of the element, or of these keys of it."""
        return self.scenario.blamed(error, *self.keys, *keys)

    def inner(self, key: str, index: int) -> Site:
        """Where entry `index` (from 0) of the element's own list `key` stands."""
        return replace(self, keys=(*self.keys, key, index), number=f"{self.number}.{index + 1}")

    def name_of(self, table: ElementTable, otherwise: str) -> str:
        """The element's own name, or that word and its number in the path."""
        return table.name or f"{otherwise} {self.number}"


def length_words(metres: float) -> str:
    """A length of 0 or more with four digits, in the unit people would use."""
    size, unit = next((size, unit) for least, size, unit in SCALES if metres >= least)
    return f"{metres / size:.4g} {unit}"
