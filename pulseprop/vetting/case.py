"""A table before the judge: what was sent, what it says in numbers, and where it stands."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError, NumericalLimit
from pulseprop.vetting.causal import Causality, Standing
from pulseprop.vetting.numbers import Numbers, numbers_of
from pulseprop.vetting.request import Request
from pulseprop.vetting.table import SentTable

__all__ = ["Case", "case_of", "part_of"]

ENOUGH = 80
"""Rows that show whether a repair helps; the full table is asked only where they say yes."""
PROMISING = 2.0
"""Factor of a few rows, or of a quick answer, up to which the whole is looked at closely."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Case:
    """standing: None where causality has nothing to say (`numbers.reason`) or no answer (`trouble`)."""

    table: SentTable
    request: Request
    causality: Causality
    numbers: Numbers
    standing: Standing | None
    trouble: str = ""

    @property
    def factor(self) -> float | None:
        """The uncertainty factor, rows at one wavelength that differ included."""
        if self.standing is None:
            return self.numbers.repeat.factor if self.numbers.repeat else None
        return max(self.standing.factor, self.numbers.repeat.factor if self.numbers.repeat else 0.0)

    def lines(self, rows: Sequence[int] | NDArray[np.int64]) -> tuple[int, ...]:
        """Lines of the file of these rows of the table."""
        return tuple(int(self.table.lines[row]) for row in rows)

    def wavelength_nm(self, row: int) -> float:
        """Of a row of the table."""
        return float(TWO_PI_C / self.table.omega[row] * 1e9)

    def factor_of(self, table: SentTable) -> float | None:
        """The factor of a repaired table, within a few per cent; None where it cannot be said.

        Of many rows a part is tried first: where these cannot agree, all cannot. Near 1 it is exact.
        """
        try:
            numbers = numbers_of(table, self.request)
        except InputError:
            return None
        if numbers.data is None:
            return None
        few = part_of(numbers.data)
        try:
            factor = self.causality.quick_factor(few)
            if few is not numbers.data and factor <= PROMISING:
                factor = self.causality.quick_factor(numbers.data)
            if 1 < factor <= PROMISING:
                factor = self.causality.standing(numbers.data, thorough=False).factor
        except NumericalLimit:
            return None
        return max(factor, numbers.repeat.factor if numbers.repeat else 0.0)


def case_of(table: SentTable, request: Request, causality: Causality) -> Case:
    """The case with its standing; a numerical failure is told, never a verdict."""
    numbers = numbers_of(table, request)
    standing, trouble = None, ""
    if numbers.data is not None:
        try:
            standing = causality.standing(numbers.data, thorough=True)
        except NumericalLimit as failure:
            trouble = str(failure)
    return Case(
        table=table,
        request=request,
        causality=causality,
        numbers=numbers,
        standing=standing,
        trouble=trouble,
    )


def part_of(data: PassiveData) -> PassiveData:
    """A part of many rows that no material has unless the whole may be true.

    Of n alone every few rows. With k neighbouring rows, where n changes most: rows left out between others
    would make narrow lines coarser than they are, and then true numbers look false.
    """
    if data.k_omega is None:
        return _every_few(data)
    count = len(data.k_omega)
    if count <= ENOUGH or len(data.omega) < ENOUGH:
        return data
    index = np.interp(data.k_omega, data.omega, data.index)
    first = int(np.argmax(np.ptp(np.lib.stride_tricks.sliding_window_view(index, ENOUGH), axis=1)))
    low, high = data.k_omega[first], data.k_omega[first + ENOUGH - 1]
    return _kept(
        data, (data.omega >= low) & (data.omega <= high), (data.k_omega >= low) & (data.k_omega <= high)
    )


def _every_few(data: PassiveData) -> PassiveData:
    count = len(data.omega)
    if count <= ENOUGH:
        return data
    keep = np.zeros(count, dtype=bool)
    keep[np.linspace(0, count - 1, ENOUGH).astype(int)] = True
    return _kept(data, keep, np.zeros(0, dtype=bool))


def _kept(data: PassiveData, index_rows: NDArray[np.bool_], k_rows: NDArray[np.bool_]) -> PassiveData:
    few: dict[str, Any] = {
        name: column[keep]
        for names, keep in (
            (("omega", "index", "index_error"), index_rows),
            (("k_omega", "k", "k_error", "least"), k_rows),
        )
        for name in names
        if (column := getattr(data, name)) is not None
    }
    return replace(data, **few)
