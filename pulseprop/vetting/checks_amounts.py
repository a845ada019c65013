"""What no passive material can show whatever its index: negative absorption, more light out than in."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from pulseprop.vetting.absorption_rows import ABSORPTIONS, TRANSMITTANCES
from pulseprop.vetting.case import Case
from pulseprop.vetting.faces import surface_reflectance
from pulseprop.vetting.result import Finding
from pulseprop.vetting.table import Column
from pulseprop.vetting.uncertainty import column_uncertainty, is_stated

__all__ = ["index_not_positive", "negative_absorption", "transmittance_too_high"]

Real = NDArray[np.float64]

BASELINE = 0.02
"""Share of the largest absorption (or of full transmittance) up to which an offset is that of a baseline,
where no uncertainty is stated (common practice, no source)."""


def negative_absorption(case: Case) -> Iterator[Finding]:
    """Absorption below 0 by more than its uncertainty: the sample would amplify."""
    for quantity in ABSORPTIONS:
        column = case.table.column(quantity)
        if column is None or quantity in TRANSMITTANCES:
            continue
        below = -column.values - _uncertainty(case, column)
        rows = np.flatnonzero(below > 0)
        if len(rows):
            least = float(np.nanmin(column.values))
            gross = -least > BASELINE * float(np.nanmax(np.abs(column.values)))
            whole = len(rows) > len(column.values) / 2
            yield Finding(
                code="negative-absorption",
                severity="error" if gross or is_stated(column, case.request) else "warning",
                text=f"{_named(column)} is negative in {len(rows)} rows, down to "
                f"{least:.3g}: a passive sample cannot amplify. "
                + ("The sign is turned round, or" if whole else "The baseline or reference lies too high, or")
                + " light was gained, by luminescence for one.",
                rows=case.lines(rows),
            )


def transmittance_too_high(case: Case) -> Iterator[Finding]:
    """Transmittance above 1, or above what two faces let through, 2 n/(n^2 + 1)."""
    for quantity in TRANSMITTANCES:
        column = case.table.column(quantity)
        if column is not None:
            yield from _above(case, column)


def index_not_positive(case: Case) -> Iterator[Finding]:
    """An index below 0 by more than its uncertainty; one that is printed as 0 may be that of a metal."""
    column = case.table.column("n")
    if column is None:
        return
    below = column.values + _uncertainty(case, column) <= 0
    if np.any(below):
        yield Finding(
            code="index-not-positive",
            severity="error",
            text="The index is below 0, which no medium's is in this convention.",
            rows=case.lines(np.flatnonzero(below)),
        )


def _above(case: Case, column: Column) -> Iterator[Finding]:
    error = _uncertainty(case, column)
    rows = np.flatnonzero(column.values - error > 1)
    highest = float(np.nanmax(column.values))
    if len(rows):
        percent = highest <= 100 * (1 + BASELINE) and highest > 2
        yield Finding(
            code="percent-fraction" if percent else "transmittance-above-1",
            severity="error" if highest > 1 + BASELINE or is_stated(column, case.request) else "warning",
            text=f"{_named(column)} is above 1 in {len(rows)} rows, up to {highest:.4g}: no more can leave a "
            "passive sample than enters it" + (", so these are per cent." if percent else "."),
            rows=case.lines(rows),
            repair=f"read the {_named(column)} column as per cent" if percent else None,
        )
        return
    if column.quantity != "transmittance":
        return
    yield from _above_faces(case, column, error)


def _above_faces(case: Case, column: Column, error: Real) -> Iterator[Finding]:
    reflectance = surface_reflectance(case.table, case.request)
    if reflectance is None:
        return
    most = (1 - reflectance) / (1 + reflectance)
    rows = np.flatnonzero(column.values - error > most)
    if not len(rows):
        return
    excess = float(np.nanmax((column.values - most)[rows]))
    most_rows = len(rows) > len(column.values) / 2
    yield Finding(
        code="transmittance-above-faces",
        severity="error" if excess > BASELINE or is_stated(column, case.request) else "warning",
        text=f"The transmittance lies above what two uncoated faces of this index let through, "
        f"2n/(n^2 + 1), in {len(rows)} rows, by up to {excess:.3g}. Coated faces would explain it"
        + (", or internal transmittance was meant." if most_rows else "."),
        rows=case.lines(rows),
        repair="read the transmittance column as internal transmittance" if most_rows else None,
    )


def _uncertainty(case: Case, column: Column) -> Real:
    return column_uncertainty(case.table, column, case.request)


def _named(column: Column) -> str:
    name = column.quantity.replace("_", " ")
    return name if name == "k" else name.capitalize()
