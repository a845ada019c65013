"""Closed forms of int density(w) / (w - z) dw: a cubic on one stretch, and an inverse power beyond it.

Real z means the principal value, complex z the integral itself. Where z meets an edge, both neighbours carry
the same log|edge - z| with opposite signs; `log_distance` leaves it out of both (log 0 := 0), which is the
limit for a continuous density. So all neighbours must measure distance in one unit: that of the last edge.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import NDArray

__all__ = ["cubic_cauchy", "inverse_power_cauchy", "log_distance", "polynomial"]

Real = NDArray[np.float64]
Complex = NDArray[np.complex128]
Numbers = NDArray[np.inexact[Any]]

SERIES_RADIUS = 0.5
SERIES_TERMS = 54
"""0.5^54 = 6e-17. Inside this radius the closed form would lose up to (1/u)^power digits."""


def log_distance(distance: Numbers) -> Numbers:
    """log|distance| of real, log(distance) of complex arguments; 0 gives 0 (see above)."""
    if np.iscomplexobj(distance):
        return np.asarray(np.log(distance))
    size = np.abs(distance)
    return np.asarray(np.log(np.where(size == 0, 1.0, size)))


def polynomial(t: Numbers, coefficients: Real) -> Numbers:
    """sum_m coefficients[..., m] t^m for up to four coefficients (Horner)."""
    total = coefficients[..., -1] + 0 * t
    for m in range(coefficients.shape[-1] - 2, -1, -1):
        total = total * t + coefficients[..., m]
    return np.asarray(total)


def cubic_cauchy(z: Numbers, left: Real, right: Real, coefficients: Real) -> Numbers:
    """int_left^right p(w)/(w - z) dw, p = sum_m coefficients[..., m] t^m, t = (w - left)/(right - left).

    Shapes broadcast, coefficients (..., 4). With u = (z - left)/(right - left) it is

        p(u) log((right - z)/(left - z)) + c1 + c2 (u + 1/2) + c3 (u^2 + u/2 + 1/3),

    exact, to be used near the stretch only, as the two parts cancel far from it.
    """
    u = (z - left) / (right - left)
    ratio = (
        np.log((right - z) / (left - z))
        if np.iscomplexobj(z)
        else log_distance(right - z) - log_distance(left - z)
    )
    rest = coefficients[..., 1] + coefficients[..., 2] * (u + 0.5)
    rest = rest + coefficients[..., 3] * ((u + 0.5) * u + 1 / 3)
    return np.asarray(polynomial(u, coefficients) * ratio + rest)


def inverse_power_cauchy(u: Numbers, power: int) -> Numbers:
    """int_1^inf v^-power / (v - u) dv = sum_m u^m / (m + power), power >= 1, shape of u kept.

    Closed form (-log(1 - u) - sum_{m<power} u^m/m) / u^power outside |u| = 0.5, the series inside.
    """
    u = np.asarray(u)
    inside = np.abs(u) <= SERIES_RADIUS
    result = np.empty(u.shape, dtype=np.result_type(u, np.float64))
    result[inside] = _power_series(u[inside], power)
    result[~inside] = _power_closed(u[~inside], power)
    return result


def _power_series(u: Numbers, power: int) -> Numbers:
    total = np.full_like(u, 1 / (SERIES_TERMS + power))
    for m in range(SERIES_TERMS - 1, -1, -1):
        total = total * u + 1 / (m + power)
    return total


def _power_closed(u: Numbers, power: int) -> Numbers:
    total = -log_distance(1 - u)
    for m in range(1, power):
        total = total - u**m / m
    return np.asarray(total / u**power)
