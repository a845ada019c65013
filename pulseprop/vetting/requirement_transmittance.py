"""Bounds of the internal transmittance from rows of the absorption index.

Between rows k lies on straight lines within the errors of both rows: the material has no structure finer than
them. T = exp(-2 omega k length / c).
"""

from __future__ import annotations

import numpy as np

from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.vetting.requirement_answer import Interval, Transmitted

__all__ = ["transmitted_by"]


def transmitted_by(data: PassiveData | None) -> Transmitted | None:
    """The bounds as a function of omega (rad/s) and length (m); None where the data hold no absorption."""
    if data is None or data.k is None or data.k_omega is None or data.k_error is None or not len(data.k):
        return None
    places, k, error = data.k_omega, data.k, data.k_error
    least = np.zeros(len(k), dtype=bool) if data.least is None else data.least

    def bounds(omega: float, length: float) -> tuple[Interval | None, str]:
        if not places[0] <= omega <= places[-1]:
            return None, "outside the rows of the absorption"
        below = max(int(np.searchsorted(places, omega)) - 1, 0)
        if least[below : below + 2].any():
            return None, "the rows beside it are lower limits of the absorption"
        low = max(float(np.interp(omega, places, k - error)), 0.0)
        high = max(float(np.interp(omega, places, k + error)), 0.0)
        per_k = 2 * omega * length / SPEED_OF_LIGHT
        return (float(np.exp(-per_k * high)), float(np.exp(-per_k * low))), ""

    return bounds
