"""Requirements on mirrors against the rows of their table; uncertainty and what lies between are allowed."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
from numpy.typing import NDArray

from pulseprop.vetting.mirror_rows import WORDS, MirrorCurve
from pulseprop.vetting.requirement import Requirement
from pulseprop.vetting.requirement_answer import Interval, answered
from pulseprop.vetting.result import RequirementAnswer
from pulseprop.vetting.table import Quantity

__all__ = ["mirror_answer", "mirror_bounds", "quantity_of", "value_at"]

Real = NDArray[np.float64]

COLUMNS: dict[str, Quantity] = {
    "gdd": "gdd",
    "mirror tod": "mirror_tod",
    "group delay": "group_delay",
    "reflectance": "reflectance",
    "transmittance": "transmittance",
}


BEND = 6.0
SAME_PLACE = 1e-9


def quantity_of(requirement: Requirement) -> Quantity | None:
    """The column that a requirement is about; None for those on materials."""
    return COLUMNS.get(requirement.quantity.name)


def mirror_answer(requirement: Requirement, curves: Mapping[Quantity, MirrorCurve]) -> RequirementAnswer:
    """The three-way rule on the least and greatest value that the rows allow."""
    name = quantity_of(requirement)
    if name is None:
        return answered(
            requirement, None, "this is a requirement on a material, and the table is of a mirror"
        )
    curve = curves.get(name)
    if curve is None or requirement.low is None or requirement.high is None:
        return answered(requirement, None, f"the table has no {WORDS[name]}")
    bounds = mirror_bounds(curve, requirement.low, requirement.high)
    reason = "" if bounds else "the rows do not cover what is required"
    return answered(requirement, bounds, reason)


def mirror_bounds(curve: MirrorCurve, low: float, high: float) -> Interval | None:
    """Least and greatest value from low to high, rad/s; None where the rows do not reach so far.

    Between rows the curve is taken as their straight line, within a sixth of the larger second difference
    beside: an eighth is the error of that, and the second differences of rows fall short of their largest.
    """
    if low < curve.omega[0] * (1 - 1e-12) or high > curve.omega[-1] * (1 + 1e-12):
        return None
    inside = curve.omega[(curve.omega > low) & (curve.omega < high)]
    omega = np.concatenate(([low], inside, [high]))
    value = np.interp(omega, curve.omega, curve.values)
    error = np.interp(omega, curve.omega, curve.error) + _between(curve, omega)
    return float(np.min(value - error)), float(np.max(value + error))


def value_at(curve: MirrorCurve, omega: float) -> float:
    """Value on the straight line between rows."""
    return float(np.interp(omega, curve.omega, curve.values))


def _between(curve: MirrorCurve, omega: Real) -> Real:
    """What a curve may depart from straight lines at these places; nothing at a single row, (P,)."""
    nearest = float(np.min(np.abs(curve.omega - omega[0])))
    if len(curve.omega) < 3 or (omega[0] == omega[-1] and nearest <= SAME_PLACE * omega[0]):
        return np.zeros(len(omega))
    slope, width = np.diff(curve.values) / np.diff(curve.omega), np.diff(curve.omega)
    bend = np.abs(np.diff(slope)) * (width[:-1] + width[1:]) / 2
    padded = np.concatenate((bend[:1], bend, bend[-1:]))
    below = np.clip(np.searchsorted(curve.omega, omega, side="right") - 1, 0, len(curve.omega) - 2)
    return np.asarray(np.maximum(padded[below], padded[below + 1]) / BEND)
