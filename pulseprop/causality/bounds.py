"""What numbers guarantee: lowest and highest index, group index, GVD and TOD of all passive causal materials.

Each end is a linear programme over the materials that have the data within their uncertainties
(`bounds_programme`): in k, and where only n is given, so that the material is transparent, also in chi
(`bounds_squared`). What is returned is never inside the optimum, and outside it by 0.3 % of the width at each
end, as long as rounding leaves so good a proof.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.bounds_band import allowed_band
from pulseprop.causality.bounds_sources import Absorbing, Source, Transparent
from pulseprop.causality.coarse_features import coarse_features
from pulseprop.causality.feasibility import Feasibility
from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.errors import NumericalLimit
from pulseprop.numerics.threads import one_thread

__all__ = ["PassiveBounds", "bounds"]

Real = NDArray[np.float64]
Interval = tuple[float, float]

EMPTY = "no passive causal material has these numbers within their uncertainties"
UNPROVEN = "rounding leaves no proof of what is missing here"
WITH_GVD, WITHOUT_GVD = 3, 2
"""How many of the quantities rows of k can tell."""


@dataclass(frozen=True, kw_only=True)
class PassiveBounds:
    """(lowest, highest) at omega (rad/s); gvd in s^2/m, tod in s^3/m. None where the reason says why."""

    omega: float
    index: Interval | None = None
    group_index: Interval | None = None
    gvd: Interval | None = None
    tod: Interval | None = None
    reason: str = ""


@one_thread()
def bounds(
    data: PassiveData, omegas: Real, feasibility: Feasibility | None = None
) -> tuple[PassiveBounds, ...]:
    """At each of omegas, rad/s, in any order, (W,).

    feasibility: of the data, where known; it spares some work.
    """
    asked = [_unasked(data, float(omega)) for omega in omegas]
    if feasibility is not None and feasibility.certified > 1:
        return tuple(replace(one, reason=EMPTY) for one in asked)
    if all(one.reason for one in asked):
        return tuple(asked)
    try:
        source, note = _source(data, feasibility)
    except NumericalLimit as limit:
        return tuple(one if one.reason else replace(one, reason=_words(limit)) for one in asked)
    return tuple(one if one.reason else _filled(one, source, note) for one in asked)


def _unasked(data: PassiveData, omega: float) -> PassiveBounds:
    """With the reason where bounds cannot be asked for."""
    low, high = allowed_band(data)
    if low <= omega <= high:
        return PassiveBounds(omega=omega)
    if low > high:
        return PassiveBounds(omega=omega, reason="fewer than five rows, and no band known to be transparent")
    return PassiveBounds(
        omega=omega,
        reason="outside the rows or within two rows of their end, where the end row carries half a test: "
        f"bounds are given from {TWO_PI_C / high * 1e9:.5g} to {TWO_PI_C / low * 1e9:.5g} nm",
    )


def _source(data: PassiveData, feasibility: Feasibility | None) -> tuple[Source, str]:
    """With what is to be said of quantities it does not tell."""
    known = None if feasibility is None else feasibility.material.attained.masses
    if data.k is None or data.k_omega is None or data.k_error is None:
        return Transparent(data), ""
    coarse = coarse_features(data.k_omega, data.k, data.k_error)
    if coarse:
        places = ", ".join(f"{TWO_PI_C / feature.omega * 1e9:.5g}" for feature in coarse[:3])
        return Absorbing(data, WITHOUT_GVD, known), (
            f"GVD and TOD need five rows over the width of each feature of k, which those at {places} nm"
            f"{' and others' * (len(coarse) > 3)} do not have"
        )
    return Absorbing(
        data, WITH_GVD, known
    ), "rows of k do not limit the third derivative of the index between them"


def _words(limit: NumericalLimit) -> str:
    said = limit.complaint
    return f"{said.problem}. {said.remedy}" if said.remedy else said.problem


def _filled(asked: PassiveBounds, source: Source, note: str) -> PassiveBounds:
    unit = source.unit
    offset = np.array([1.0, 1.0, 0.0, 0.0])
    divisor = np.array([1.0, 1.0, SPEED_OF_LIGHT * unit, SPEED_OF_LIGHT * unit**2])
    found = offset[:, None] + source.intervals(asked.omega / unit) / divisor[:, None]
    told = [_interval(row) for row in found]
    index, group_index, gvd, tod = told
    reason = note or (UNPROVEN if None in told else "")
    return replace(asked, index=index, group_index=group_index, gvd=gvd, tod=tod, reason=reason)


def _interval(ends: Real) -> Interval | None:
    return (float(ends[0]), float(ends[1])) if np.all(np.isfinite(ends)) else None
