"""From a table as it was sent to the numbers that the test for a passive causal material takes."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_data import FEWEST_OF_K, Knowledge, PassiveData
from pulseprop.vetting.absorption_rows import AbsorptionRows, absorption_column, absorption_rows
from pulseprop.vetting.request import Request
from pulseprop.vetting.table import SentTable
from pulseprop.vetting.uncertainty import column_uncertainty, is_stated

__all__ = ["Numbers", "Repeat", "numbers_of"]

Real = NDArray[np.float64]
Rows = NDArray[np.int64]

FEWEST = 3
"""Rows of the index below which there is nothing to compare; anchors count."""
SAME_PLACE = 1e-9
"""Relative distance within which two wavelengths are one."""
ANCHOR = -1
"""Stands for a row that is not in the table."""


@dataclass(frozen=True, kw_only=True)
class Repeat:
    """Two rows of the table (indices) at one wavelength that differ by `factor` times their uncertainties.

    half: of their difference, SI: with a smaller error of both they cannot be of one value.
    """

    rows: tuple[int, int]
    quantity: str
    factor: float
    half: float


@dataclass(frozen=True, kw_only=True, eq=False)
class Numbers:
    """data: None where causality says nothing, with the reason.

    index_rows, k_rows: index into the table's rows of each row of the data (the first of those at one
    wavelength; ANCHOR for an anchor). stated: whether every uncertainty was. repeat: the two rows at one
    wavelength that differ most, None where none does.
    """

    data: PassiveData | None
    reason: str
    index_rows: Rows
    k_rows: Rows
    stated: bool
    repeat: Repeat | None = None


@dataclass(frozen=True, kw_only=True, eq=False)
class _Column:
    """Values over ascending frequency."""

    omega: Real
    values: Real
    error: Real
    rows: Rows
    repeat: Repeat | None = None
    least: NDArray[np.bool_] | None = None


def numbers_of(table: SentTable, request: Request) -> Numbers:
    """Rows in ascending order of frequency, those at one wavelength as their mean."""
    column, absorbing = table.column("n"), absorption_column(table)
    stated = column is None or is_stated(column, request)
    k: AbsorptionRows | str | None = None
    if absorbing is not None:
        k = absorption_rows(table, absorbing, request)
        stated &= is_stated(absorbing, request) or "k" in request.uncertainty
    index = _index_rows(table, request)
    reason = _reason(index, k, has_index=column is not None)
    if reason:
        return Numbers(data=None, reason=reason, index_rows=_none(), k_rows=_none(), stated=stated)
    return _assembled(table, request, index, k if isinstance(k, AbsorptionRows) else None, stated)


def _reason(index: _Column, k: AbsorptionRows | str | None, *, has_index: bool) -> str:
    if isinstance(k, str):
        return k
    if k is not None and np.sum(np.isfinite(k.k)) < FEWEST_OF_K:
        return f"fewer than {FEWEST_OF_K} rows give an absorption"
    if k is None and len(index.omega) < FEWEST:
        return f"fewer than {FEWEST} rows give an index"
    if len(index.omega) == 0:
        return "absorption without an index says nothing against causality: some index goes with any of it"
    return ""


def _index_rows(table: SentTable, request: Request) -> _Column:
    """Rows of the index, and anchors. Of an anchor and a row at one wavelength that agree, the one known
    better stands; two that do not agree are told as a repeat.
    """
    column = table.column("n")
    omega, values, error = np.zeros(0), np.zeros(0), np.zeros(0)
    if column is not None:
        omega, values = table.omega, column.values
        error = column_uncertainty(table, column, request)
    rows = np.arange(len(omega))
    for anchor in request.anchors:
        place, keep = anchor.omega, np.ones(len(omega), dtype=bool)
        same = np.abs(omega - place) <= SAME_PLACE * place
        if np.any(same):
            place = float(omega[same][0])
            agree = same & (np.abs(values - anchor.index) <= error + anchor.error)
            if np.any(agree & (error <= anchor.error)):
                continue
            keep = ~agree
        omega, values = np.append(omega[keep], place), np.append(values[keep], anchor.index)
        error, rows = np.append(error[keep], anchor.error), np.append(rows[keep], ANCHOR)
    return _merged("n", _Column(omega=omega, values=values, error=error, rows=rows))


def _assembled(
    table: SentTable, request: Request, index: _Column, k: AbsorptionRows | None, stated: bool
) -> Numbers:
    knowledge = Knowledge(transparent=request.transparent, strength=request.strength)
    repeats = [index.repeat]
    data = PassiveData(omega=index.omega, index=index.values, index_error=index.error, knowledge=knowledge)
    k_rows = _none()
    if k is not None:
        rows = np.arange(len(table.omega))
        found = _merged("k", _Column(omega=table.omega, values=k.k, error=k.error, rows=rows, least=k.least))
        repeats.append(found.repeat)
        k_rows = found.rows
        data = PassiveData(
            omega=index.omega,
            index=index.values,
            index_error=index.error,
            k_omega=found.omega,
            k=found.values,
            k_error=found.error,
            least=found.least if found.least is not None and found.least.any() else None,
            knowledge=knowledge,
        )
    worst = max((repeat for repeat in repeats if repeat), key=lambda repeat: repeat.factor, default=None)
    return Numbers(data=data, reason="", index_rows=index.rows, k_rows=k_rows, stated=stated, repeat=worst)


def _merged(quantity: str, column: _Column) -> _Column:
    """Finite rows in order, those at one frequency as their mean, with an uncertainty that covers them "
    "all."""
    keep = np.flatnonzero(np.isfinite(column.values) & np.isfinite(column.error) & (column.error > 0))
    order = keep[np.argsort(column.omega[keep], kind="stable")]
    omega, first, number = np.unique(column.omega[order], return_index=True, return_inverse=True)
    count = np.bincount(number, minlength=len(omega))
    values, error = (
        np.bincount(number, weights=part[order], minlength=len(omega)) / np.maximum(count, 1)
        for part in (column.values, column.error)
    )
    if len(omega) < len(order):
        error += np.array([np.ptp(column.values[order][number == place]) / 2 for place in range(len(omega))])
    least = None
    if column.least is not None:
        least = np.bincount(number, weights=column.least[order], minlength=len(omega)) > 0
    return _Column(
        omega=omega,
        values=values,
        error=error,
        rows=column.rows[order][first],
        least=least,
        repeat=_repeat(quantity, column, order, number) if np.any(count > 1) else None,
    )


def _repeat(quantity: str, column: _Column, order: Rows, number: Rows) -> Repeat | None:
    """The pair at one frequency that is farthest apart for its uncertainties."""
    worst: Repeat | None = None
    for place in np.flatnonzero(np.bincount(number) > 1):
        same = order[number == place]
        low, high = same[np.argmin(column.values[same])], same[np.argmax(column.values[same])]
        difference = column.values[high] - column.values[low]
        apart = difference / (column.error[high] + column.error[low])
        if apart > (worst.factor if worst else 0.0):
            pair = (int(column.rows[low]), int(column.rows[high]))
            worst = Repeat(rows=pair, quantity=quantity, factor=float(apart), half=float(difference / 2))
    return worst


def _none() -> Rows:
    return np.zeros(0, dtype=np.int64)
