"""Bounds of a case at asked frequencies: at the stated uncertainties, or at those that the numbers imply."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.errors import NumericalLimit
from pulseprop.vetting.case import Case
from pulseprop.vetting.requirement_abbe import abbe_bounds
from pulseprop.vetting.result import Bounds

__all__ = ["at_implied_uncertainty", "guaranteed", "guaranteed_abbe", "guaranteed_transmittance"]

Real = NDArray[np.float64]
Interval = tuple[float, float]

ROOM = 1.01
"""Over the least factor, so that not a single material but a set of them is left."""


def guaranteed(case: Case, omega: Real) -> Sequence[Bounds]:
    """Bounds at each omega (rad/s); null with the reason where the numbers guarantee nothing."""
    data, reason = at_implied_uncertainty(case)
    if data is None:
        return [_nothing(place, reason) for place in omega]
    inside = (omega >= data.omega[0]) & (omega <= data.omega[-1])
    reason = "outside the rows of the index"
    if data.k_omega is not None:
        inside |= (omega >= data.k_omega[0]) & (omega <= data.k_omega[-1])
        reason = "outside the rows"
    try:
        found = iter(case.causality.bounds(data, omega[inside]) if inside.any() else ())
    except NumericalLimit as failure:
        return [_nothing(place, str(failure)) for place in omega]
    return [
        next(found) if here else _nothing(place, reason) for place, here in zip(omega, inside, strict=True)
    ]


def guaranteed_abbe(case: Case) -> Interval | None:
    """V_d; None where the numbers do not limit it."""
    data, _ = at_implied_uncertainty(case)
    try:
        return None if data is None else abbe_bounds(data)
    except NumericalLimit:
        return None


def guaranteed_transmittance(case: Case, omega: float, length: float) -> tuple[Interval | None, str]:
    """Internal transmittance of a length (m), between those of the two rows beside omega (rad/s).

    Between two rows k is taken to lie between theirs, uncertainties allowed for: no structure finer than the
    rows.
    """
    data, reason = at_implied_uncertainty(case)
    if data is None or data.k_omega is None or data.k is None or data.k_error is None:
        return None, reason or "the data hold no absorption, so they say nothing about internal transmittance"
    if not data.k_omega[0] <= omega <= data.k_omega[-1]:
        return None, "outside the rows of the absorption"
    last = int(np.clip(np.searchsorted(data.k_omega, omega), 1, len(data.k) - 1))
    beside = slice(last - 1, last + 1)
    if data.least is not None and np.any(data.least[beside]):
        return None, "the rows there are lower limits of the absorption only"
    high = float(np.max(data.k[beside] + data.k_error[beside]))
    low = max(float(np.min(data.k[beside] - data.k_error[beside])), 0.0)
    thick, thin = (math.exp(-2 * omega * k * length / SPEED_OF_LIGHT) for k in (high, low))
    return (thick, thin), ""


def at_implied_uncertainty(case: Case) -> tuple[PassiveData | None, str]:
    """The data, with unstated uncertainties enlarged to where the numbers can be true; or why there are
    none. Rows at one wavelength stand as their mean with an uncertainty that covers them all already.
    """
    data, factor = case.numbers.data, case.factor
    if data is None or case.standing is None or factor is None:
        return None, case.numbers.reason or case.trouble
    if factor <= 1:
        return data, ""
    if case.numbers.stated:
        return None, "the numbers contradict each other within their uncertainties, so they guarantee nothing"
    if case.standing.unresolved is not None or case.standing.coarse:
        return None, "structure finer than the rows may stand between them, so they guarantee nothing"
    larger = max(case.standing.factor * ROOM, 1.0)
    k_error = None if data.k_error is None else data.k_error * larger
    return replace(data, index_error=data.index_error * larger, k_error=k_error), ""


def _nothing(omega: float, reason: str) -> Bounds:
    return Bounds(wavelength_nm=float(TWO_PI_C / omega * 1e9), reason=reason)
