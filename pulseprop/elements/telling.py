"""What some elements tell beside their orders."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Protocol, runtime_checkable

import numpy as np
from numpy.typing import NDArray

__all__ = ["NOTICEABLE", "Leading", "Light", "Telling"]

Real = NDArray[np.float64]

NOTICEABLE = 0.1
"""Of the pulse's duration: a difference of arrival from here on is warned of (common practice, no source)."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Light:
    """The light that meets an element: power per frequency, any scale, over omega (rad/s), both (K,), and its
    duration at the transform limit, s."""

    omega: Real
    power: Real
    duration: float

    def share(self, where: NDArray[np.bool_]) -> float:
        """Share of the energy at frequencies for which `where`, (K,), is true."""
        return float(self.power[where].sum() / self.power.sum())


@runtime_checkable
class Leading(Protocol):
    """An element that is no matter and may answer before its group delay: lead, by how many s at most."""

    @property
    def lead(self) -> float: ...


@runtime_checkable
class Telling(Protocol):
    """An element with more to tell than its orders.

    figures: numbers by key, the unit in the key, at the pulse's centre; None where there is no answer.
    notes: what to know of them, a sentence each.
    """

    @property
    def name(self) -> str: ...
    @property
    def figures(self) -> Mapping[str, float | None]: ...
    @property
    def notes(self) -> tuple[str, ...]: ...

    def warnings(self, light: Light) -> tuple[str, ...]:
        """What it does to this light that its orders do not say: whole sentences."""
        ...
