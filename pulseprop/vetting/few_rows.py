"""When one to a few rows carry the proof: which, the factor without them, and what values would fit there."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from pulseprop.causality.passive_data import PassiveData
from pulseprop.errors import NumericalLimit
from pulseprop.vetting.case import Case
from pulseprop.vetting.causal import FewRows, Part
from pulseprop.vetting.misprints import misprint
from pulseprop.vetting.result import Finding

__all__ = ["displaced", "few_rows"]

Interval = tuple[float, float]

ROWS_A_SLIP = 8
"""Rows to one that may be called a slip: of fewer, most can be left out of any table."""


def few_rows(case: Case) -> FewRows | None:
    """The one to three rows without which the numbers agree; None where there are no such rows."""
    standing, data = case.standing, case.numbers.data
    if standing is None or data is None or standing.factor <= 1:
        return None
    try:
        found = case.causality.few_rows(data, standing)
    except NumericalLimit:
        return None
    rows = max(len(data.omega), 0 if data.k is None else len(data.k))
    return found if found is not None and len(found.parts) <= rows // ROWS_A_SLIP else None


def displaced(case: Case, few: FewRows | None) -> Iterator[Finding]:
    """A finding a row that does not fit the others, with the value that would and the misprint it may be."""
    if few is None:
        return
    fits = _fitting(case, few)
    for part, fit in zip(few.parts, fits, strict=True):
        yield _finding(case, few, part, fit)


def _omega(data: PassiveData, part: Part) -> float:
    axis = data.k_omega if part.quantity == "k" and data.k_omega is not None else data.omega
    return float(axis[part.row])


def _fitting(case: Case, few: FewRows) -> list[Interval | None]:
    """What index the remaining rows leave room for at each row left out."""
    data = case.numbers.data
    places = [_omega(data, part) for part in few.parts if part.quantity == "n"] if data else []
    if few.factor > 1 or not places:
        return [None] * len(few.parts)
    try:
        bounds = iter(case.causality.bounds(few.data, np.array(places)))
    except NumericalLimit:
        return [None] * len(few.parts)
    return [next(bounds).index if part.quantity == "n" else None for part in few.parts]


def _finding(case: Case, few: FewRows, part: Part, fit: Interval | None) -> Finding:
    rows = case.numbers.index_rows if part.quantity == "n" else case.numbers.k_rows
    row = int(rows[part.row])
    if row < 0:
        return Finding(
            code="anchor-conflict",
            severity="error",
            text="The stated anchor does not agree with the rows of the table.",
            factor_after_repair=few.factor,
        )
    column = case.table.column(part.quantity)
    printed = column.cells[row].strip() if column is not None else ""
    slip = misprint(printed, fit) if column is not None and fit is not None else None
    line, place = case.lines([row]), f"{case.wavelength_nm(row):.6g} nm"
    text = f"The value of {part.quantity} in row {line[0]} ({place}) does not fit the other rows"
    text += f": {printed} is printed." if printed else "."
    repair = None
    if fit is not None:
        text += f" The other rows leave room for {_span(fit)}."
        repair = f"in row {line[0]} {slip.reads} for {printed}" if slip else f"a value of {_span(fit)} there"
    if slip is not None:
        text += f" {slip.words}"
    return Finding(
        code="displaced-row",
        severity="error",
        text=text,
        rows=line,
        repair=repair or f"leave out row {line[0]}",
        factor_after_repair=few.factor,
    )


def _span(interval: Interval) -> str:
    """Both ends with the digits that tell them apart."""
    width = interval[1] - interval[0]
    places = int(np.clip(np.ceil(-np.log10(width)) + 1, 0, 10)) if width > 0 else 8
    return f"{interval[0]:.{places}f} to {interval[1]:.{places}f}"
