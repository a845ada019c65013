"""Which single misprint, undone, mends a formula; named only where evidence says so.

Evidence is a factor of at most 1 where it was above, the numbers printed beside the formula, and the medium
it is said to be: all of those that there are must agree after the repair, and at least one must not before.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from pulseprop.errors import InputError, NumericalLimit
from pulseprop.vetting.causal import Causality
from pulseprop.vetting.formula_sheet import FormulaSheet
from pulseprop.vetting.formula_sheet_claim import checks_agree, like_claim
from pulseprop.vetting.formula_sheet_edits import edits
from pulseprop.vetting.formula_sheet_samples import data_of, index_at, places, standing_of

__all__ = ["Mended", "mending"]

ROWS = 32
LOWEST, HIGHEST = 1.0, 6.0
"""Index of transparent matter (common practice, no source; gases lie just above 1)."""
MOST = 3
"""Repairs that are looked for: the likeliest ones."""


@dataclass(frozen=True, kw_only=True)
class Mended:
    """words: what to do. factor: then, of the uncertainties."""

    words: str
    factor: float


def mending(sheet: FormulaSheet, causality: Causality) -> list[Mended]:
    """The repairs that mend the sheet, the likeliest first."""
    found = []
    for edit in edits(sheet):
        if not _plausible(edit.sheet) or not _agrees(edit.sheet):
            continue
        factor = _factor(edit.sheet, causality)
        if factor is not None and factor <= 1:
            found.append(Mended(words=edit.words, factor=factor))
        if len(found) == MOST:
            break
    return found


def _plausible(sheet: FormulaSheet) -> bool:
    """Whether the index is one of transparent matter over the whole range."""
    try:
        index = index_at(sheet, places(sheet, ROWS))
    except (InputError, ZeroDivisionError, OverflowError):
        return False
    real = np.real(index)
    smooth = bool(np.all(np.isfinite(index)) and np.all(np.abs(np.imag(index)) < sheet.error))
    return smooth and bool(
        np.all((real >= LOWEST) & (real <= HIGHEST)) and np.all(np.diff(real) >= -sheet.error)
    )


def _agrees(sheet: FormulaSheet) -> bool:
    like = like_claim(sheet)
    return checks_agree(sheet) and (like is None or like.alike)


def _factor(sheet: FormulaSheet, causality: Causality) -> float | None:
    try:
        return standing_of(data_of(sheet, ROWS), causality, thorough=False).factor
    except NumericalLimit:
        return None
