"""What the judge asks of causality, in the words of vetting."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal, Protocol

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.conflict import Conflict
from pulseprop.causality.passive_data import PassiveData
from pulseprop.vetting.result import Bounds

__all__ = ["Causality", "FewRows", "Part", "Standing", "Unresolved"]

Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True)
class Part:
    """A row of the data (index into omega or k_omega) and its weight in the proof."""

    quantity: Literal["n", "k"]
    row: int
    weight: float


@dataclass(frozen=True, kw_only=True)
class Unresolved:
    """Lines too narrow for the rows that would explain the numbers, in so many windows of a few gaps between
    rows. omega of the strongest and spacing of the rows that would settle it, rad/s."""

    omega: float
    spacing: float
    windows: int = 1


@dataclass(frozen=True, kw_only=True, eq=False)
class Standing:
    """factor: of the data's uncertainties. gap: certified, relative. conflict, and proof, the same in the
    words of causality: empty and None where the factor is at most 1.

    coarse: places (rad/s) of features of k with fewer than five rows over their width. index, k: of the
    material of least factor, at the data's omega and k_omega; None where there is none.
    """

    factor: float
    gap: float | None = None
    conflict: tuple[Part, ...] = ()
    unresolved: Unresolved | None = None
    coarse: tuple[float, ...] = ()
    index: Real | None = None
    k: Real | None = None
    proof: Conflict | None = None


@dataclass(frozen=True, kw_only=True, eq=False)
class FewRows:
    """One to three rows that carry the proof, the factor without them, and the data without them."""

    parts: tuple[Part, ...]
    factor: float
    data: PassiveData


class Causality(Protocol):
    """The passive causal tests: `pulseprop.vetting.passive`, or a stand-in. All raise NumericalLimit."""

    def standing(self, data: PassiveData, *, thorough: bool) -> Standing:
        """The least factor; thorough: with proof, and with the rule for unresolved lines."""
        ...

    def quick_factor(self, data: PassiveData) -> float:
        """A factor that a material attains: the least one, or a little above it."""
        ...

    def few_rows(self, data: PassiveData, standing: Standing) -> FewRows | None:
        """The fewest rows without which the factor is at most 1; None where three are not enough."""
        ...

    def bounds(self, data: PassiveData, omega: Real) -> Sequence[Bounds]:
        """Guaranteed values at each omega (rad/s)."""
        ...
