"""A column of a mirror table as a curve over frequency."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.request import Request
from pulseprop.vetting.table import Column, Quantity, SentTable
from pulseprop.vetting.uncertainty import column_uncertainty, is_stated

__all__ = ["FEMTO", "WORDS", "MirrorCurve", "curve_of"]

Real = NDArray[np.float64]

WORDS: dict[Quantity, str] = {
    "phase": "phase",
    "group_delay": "group delay",
    "gdd": "GDD",
    "mirror_tod": "TOD",
    "reflectance": "reflectance",
    "transmittance": "transmittance",
}
FEMTO: dict[Quantity, tuple[float, str]] = {
    "phase": (1.0, "rad"),
    "group_delay": (1e-15, "fs"),
    "gdd": (1e-30, "fs^2"),
    "mirror_tod": (1e-45, "fs^3"),
    "reflectance": (1e-2, "%"),
    "transmittance": (1e-2, "%"),
}
"""In which unit a quantity is told."""


EXACT = 1e-12
"""Relative error of numbers that are stated to have none: that of their arithmetic."""


@dataclass(frozen=True, kw_only=True, eq=False)
class MirrorCurve:
    """Rows in ascending order of frequency, one a frequency: omega (rad/s), values and error (SI), lines of
    the file, each (R,)."""

    quantity: Quantity
    omega: Real
    values: Real
    error: Real
    lines: NDArray[np.int64]
    stated: bool

    @property
    def nm(self) -> Real:
        """Wavelengths, nm, (R,)."""
        return np.asarray(1e9 * TWO_PI_C / self.omega)

    def at(self, omega: Real) -> MirrorCurve:
        """The rows that stand at these frequencies, which are some of its own."""
        keep = np.searchsorted(self.omega, omega)
        return MirrorCurve(
            quantity=self.quantity,
            omega=self.omega[keep],
            values=self.values[keep],
            error=self.error[keep],
            lines=self.lines[keep],
            stated=self.stated,
        )


def curve_of(table: SentTable, request: Request, quantity: Quantity) -> MirrorCurve | None:
    """The finite rows of a column; None where there is no such column, or fewer than two rows."""
    column = table.column(quantity)
    if column is None:
        return None
    error = _error(table, column, request)
    good = np.flatnonzero(np.isfinite(column.values) & np.isfinite(table.omega) & (error >= 0))
    omega, first = np.unique(table.omega[good], return_index=True)
    rows = good[first]
    if len(rows) < 2:
        return None
    return MirrorCurve(
        quantity=quantity,
        omega=omega,
        values=column.values[rows],
        error=np.maximum(error[rows], EXACT * np.max(np.abs(column.values[rows])) + np.finfo(float).tiny),
        lines=table.lines[rows],
        stated=is_stated(column, request),
    )


def _error(table: SentTable, column: Column, request: Request) -> Real:
    with np.errstate(invalid="ignore"):
        return column_uncertainty(table, column, request)
