"""Bounds of V_d from a table of the index of a transparent material: one functional, not three.

Narrower than what the bounds of n_d, n_F and n_C give one by one: a common error of the three cancels.
"""

from __future__ import annotations

import numpy as np

from pulseprop.causality.passive_data import PassiveData
from pulseprop.vetting.certificate_functionals import Term
from pulseprop.vetting.certificate_proof import KnownRow, Printed
from pulseprop.vetting.certificate_rows import ABBE_ABOVE, ABBE_BELOW
from pulseprop.vetting.requirement_quantities import LINE_C, LINE_F

__all__ = ["abbe_bounds"]

MOST_ROWS = 60
"""Bounds from fewer rows are wider, and hold as well."""
ROOM = 1.001


def abbe_bounds(data: PassiveData) -> tuple[float, float] | None:
    """V_d of every passive causal material with these numbers; None where the material absorbs in the band,
    where the lines lie outside it, or where the numbers contradict each other."""
    low, high = float(data.omega[0]), float(data.omega[-1])
    if data.k is not None or not (low < LINE_C and high > LINE_F):
        return None
    keep = np.unique(np.linspace(0, len(data.omega) - 1, min(MOST_ROWS, len(data.omega))).astype(int))
    rows = [
        KnownRow(terms=(Term(order="index", omega=omega),), value=index - 1, error=error)
        for omega, index, error in zip(
            data.omega[keep].tolist(), data.index[keep].tolist(), data.index_error[keep].tolist(), strict=True
        )
    ]
    proof = Printed(rows, (low, high))
    if proof.least_factor.factor * ROOM > 1:
        return None
    return proof.ratio_interval(ABBE_ABOVE, ABBE_BELOW, 1.0)
