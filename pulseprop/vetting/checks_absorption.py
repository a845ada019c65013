"""Absorption against itself: loss at the faces left in, per cent for fractions, two columns that disagree."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.absorption_rows import (
    ABSORPTIONS,
    TRANSMITTANCES,
    AbsorptionRows,
    absorption_rows,
)
from pulseprop.vetting.case import Case
from pulseprop.vetting.faces import surface_reflectance
from pulseprop.vetting.result import Finding
from pulseprop.vetting.retold import as_quantity, with_column
from pulseprop.vetting.table import Column
from pulseprop.vetting.uncertainty import column_uncertainty

__all__ = ["columns_disagree", "face_loss_left_in", "fractions_called_percent"]

Real = NDArray[np.float64]

FOLLOWS = 3
"""Rows at least that must lie on the curve of two lossless faces."""
NEAR = 0.003
"""Distance from that curve, in transmittance, up to which a spectrophotometer calls a plate clear (common
practice, no source)."""
FAINT = 0.02
"""Largest transmittance below which a whole table was probably divided by 100 once too often."""
SPREAD = 0.1
"""Share of the longest wavelength that rows must span for a missing wavelength to show."""

RATIOS = (
    (float(np.log(10)), "wrong-logarithm", "by the factor 2.302585: one of them has the other logarithm"),
    (0.1, "absorption-quantity", "by a factor of 10: one is per mm where the other is per cm"),
    (0.01, "absorption-quantity", "by a factor of 100: one is per m where the other is per cm"),
    (1e-3, "absorption-quantity", "by a factor of 1000: one is per m where the other is per mm"),
    (2.0, "absorption-quantity", "by a factor of 2: one is of the field where the other is of the intensity"),
    (4 * np.pi, "absorption-quantity", "by the factor 4 pi of alpha = 4 pi k / wavelength"),
)


def face_loss_left_in(case: Case) -> Iterator[Finding]:
    """Internal transmittance whose highest values lie on the curve of two lossless faces, 2n/(n^2 + 1)."""
    column = case.table.column("internal_transmittance")
    reflectance = surface_reflectance(case.table, case.request)
    if column is None or reflectance is None:
        return
    faces = (1 - reflectance) / (1 + reflectance)
    error = column_uncertainty(case.table, column, case.request)
    if np.any(column.values > faces + error + NEAR) or np.nanmax(reflectance) < 2 * NEAR:
        return
    clear = np.flatnonzero(np.abs(column.values - faces) <= error + NEAR)
    if len(clear) < max(FOLLOWS, len(faces) // 4):
        return
    loss = 100 * float(np.median(1 - faces[clear]))
    yield Finding(
        code="fresnel-loss",
        severity="error",
        text=f"The transmittance called internal never rises above what two uncoated faces of this index let "
        f"through, and follows it in {len(clear)} rows: the loss at the faces, {loss:.2g} %, was left in.",
        rows=case.lines(clear),
        repair="read the internal transmittance column as transmittance through both faces",
        factor_after_repair=case.factor_of(
            with_column(case.table, column, as_quantity(column, "transmittance"))
        ),
    )


def fractions_called_percent(case: Case) -> Iterator[Finding]:
    """Transmittances all so small that fractions were read as per cent."""
    for column in case.table.columns:
        if column.quantity not in TRANSMITTANCES or not column.unit.startswith("%"):
            continue
        highest = float(np.nanmax(column.values))
        if FAINT / 4 < highest <= FAINT:
            yield Finding(
                code="percent-fraction",
                severity="warning",
                text=f"No transmittance is above {100 * highest:.3g} %: as fractions the same numbers would "
                "be those of a clear sample.",
                repair=f"read the {column.quantity.replace('_', ' ')} column as fractions",
            )


def columns_disagree(case: Case) -> Iterator[Finding]:
    """Two columns of absorption that do not follow from each other, with the factor between them."""
    known = []
    for name in ABSORPTIONS:
        column = case.table.column(name)
        if column is not None:
            found = absorption_rows(case.table, column, case.request)
            if isinstance(found, AbsorptionRows):
                known.append((column, found))
    for (one, first), (other, second) in combinations(known, 2):
        apart = np.abs(first.k - second.k) > first.error + second.error
        rows = np.flatnonzero(apart & ~first.least & ~second.least)
        if len(rows):
            parts = [_Known(part.k[rows], part.error[rows]) for part in (first, second)]
            yield _disagreement(case, (one, other), rows, *parts)


@dataclass(frozen=True, eq=False)
class _Known:
    """k and its uncertainty in the rows where two columns differ."""

    k: Real
    error: Real


def _disagreement(
    case: Case, columns: tuple[Column, Column], rows: NDArray[np.int64], first: _Known, second: _Known
) -> Finding:
    """With the factor between them, where one factor explains all rows."""
    code, how = "columns-disagree", f"in {len(rows)} rows"
    for factor, named, words in RATIOS:
        if any(_agree(first, second, number) for number in (factor, 1 / factor)):
            code, how = named, words
    if columns[0].quantity == "k":
        wavelengths = TWO_PI_C / case.table.omega[rows]
        ratio = float(np.median(first.k * wavelengths / second.k))
        if np.ptp(wavelengths) > SPREAD * np.max(wavelengths) and _agree(first, second, ratio / wavelengths):
            code, how = "absorption-quantity", "as if one had been copied into the other without wavelength"
    one, other = (column.quantity.replace("_", " ") for column in columns)
    return Finding(
        code=code,
        severity="error",
        text=f"The columns {one} and {other} do not follow from each other: they differ {how}.",
        rows=case.lines(rows),
    )


def _agree(first: _Known, second: _Known, factor: Real | float) -> bool:
    """Whether first is factor times second within the uncertainties of both."""
    return bool(np.all(np.abs(first.k - factor * second.k) <= first.error + factor * second.error))
