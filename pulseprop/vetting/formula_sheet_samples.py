"""A formula as rows of its index, dense enough that the uncertainty factor does not depend on them.

The points are the extrema of Chebyshev polynomials over the range in frequency, dense at its ends; each finer
set holds the coarser one, so that the factor can only grow. It is taken as settled when doubling the number
of rows changes it by less than one per cent.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_data import PassiveData
from pulseprop.errors import NumericalLimit
from pulseprop.vetting.causal import Causality, Standing
from pulseprop.vetting.formula_sheet import FormulaSheet, medium_of

__all__ = ["Settled", "data_of", "index_at", "places", "settled_factor", "standing_of"]

Real = NDArray[np.float64]

FIRST, MOST = 32, 256
"""Intervals between rows to begin with, and at most."""
SETTLED = 0.01
SMALL = 1.0
"""Factors below this settle to a share of it: they say that the formula is a passive causal material's."""
LARGER = 10.0
LONGEST = 20.0
"""A range that reaches to zero frequency is sampled down to the highest frequency over this."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Settled:
    """standing: of the finest rows. rows: how many. change: of the factor at the last step, relative."""

    data: PassiveData
    standing: Standing
    rows: int
    change: float


def places(sheet: FormulaSheet, intervals: int) -> Real:
    """Frequencies inside the range, rad/s ascending, (intervals + 1,)."""
    low, high = sheet.valid
    low = max(low, high / LONGEST) if low == 0 else low
    nodes = (1 - np.cos(np.pi * np.arange(intervals + 1) / intervals)) / 2
    return np.asarray(np.clip(low + (high - low) * nodes, low, high))


def index_at(sheet: FormulaSheet, omega: Real) -> NDArray[np.complex128]:
    """n + ik of the formula as printed, shape of omega. Raises InputError for a pole inside the range."""
    from pulseprop.material.response import View

    return medium_of(sheet).index(omega, View.PRINTED)


def data_of(sheet: FormulaSheet, intervals: int) -> PassiveData:
    """The rows, with the uncertainty of the sheet."""
    omega = places(sheet, intervals)
    index = np.real(index_at(sheet, omega))
    return PassiveData(omega=omega, index=index, index_error=np.full(len(omega), sheet.error))


def standing_of(data: PassiveData, causality: Causality, *, thorough: bool) -> Standing:
    """The standing; where the errors are too small for double precision that of ten times as large ones, for
    the factor is in proportion. Raises NumericalLimit where that does not help either."""
    try:
        return causality.standing(data, thorough=thorough)
    except NumericalLimit:
        larger = causality.standing(replace(data, index_error=LARGER * data.index_error), thorough=thorough)
        return replace(larger, factor=LARGER * larger.factor)


def settled_factor(sheet: FormulaSheet, causality: Causality, *, thorough: bool) -> Settled:
    """The factor, from rows doubled until it settles. Raises NumericalLimit where it does not."""
    intervals, before, change = FIRST, None, np.inf
    while True:
        data = data_of(sheet, intervals)
        factor = standing_of(data, causality, thorough=False).factor
        if before is not None:
            change = abs(factor - before) / max(factor, SMALL)
            if change <= SETTLED:
                break
        if intervals >= MOST:
            raise NumericalLimit(
                "the uncertainty factor of the formula does not settle as rows are added",
                value=f"{factor:.4g} at {intervals + 1} rows, {before:.4g} at half as many",
                remedy="State a narrower range, or a larger uncertainty",
            )
        before, intervals = factor, 2 * intervals
    standing = standing_of(data, causality, thorough=thorough)
    return Settled(data=data, standing=standing, rows=intervals + 1, change=float(change))
