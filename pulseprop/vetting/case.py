"""A table before the judge: what was sent, what it says in numbers, and where it stands."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError, NumericalLimit
from pulseprop.vetting.causal import Causality, Standing
from pulseprop.vetting.numbers import Numbers, numbers_of
from pulseprop.vetting.request import Request
from pulseprop.vetting.table import SentTable

__all__ = ["Case", "case_of", "thinned"]

ENOUGH = 60
"""Rows that show whether a repair helps; the full table is asked only where they say yes."""
PROMISING = 1.2


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
        """The factor of a repaired table; None where it cannot be said. Few rows first."""
        try:
            numbers = numbers_of(table, self.request)
        except InputError:
            return None
        if numbers.data is None:
            return None
        least = numbers.repeat.factor if numbers.repeat else 0.0
        return self.factor_of_data(numbers.data, least)

    def factor_of_data(self, data: PassiveData, least: float = 0.0) -> float | None:
        """The factor, at least `least`; only that of every few rows where it is well above 1 already."""
        try:
            few = thinned(data)
            factor = self.causality.standing(few, thorough=False).factor
            if few is not data and factor <= PROMISING:
                factor = self.causality.standing(data, thorough=False).factor
        except NumericalLimit:
            return None
        return max(factor, least)


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


def thinned(data: PassiveData) -> PassiveData:
    """Every few rows of the index, the first and last kept, where there are many; the absorption as it is."""
    count = len(data.omega)
    if count <= ENOUGH:
        return data
    keep = np.unique(np.linspace(0, count - 1, ENOUGH).astype(int))
    return replace(data, omega=data.omega[keep], index=data.index[keep], index_error=data.index_error[keep])
