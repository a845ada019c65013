"""What the judge asks of causality, in the words of vetting."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal, Protocol

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_data import PassiveData
from pulseprop.vetting.result import Bounds

__all__ = ["Causality", "Part", "Standing", "Unresolved"]

Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True)
class Part:
    """A row of the data (index into omega or k_omega) and its weight in the proof."""

    quantity: Literal["n", "k"]
    row: int
    weight: float


@dataclass(frozen=True, kw_only=True)
class Unresolved:
    """A line too narrow for the rows, at omega (rad/s), that would explain the numbers; spacing of the rows
    that would settle it, rad/s."""

    omega: float
    spacing: float


@dataclass(frozen=True, kw_only=True, eq=False)
class Standing:
    """factor: of the data's uncertainties. gap: certified, relative. conflict: empty where factor is at most
    1.

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


class Causality(Protocol):
    """The passive causal tests: `pulseprop.causality`, or a stand-in."""

    def standing(self, data: PassiveData, *, thorough: bool) -> Standing:
        """The least factor; thorough: with proof, and with the rule for unresolved lines.

        Raises NumericalLimit.
        """
        ...

    def bounds(self, data: PassiveData, omega: Real) -> Sequence[Bounds]:
        """Guaranteed values at each omega (rad/s). Raises NumericalLimit."""
        ...
