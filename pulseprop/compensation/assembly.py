"""A path with its discrete choices made: exponent and derivatives over all continuous settings at once."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.models import Model
from pulseprop.compensation.samples import Samples
from pulseprop.elements.element import Element

__all__ = ["Assembly"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


@dataclass(kw_only=True, eq=False)
class Assembly:
    """background: exponent (n,) of everything that never changes. models: one for each part that is used.

    Settings are one vector u (k,) of shares of the ranges, each from 0 to 1.
    """

    samples: Samples
    background: Complex
    models: tuple[Model, ...]
    low: Real = field(init=False)
    high: Real = field(init=False)

    def __post_init__(self) -> None:
        self.low = np.concatenate([np.zeros(0), *(model.low for model in self.models)])
        self.high = np.concatenate([np.zeros(0), *(model.high for model in self.models)])

    @property
    def count(self) -> int:
        """How many continuous settings there are."""
        return self.low.size

    @property
    def curved(self) -> tuple[int, ...]:
        """Indices in u of settings that do not enter as straight lines."""
        return tuple(part.start + index for model, part in self._parts() for index in model.curved)

    @property
    def edged(self) -> bool:
        """Whether edges cut more or less with the settings."""
        return any(model.edged for model in self.models)

    def values(self, u: Real) -> list[Real]:
        """SI values for each model, never outside their ranges."""
        inside = np.clip(self.low + u * (self.high - self.low), self.low, self.high)
        return [inside[part] for _, part in self._parts()]

    def exponent(self, u: Real) -> Complex:
        """ln(transfer) of the whole path, (n,)."""
        total = self.background.copy()
        for model, values in zip(self.models, self.values(u), strict=True):
            total += model.exponent(values)
        return total

    def jacobian(self, u: Real) -> Complex:
        """Its derivatives by u, (n, k)."""
        columns = [model.jacobian(values) for model, values in zip(self.models, self.values(u), strict=True)]
        empty = np.zeros((self.background.size, 0), dtype=complex)
        return np.asarray(np.concatenate([empty, *columns], axis=1) * (self.high - self.low), dtype=complex)

    def size(self, u: Real) -> float:
        """Footprint in m of the parts that are used."""
        return sum(model.size(values) for model, values in zip(self.models, self.values(u), strict=True))

    def elements(self, u: Real) -> dict[str, tuple[Element, ...]]:
        """The elements of each part that is used, by the part's name."""
        return {
            model.part.name: model.elements(values)
            for model, values in zip(self.models, self.values(u), strict=True)
        }

    def _parts(self) -> Iterator[tuple[Model, slice]]:
        start = 0
        for model in self.models:
            stop = start + model.low.size
            yield model, slice(start, stop)
            start = stop
