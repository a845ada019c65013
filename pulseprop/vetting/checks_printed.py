"""Printed group index, GVD, TOD and Abbe number against what the printed index guarantees."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.case import Case
from pulseprop.vetting.guaranteed import guaranteed, guaranteed_abbe
from pulseprop.vetting.heading_units import is_dispersion_parameter
from pulseprop.vetting.requirement_answer import FS2_PER_MM, FS3_PER_MM
from pulseprop.vetting.result import Bounds, Finding
from pulseprop.vetting.table import Column
from pulseprop.vetting.uncertainty import column_uncertainty

__all__ = ["abbe_number", "printed_orders"]

Real = NDArray[np.float64]
Interval = tuple[float, float]

PLACES = 3
"""Rows at which a printed column is compared: each costs several linear programmes."""
SUSPECTS = 1
"""Rows that are compared because they stand out of their column: one slip is one wrong row."""
END_ROWS = 2
"""Rows at each end where the index guarantees nothing about its derivatives."""

ORDERS: dict[str, tuple[Callable[[Bounds], Interval | None], float, str]] = {
    "group_index": (lambda bounds: bounds.group_index, 1.0, ""),
    "gvd": (lambda bounds: bounds.gvd_fs2_per_mm, FS2_PER_MM, " fs^2/mm"),
    "tod": (lambda bounds: bounds.tod_fs3_per_mm, FS3_PER_MM, " fs^3/mm"),
}
"""Where the bounds of a column stand, their SI unit, and how it is written."""

PS_PER_NM_KM = 1e-6
"""s/m^2."""

LENGTHS = (
    ("the unit is per cm and not per mm", 0.1),
    ("the unit is per mm and not per cm", 10.0),
    ("the unit is per m and not per mm", 1e-3),
    ("the unit is per mm and not per m", 1e3),
)

V_D = re.compile(r"\b(?:V_?d|[Aa]bbe(?: number)?)\s*(?:\(.*?\))?\s*[=:]?\s*(\d+(?:[.,]\d+)?)")


@dataclass(frozen=True, kw_only=True, eq=False)
class _Compared:
    """Printed values, SI, their uncertainty and the guaranteed interval at some rows."""

    rows: NDArray[np.int64]
    omega: Real
    values: Real
    error: Real
    low: Real
    high: Real

    def fits(self, values: Real, error: Real) -> bool:
        """Whether all values lie within the bounds, uncertainty allowed for."""
        return bool(np.all((values + error >= self.low) & (values - error <= self.high)))


def printed_orders(case: Case) -> Iterator[Finding]:
    """Columns of group index, GVD and TOD that do not follow from the printed index, and how they may."""
    for column in case.table.columns:
        if column.quantity in ORDERS:
            compared = _compared(case, column)
            if compared is not None and not compared.fits(compared.values, compared.error):
                yield _finding(case, column, compared)


def abbe_number(case: Case) -> Iterator[Finding]:
    """An Abbe number in the title or comments against the printed index."""
    found = V_D.search(" ".join((case.table.title, *case.table.comments)))
    if found is None or case.standing is None:
        return
    printed = float(found[1].replace(",", "."))
    places = len(re.split("[.,]", found[1])[1]) if re.search("[.,]", found[1]) else 0
    between, half = guaranteed_abbe(case), 0.5 * 10.0**-places
    if between is None or between[0] - half <= printed <= between[1] + half:
        return
    yield Finding(
        code="abbe-number",
        severity="error",
        text=f"The printed Abbe number, {printed:g}, does not follow from the printed index, which "
        f"guarantees {between[0]:.2f} to {between[1]:.2f}.",
    )


def _compared(case: Case, column: Column) -> _Compared | None:
    """At a few rows well inside the table where the index guarantees something."""
    table = case.table
    order = np.argsort(table.omega, kind="stable")[END_ROWS:-END_ROWS]
    order = order[np.isfinite(column.values[order])]
    if case.standing is None or not len(order):
        return None
    even = np.linspace(0, len(order) - 1, PLACES).astype(int)
    rows = order[np.union1d(even, _odd_ones(table.omega[order], column.values[order]))]
    read, unit, _ = ORDERS[column.quantity]
    known = [
        (row, interval)
        for row, bounds in zip(rows, guaranteed(case, table.omega[rows]), strict=True)
        if (interval := read(bounds)) is not None
    ]
    if not known:
        return None
    rows = np.array([row for row, _ in known])
    low, high = (np.array([interval[end] for _, interval in known]) * unit for end in (0, 1))
    error = column_uncertainty(table, column, case.request)
    return _Compared(
        rows=rows,
        omega=table.omega[rows],
        values=column.values[rows],
        error=error[rows],
        low=low,
        high=high,
    )


def _odd_ones(omega: Real, values: Real) -> NDArray[np.intp]:
    """The rows that lie farthest off the straight line between their neighbours, for their bend elsewhere."""
    if len(values) < 2 * SUSPECTS + 3:
        return np.zeros(0, dtype=np.intp)
    share = (omega[1:-1] - omega[:-2]) / (omega[2:] - omega[:-2])
    off = np.abs(values[1:-1] - values[:-2] - share * (values[2:] - values[:-2]))
    return np.argsort(off)[-SUSPECTS:] + 1


def _finding(case: Case, column: Column, compared: _Compared) -> Finding:
    outside = (compared.values + compared.error < compared.low) | (
        compared.values - compared.error > compared.high
    )
    worst = int(np.flatnonzero(outside)[0])
    _, unit, words = ORDERS[column.quantity]
    row = int(compared.rows[worst])
    text = (
        f"The printed {_name(column)} does not follow from the printed index: in row {case.lines([row])[0]} "
        f"({case.wavelength_nm(row):.6g} nm) {compared.values[worst] / unit:.6g}{words} is printed, and the "
        f"index guarantees {compared.low[worst] / unit:.6g} to {compared.high[worst] / unit:.6g}{words}."
    )
    repair = _repair(column, case.table.columns, compared)
    return Finding(
        code=f"printed-{column.quantity.replace('_', '-')}",
        severity="error",
        text=text + (f" It does where {repair}." if repair else ""),
        rows=case.lines(compared.rows[outside]),
        repair=repair,
    )


def _repair(column: Column, columns: Sequence[Column], compared: _Compared) -> str | None:
    """The one slip that brings all compared values inside the bounds; None where none of them does."""
    for words, meant in _slips(column, compared):
        with np.errstate(divide="ignore", invalid="ignore"):
            error = compared.error * np.abs(meant / compared.values)
        if np.all(np.isfinite(error)) and compared.fits(meant, error):
            return words
    for other in columns:
        if other is not column and other.quantity in ("n", *ORDERS):
            printed = other.values[compared.rows] / _unit(other)
            if np.allclose(compared.values / _unit(column), printed, rtol=1e-6):
                return f"other numbers stand there: these are those of the {_name(other)} column"
    return None


def _slips(column: Column, compared: _Compared) -> Iterator[tuple[str, Real]]:
    """In words, and the values as they would then be."""
    values = compared.values
    if column.quantity == "group_index":
        yield "it is read as group velocity over c", 1 / values
        return
    yield "the sign is turned round", -values
    for words, factor in LENGTHS:
        yield words, values * factor
    if is_dispersion_parameter(column.unit):
        of_printed = -values / PS_PER_NM_KM * compared.omega**2 / TWO_PI_C
        yield "it is read as GVD in fs^2/mm", of_printed * FS2_PER_MM
    elif column.quantity == "gvd":
        of_printed = values / FS2_PER_MM * PS_PER_NM_KM
        dispersion = -of_printed * TWO_PI_C / compared.omega**2
        yield "it is read as D in ps/(nm km)", dispersion
        yield "it is read as D in ps/(nm km) and the sign is turned round", -dispersion


def _name(column: Column) -> str:
    if is_dispersion_parameter(column.unit):
        return "GVD (turned from the printed D)"
    return {"group_index": "group index", "gvd": "GVD", "tod": "TOD"}.get(column.quantity, column.quantity)


def _unit(column: Column) -> float:
    return ORDERS[column.quantity][1] if column.quantity in ORDERS else 1.0
