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

__all__ = ["Case", "case_of", "thinned"]

ENOUGH = 80
"""Rows that show whether a repair helps; the full table is asked only where they say yes."""
PROMISING = 1.2
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

        Of many rows a few are tried first: where these cannot agree, all cannot. Near 1 it is exact.
        """
        try:
            numbers = numbers_of(table, self.request)
        except InputError:
            return None
        if numbers.data is None:
            return None
        few = thinned(numbers.data)
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


def thinned(data: PassiveData) -> PassiveData:
    """Every few rows, the first and last kept, where there are many."""
    few: dict[str, Any] = {}
    for names in (("omega", "index", "index_error"), ("k_omega", "k", "k_error", "least")):
        columns = {name: column for name in names if (column := getattr(data, name)) is not None}
        count = max((len(column) for column in columns.values()), default=0)
        if count > ENOUGH:
            keep = np.unique(np.linspace(0, count - 1, ENOUGH).astype(int))
            few |= {name: column[keep] for name, column in columns.items()}
    return replace(data, **few) if few else data
