"""When one to a few rows carry the proof: which, the factor without them, and what values would fit there."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_data import PassiveData
from pulseprop.errors import NumericalLimit
from pulseprop.vetting.case import Case
from pulseprop.vetting.causal import Part
from pulseprop.vetting.misprints import misprint
from pulseprop.vetting.result import Finding

__all__ = ["FewRows", "displaced", "few_rows"]

Real = NDArray[np.float64]
Interval = tuple[float, float]

MOST = 3
"""Rows that may be called a few; and at most a tenth of all."""
TRIED = 5
"""The heaviest rows of a proof of which each is left out in turn."""
SPARES = 10.0
"""Fall of the factor from which on the rows left out carry the proof, even where it stays above 1."""


@dataclass(frozen=True, kw_only=True, eq=False)
class FewRows:
    """parts: the rows (of the data). factor: without them. data: the rest."""

    parts: tuple[Part, ...]
    factor: float
    data: PassiveData


def few_rows(case: Case) -> FewRows | None:
    """The fewest rows, at most MOST, without which the numbers agree; None where there are no such rows.

    One row after the other is left out, each time the one of the heaviest that lowers the factor most.
    """
    standing, data = case.standing, case.numbers.data
    if standing is None or data is None or standing.factor <= 1:
        return None
    most = min(MOST, len(data.omega) // 10)
    left_out: list[Part] = []
    rest, parts, factor = data, standing.conflict, standing.factor
    while parts and len(left_out) < most and factor > 1:
        found = _best(case, rest, parts)
        if found is None:
            return None
        part, factor, remaining = found
        left_out.append(_in_data(data, part, _omega(rest, part)))
        rest = remaining
        if factor > 1:
            parts = _parts(case, rest)
    if factor <= 1 or standing.factor / factor >= SPARES:
        return FewRows(parts=tuple(left_out), factor=factor, data=rest)
    return None


def displaced(case: Case, few: FewRows | None) -> Iterator[Finding]:
    """A finding a row that does not fit the others, with the value that would and the misprint it may be."""
    if few is None:
        return
    fits = _fitting(case, few)
    for part, fit in zip(few.parts, fits, strict=True):
        yield _finding(case, few, part, fit)


def _best(case: Case, data: PassiveData, parts: tuple[Part, ...]) -> tuple[Part, float, PassiveData] | None:
    """Which of the heaviest rows to leave out, the factor then, and what remains."""
    best = None
    for part in sorted(parts, key=lambda part: -abs(part.weight))[:TRIED]:
        rest = _without(data, part)
        factor = case.factor_of_data(rest)
        if factor is not None and (best is None or factor < best[1]):
            best = (part, factor, rest)
    return best


def _parts(case: Case, data: PassiveData) -> tuple[Part, ...]:
    try:
        return case.causality.standing(data, thorough=True).conflict
    except NumericalLimit:
        return ()


def _omega(data: PassiveData, part: Part) -> float:
    return float(_axis(data, part)[part.row])


def _axis(data: PassiveData, part: Part) -> Real:
    if part.quantity == "k" and data.k_omega is not None:
        return data.k_omega
    return data.omega


def _in_data(data: PassiveData, part: Part, omega: float) -> Part:
    """The part with its row counted in the whole data."""
    return replace(part, row=int(np.argmin(np.abs(_axis(data, part) - omega))))


def _without(data: PassiveData, part: Part) -> PassiveData:
    if part.quantity == "n":
        return replace(
            data,
            omega=np.delete(data.omega, part.row),
            index=np.delete(data.index, part.row),
            index_error=np.delete(data.index_error, part.row),
        )
    columns = ("k_omega", "k", "k_error", "least")
    known = {name: column for name in columns if (column := getattr(data, name)) is not None}
    rest: dict[str, Any] = {name: np.delete(column, part.row) for name, column in known.items()}
    return replace(data, **rest)


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
