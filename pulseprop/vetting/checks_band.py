"""Bands: an index that falls where nothing absorbs, lines narrower than the instrument, rows at its
ceiling.
"""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from pulseprop.vetting.absorption_rows import (
    AbsorptionRows,
    absorption_column,
    absorption_rows,
    has_constant_index,
)
from pulseprop.vetting.case import Case
from pulseprop.vetting.ceiling import at_ceiling
from pulseprop.vetting.peaks import peaks
from pulseprop.vetting.result import Finding

__all__ = ["ceiling_rows", "coarse_features", "constant_index", "falling_index", "narrow_lines"]

Real = NDArray[np.float64]

SEEN = 1.2
"""Width in slit widths up to which a line may be the instrument's: a true width of two thirds of the slit
shows so (widths add as squares)."""


def falling_index(case: Case) -> Iterator[Finding]:
    """In a transparent band chi and n rise with frequency: d chi/d omega is a sum of positive terms."""
    data = case.numbers.data
    if data is None or len(data.omega) < 2:
        return
    clear = _clear_steps(data.omega, data.k_omega, data.k, data.k_error)
    fall = -np.diff(data.index) - (data.index_error[:-1] + data.index_error[1:])
    steps = np.flatnonzero((fall > 0) & clear)
    if not len(steps):
        return
    rows = np.unique(np.concatenate((steps, steps + 1)))
    rows = case.numbers.index_rows[rows]
    drop = float(np.max((fall + data.index_error[:-1] + data.index_error[1:])[steps]))
    share = len(steps) / max(int(np.sum(clear)), 1)
    yield Finding(
        code="falling-index",
        severity="error",
        text=f"The index falls towards higher frequency by up to {drop:.2g} a row, in {100 * share:.0f} % "
        "of the steps through the band where nothing is said to absorb; in a transparent band it can only "
        "rise. Either it absorbs there, and the absorption belongs into the table, or the numbers are wrong.",
        rows=case.lines(np.sort(rows[rows >= 0])),
    )


def constant_index(case: Case) -> Iterator[Finding]:
    """One number for the index of a material that absorbs: a filler, for the absorption bends the index."""
    if has_constant_index(case.table) and absorption_column(case.table) is not None:
        yield Finding(
            code="constant-index",
            severity="error" if case.factor is not None and case.factor > 1 else "note",
            text="The index is one number in all rows, though the sample absorbs: absorption bends the "
            "index, so this is a filler and no measurement.",
        )


def narrow_lines(case: Case) -> Iterator[Finding]:
    """Lines as narrow as the instrument's resolution show a lower peak and a larger width than they have."""
    column, resolution = absorption_column(case.table), case.request.resolution
    if column is None or resolution is None:
        return
    omega, k, rows = _in_order(case)
    for peak in peaks(omega, k):
        slit = 2 * math.pi * resolution.about(peak.omega)
        if peak.width is not None and peak.width <= SEEN * slit:
            yield Finding(
                code="narrow-line",
                severity="warning",
                text=f"The line at {_nm(peak.omega)} is {_share(peak.width / slit)} of the instrument's "
                "resolution wide: its true width is smaller and its peak higher than the table says.",
                rows=case.lines([int(rows[peak.row])]),
            )


def coarse_features(case: Case) -> Iterator[Finding]:
    """Features of k with too few rows over their width: nothing firm can be said about them."""
    if case.standing is None or not case.standing.coarse:
        return
    places = ", ".join(_nm(omega) for omega in case.standing.coarse[:5])
    yield Finding(
        code="coarse-rows",
        severity="warning",
        text=f"Fewer than five rows lie over the width of the absorption at {places}: between the rows it "
        "may have any shape, so the answer is never more than doubtful and gives no bounds of GVD there.",
    )


def ceiling_rows(case: Case) -> Iterator[Finding]:
    """Rows at the instrument's ceiling, which were used as lower limits."""
    for column in case.table.columns:
        ceiling = at_ceiling(column, case.request)
        if ceiling.rows.any():
            found = " (inferred from a run of equal highest values)" if ceiling.inferred else ""
            yield Finding(
                code="instrument-ceiling",
                severity="warning" if ceiling.inferred else "note",
                text=f"{int(ceiling.rows.sum())} rows stand at the instrument's ceiling{found}: they are "
                "lower limits of the absorption and were used as such, not as data.",
                rows=case.lines(np.flatnonzero(ceiling.rows)),
            )


def _clear_steps(omega: Real, k_omega: Real | None, k: Real | None, error: Real | None) -> NDArray[np.bool_]:
    """Between which neighbouring rows of the index nothing absorbs beyond the uncertainty, (R - 1,)."""
    if k_omega is None or k is None or error is None:
        return np.ones(len(omega) - 1, dtype=bool)
    absorbs = k_omega[k > error]
    within = (k_omega[0] <= omega) & (omega <= k_omega[-1])
    first = np.searchsorted(absorbs, omega[:-1])
    last = np.searchsorted(absorbs, omega[1:], side="right")
    return np.asarray((first == last) & within[:-1] & within[1:])


def _in_order(case: Case) -> tuple[Real, Real, NDArray[np.int64]]:
    """omega ascending, k (or what stands for it where it cannot be had), and the rows of the table."""
    table = case.table
    column = absorption_column(table)
    assert column is not None
    found = absorption_rows(table, column, case.request)
    if isinstance(found, AbsorptionRows):
        k = found.k
    elif column.quantity.endswith("transmittance"):
        k = -np.log(np.maximum(column.values, column.half_unit)) / table.omega
    else:
        k = column.values / table.omega
    order = np.argsort(table.omega, kind="stable")
    order = order[np.isfinite(k[order])]
    return table.omega[order], k[order], order


def _nm(omega: float) -> str:
    from pulseprop.constants import TWO_PI_C

    return f"{TWO_PI_C / omega * 1e9:.6g} nm"


def _share(ratio: float) -> str:
    return f"{ratio:.2g} times" if ratio >= 1 else f"{100 * ratio:.0f} %"
