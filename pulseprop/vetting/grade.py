"""The uncertainty that the numbers imply, and how it stands beside what such measurements usually reach.

What methods reach is common practice, no source: minimum deviation of a prism 1e-6 to 1e-5, refractometers
and routine prisms to 1e-4, interferometry of plates to 1e-3, ellipsometry 1e-3 to 1e-2, films by reflection
and transmission to 3e-2. Of gases the refractivity n - 1 is what is measured.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from pulseprop.vetting.case import Case
from pulseprop.vetting.result import ImpliedUncertainty

__all__ = ["Grade", "graded", "implied_uncertainty"]

REACHED = (
    (1e-6, "better than any usual measurement: such digits come from a formula or are rounding"),
    (1e-5, "what the best prisms at minimum deviation reach"),
    (1e-4, "what routine prisms and refractometers reach"),
    (1e-3, "what refractometers and interferometry of plates reach"),
    (1e-2, "what ellipsometry reaches"),
    (3e-2, "what films measured by reflection and transmission reach"),
)
"""Largest uncertainty of n, relative, and who gets there."""

GROSS = 3e-2
GROSS_ABSORBING = 0.1
"""Relative uncertainty of n (of n + ik where it absorbs strongly) that no usual measurement has."""
STRONG = 0.1
"""k from which on a material absorbs strongly, and its index is found with larger errors."""
DILUTE = 0.01
"""Largest n - 1 of a gas."""


@dataclass(frozen=True)
class Grade:
    """index: implied uncertainty relative to n (to n - 1 of a gas). gross: more than any usual
    measurement.
    """

    index: float
    gross: bool
    words: str


def implied_uncertainty(case: Case) -> ImpliedUncertainty:
    """factor times the uncertainties, the largest of all rows; its grade where it was not stated.

    Of rows at one wavelength that differ it is half the difference: their mean stands with an uncertainty
    that covers both already, which only the factor of the others enlarges.
    """
    data, factor = case.numbers.data, case.factor
    if data is None or factor is None:
        return ImpliedUncertainty(n=None, k=None)
    k = None
    if data.k_error is not None and len(data.k_error):
        k = max(_rows_factor(case) * float(np.max(data.k_error)), _of_repeat(case, "k"))
    n = max(_rows_factor(case) * float(np.max(data.index_error)), _of_repeat(case, "n"))
    return ImpliedUncertainty(n=n, k=k, grade=graded(case).words if factor > 0 else "")


def _rows_factor(case: Case) -> float:
    """The least factor of the rows, those at one wavelength taken as their mean."""
    return case.standing.factor if case.standing is not None else 0.0


def _of_repeat(case: Case, quantity: str) -> float:
    """The least error of two rows at one wavelength; 0 where their printed uncertainties explain them."""
    repeat = case.numbers.repeat
    return repeat.half if repeat and repeat.factor > 1 and repeat.quantity == quantity else 0.0


def graded(case: Case) -> Grade:
    """The implied uncertainty of n beside what measurements reach."""
    data, factor = case.numbers.data, case.factor
    if data is None or factor is None:
        return Grade(0.0, gross=False, words="")
    dilute = float(np.max(np.abs(data.index - 1))) < DILUTE
    absorbing = data.k is not None and len(data.k) > 0 and float(np.max(data.k)) > STRONG
    size = np.abs(data.index - 1) if dilute else np.abs(data.index)
    if absorbing and data.k is not None:
        size = np.maximum(size, float(np.median(data.k)))
    size = np.maximum(size, 1e-12)
    share = _rows_factor(case) * float(np.max(data.index_error / size))
    share = max(share, _of_repeat(case, "n") / float(np.min(size)))
    limit = GROSS_ABSORBING if absorbing else GROSS
    gross = share > limit
    of = "of n - 1" if dilute else "of n"
    words = next((said for reached, said in REACHED if share <= reached), "more than any usual measurement's")
    return Grade(share, gross=gross, words=f"That is {_percent(share)} {of}: {words} (common practice).")


def _percent(share: float) -> str:
    return f"{100 * share:.2g} %" if share >= 1e-4 else f"{share:.1e}"
