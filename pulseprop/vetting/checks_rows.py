"""Rows that stand twice or out of order, and cells that are empty."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from pulseprop.vetting.case import Case
from pulseprop.vetting.result import Finding

__all__ = ["double_rows", "empty_cells", "rows_out_of_order"]


def double_rows(case: Case) -> Iterator[Finding]:
    """Rows at one wavelength: the same numbers, or others."""
    table, repeat = case.table, case.numbers.repeat
    if repeat is not None and repeat.factor > 1:
        printed = [row for row in sorted(repeat.rows) if row >= 0]
        which = "Two rows" if len(printed) > 1 else "The anchor and the row"
        yield Finding(
            code="double-row",
            severity="error",
            text=f"{which} at {case.wavelength_nm(printed[0]):.6g} nm give values of {repeat.quantity} "
            f"that differ by {float(f'{repeat.factor:.3g}'):g} times what their uncertainties allow.",
            rows=case.lines(printed),
        )
    _, first = np.unique(table.omega, return_index=True)
    again = np.setdiff1d(np.arange(len(table.omega)), first)
    if len(again) and not (repeat is not None and repeat.factor > 1):
        yield Finding(
            code="double-row",
            severity="note",
            text=f"{len(again)} wavelengths stand more than once, with values that agree; their mean was "
            "used.",
            rows=case.lines(again),
        )


def rows_out_of_order(case: Case) -> Iterator[Finding]:
    """Rows whose wavelength breaks the order of the others: most likely a slip in the wavelength."""
    values = case.table.axis_values
    if len(values) < 3:
        return
    steps = np.diff(values)
    direction = np.sign(np.median(np.sign(steps[steps != 0]))) if np.any(steps != 0) else 1.0
    wrong = np.flatnonzero(steps * direction < 0)
    if not len(wrong):
        return
    few = len(wrong) <= max(1, len(values) // 20)
    rows = np.unique([_odd_one(values, int(step), float(direction)) for step in wrong])
    yield Finding(
        code="rows-out-of-order",
        severity="warning" if few else "note",
        text=(
            "A wavelength breaks the order of the rows: a slip in the wavelength, or a row in the wrong "
            "place."
            if few
            else "The rows are in no order; they were sorted."
        ),
        rows=case.lines(rows if few else wrong + 1),
    )


def empty_cells(case: Case) -> Iterator[Finding]:
    """Cells without a number: left out, and said."""
    for column in case.table.columns:
        rows = np.flatnonzero(~np.isfinite(column.values))
        if len(rows):
            yield Finding(
                code="empty-cell",
                severity="note",
                text=f"{len(rows)} cells of the {column.quantity.replace('_', ' ')} column hold no number "
                "and were left out.",
                rows=case.lines(rows),
            )


def _odd_one(values: NDArray[np.float64], step: int, direction: float) -> int:
    """Of the two rows of a step in the wrong direction, the one without which the order holds."""
    without_first = step == 0 or (values[step + 1] - values[step - 1]) * direction > 0
    return step if without_first else step + 1
