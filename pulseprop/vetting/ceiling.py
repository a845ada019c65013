"""Rows at the instrument's ceiling: lower limits of the absorption, never data."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.vetting.request import Request
from pulseprop.vetting.table import Column

__all__ = ["Ceiling", "at_ceiling"]

Flags = NDArray[np.bool_]

PLATEAU = 3
"""So many rows in a run at one highest absorption are a plateau."""
SHOWS_FROM = 2.0
"""Absorbance from which on a plateau is the instrument's and not the sample's (stray light bends spectra from
there on; common practice, no source)."""

TRANSMITTANCES = ("internal_transmittance", "transmittance")
OF_ABSORPTION = ("absorbance", "napierian", "alpha", "k")
SMALLEST = 1e-300


@dataclass(frozen=True, eq=False)
class Ceiling:
    """rows: where the column is a lower limit, (R,). inferred: from a plateau and not stated."""

    rows: Flags
    inferred: bool


def at_ceiling(column: Column, request: Request) -> Ceiling:
    """Rows within half a printed unit of the stated ceiling or beyond it, or on a plateau at the top."""
    none = Ceiling(np.zeros(len(column.values), dtype=bool), inferred=False)
    if column.quantity in TRANSMITTANCES:
        absorbance = -np.log10(np.maximum(column.values, SMALLEST))
        if request.ceiling is not None:
            rows = column.values - column.half_unit <= 10.0**-request.ceiling
            return Ceiling(np.asarray(rows), inferred=False)
    elif column.quantity in OF_ABSORPTION:
        if request.ceiling is not None:
            return Ceiling(np.asarray(column.values + column.half_unit >= request.ceiling), inferred=False)
        absorbance = column.values / (np.log(10) if column.quantity == "napierian" else 1.0)
    else:
        return none
    if column.quantity in ("alpha", "k"):
        return none
    plateau = _plateau(column.values, absorbance)
    return Ceiling(plateau, inferred=bool(plateau.any()))


def _plateau(values: NDArray[np.float64], absorbance: NDArray[np.float64]) -> Flags:
    """Rows of the highest absorbance, where PLATEAU of them follow each other exactly."""
    none = np.zeros(len(values), dtype=bool)
    if len(values) < PLATEAU or not np.nanmax(absorbance, initial=0.0) >= SHOWS_FROM:
        return none
    top = values == values[int(np.nanargmax(absorbance))]
    run = np.convolve(top, np.ones(PLATEAU, dtype=int), mode="valid")
    return top if bool(np.any(run >= PLATEAU)) else none
