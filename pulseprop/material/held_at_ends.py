"""A table used as printed, on an axis that is longer than its rows.

A grid reaches beyond the pulse's spectrum, a table as printed does not. Off its rows, where the range check
lets no more than a millionth of the pulse's energy lie, the end values are held; this is no causal model.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from pulseprop.material.composition import IndexAddition
from pulseprop.material.response import Band
from pulseprop.numerics.series import Numbers, Series

__all__ = ["HeldAtEnds"]

INSIDE = 1e-13


@dataclass(frozen=True)
class HeldAtEnds:
    """`table` inside its band; the values of its ends outside, with no slope."""

    table: IndexAddition

    @property
    def band(self) -> Band:
        """The rows."""
        return self.table.band

    def refraction_series(self, omega: Numbers, count: int) -> Series:
        """As `IndexAddition.refraction_series`, at real omega."""
        size = np.abs(np.real(omega))
        low, high = self.band.low * (1 + INSIDE), self.band.high * (1 - INSIDE)
        series = self.table.refraction_series(np.clip(size, low, high), count)
        outside = (size < low) | (size > high)
        series[1:, outside] = 0.0
        return series
