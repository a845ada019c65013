"""The absorption index k, with its uncertainty, from whatever absorption a table prints."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.material.absorption_quantities import internal_transmittance
from pulseprop.vetting.ceiling import at_ceiling
from pulseprop.vetting.faces import surface_reflectance
from pulseprop.vetting.request import Request
from pulseprop.vetting.table import Column, Quantity, SentTable
from pulseprop.vetting.uncertainty import column_uncertainty

__all__ = [
    "ABSORPTIONS",
    "AbsorptionRows",
    "absorption_column",
    "absorption_rows",
    "has_constant_index",
]

Real = NDArray[np.float64]

ABSORPTIONS: tuple[Quantity, ...] = (
    "k",
    "alpha",
    "napierian",
    "absorbance",
    "internal_transmittance",
    "transmittance",
)
"""In the order in which they are preferred where a table has several."""
TRANSMITTANCES: tuple[Quantity, ...] = ("internal_transmittance", "transmittance")
NEED_THICKNESS = ("napierian", "absorbance", *TRANSMITTANCES)

MANY = 5
"""Rows from which on an index that is the same in all of them says something."""


@dataclass(frozen=True, kw_only=True, eq=False)
class AbsorptionRows:
    """k and error, (R,), NaN where a cell is empty; least: where k is a lower limit only."""

    k: Real
    error: Real
    least: NDArray[np.bool_]


def absorption_column(table: SentTable) -> Column | None:
    """The column that k is taken from."""
    return next((known for name in ABSORPTIONS if (known := table.column(name))), None)


def has_constant_index(table: SentTable) -> bool:
    """Whether the index is one number in all rows, to its printed digits."""
    column = table.column("n")
    if column is None or len(column.values) < MANY:
        return False
    return bool(np.nanmax(column.values) - np.nanmin(column.values) <= 2 * np.max(column.half_unit))


def absorption_rows(table: SentTable, column: Column, request: Request) -> AbsorptionRows | str:
    """k of each row, or the reason why there is none.

    Transmittances are turned as intervals: their digits, not those of k, say how well k is known.
    """
    if column.quantity in NEED_THICKNESS and not table.thickness:
        return f"the thickness of the sample is not known, so {column.quantity} does not give k"
    reflectance: Real | float = 0.0
    if column.quantity == "transmittance":
        found = surface_reflectance(table, request)
        if found is None:
            return "the loss at both faces is not known without the index, so transmittance does not give k"
        reflectance = found
    error = column_uncertainty(table, column, request)
    limited = at_ceiling(column, request).rows
    if column.quantity in TRANSMITTANCES:
        rows = _from_transmittance(column, error, limited, reflectance)
    else:
        rows = AbsorptionRows(k=column.values, error=error, least=limited)
    per_length = _alpha_per_value(column.quantity, table.thickness) * SPEED_OF_LIGHT / (2 * table.omega)
    scale = 1.0 if column.quantity == "k" else per_length
    k, error = rows.k * scale, rows.error * scale
    stated = request.uncertainty.get("k")
    if stated is not None and column.quantity != "k":
        said = stated.absolute + stated.relative * np.abs(k)
        error = np.where(said < error, said + error, said)
    return AbsorptionRows(k=np.asarray(k), error=np.asarray(error), least=rows.least)


def _alpha_per_value(quantity: Quantity, thickness: float | None) -> float:
    """alpha (1/m) of one unit of the quantity; transmittances stand here as their natural logarithm."""
    if quantity in ("k", "alpha") or thickness is None:
        return 1.0
    return (float(np.log(10)) if quantity == "absorbance" else 1.0) / thickness


def _from_transmittance(
    column: Column, error: Real, limited: NDArray[np.bool_], reflectance: Real | float
) -> AbsorptionRows:
    """-ln of the internal transmittance: middle and half width of what value +- error allows.

    Where value - error is not above 0 there is no highest value: the row is a lower limit.
    """
    value = np.maximum(column.values, error / 2)
    least = limited | (column.values - error <= 0)
    shown = [np.maximum(value - error, error / 4), column.values + error, value]
    high, low, middle = (-np.log(_inside(part, reflectance)) for part in shown)
    k = np.where(least, middle, (low + high) / 2)
    width = np.where(least, middle - low, (high - low) / 2)
    return AbsorptionRows(k=k, error=width, least=least)


def _inside(transmittance: Real, reflectance: Real | float) -> Real:
    return internal_transmittance(transmittance, np.broadcast_to(reflectance, transmittance.shape))
