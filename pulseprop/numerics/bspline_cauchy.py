"""The Cauchy transform of the cubic B-spline: the smooth, compact absorption band with a closed form.

    c(u) = int B(v) / (v - u) dv,   B the cubic B-spline with knots -2, -1, 0, 1, 2 and unit area.

Near: c = 1/6 sum_k a_k (v_k - u)^3 log(v_k - u), a = 1, -4, 6, -4, 1 (fourth differences).
Far: the moment series, as the closed form loses digits there as u^4.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from pulseprop.numerics.series import Numbers

__all__ = ["FAR", "VARIANCE", "cauchy", "cauchy_slope", "density", "far_from", "moments_of"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

VARIANCE = 1 / 3
"""Variance of the cubic B-spline in units of the knot distance squared."""

KNOTS = np.array([-2.0, -1.0, 0.0, 1.0, 2.0])
DIFFERENCES = np.array([1.0, -4.0, 6.0, -4.0, 1.0])
TIERS = ((5.0, 18), (40.0, 5), (1e4, 3))
"""(|u| from which on, number of even moments): the series is good to 1e-15 there."""


def _moment(order: int) -> float:
    """int B(v) v^order dv = order!/(order+4)! sum_k a_k v_k^(order+4), for even order."""
    return (2 * 2.0 ** (order + 4) - 8) / ((order + 1) * (order + 2) * (order + 3) * (order + 4))


MOMENTS = np.array([_moment(2 * m) for m in range(TIERS[0][1])])

FAR = 40.0
"""Distance in knots from which on `far_from` may be used."""
FAR_TERMS = 5


def moments_of(strength: Real, knot: Real) -> Real:
    """Even moments, shape (5,), of bands of one centre: strength times those of B, summed.

    strength, knot: (bands,), knot distances above 0.
    """
    orders = 2 * np.arange(FAR_TERMS)
    return np.asarray((strength[:, None] * knot[:, None] ** orders * MOMENTS[:FAR_TERMS]).sum(axis=0))


def far_from(distance: Numbers, moments: Real, count: int) -> list[Numbers]:
    """sum of strength c(distance/knot)/knot, and for count 2 its slope, shapes of distance.

    distance: at least FAR times the widest knot. moments: as of `moments_of`.
    """
    inverse = 1 / distance
    square = inverse * inverse
    found: list[Numbers] = [-inverse * _series_in(square, moments)]
    if count > 1:
        found.append(square * _series_in(square, moments * (2 * np.arange(FAR_TERMS) + 1)))
    return found


def _series_in(square: Numbers, coefficients: Real) -> Numbers:
    total = np.full_like(square, coefficients[-1])
    for coefficient in coefficients[-2::-1]:
        np.multiply(total, square, out=total)
        total += coefficient
    return total


def density(u: Real) -> Real:
    """B(u) at real u, shape kept."""
    size = np.abs(u)
    inner = 2 / 3 - size**2 + size**3 / 2
    outer = np.maximum(2 - size, 0) ** 3 / 6
    return np.where(size < 1, inner, outer)


def cauchy(u: Numbers) -> Complex:
    """c(u) for u above the axis or on it (limit from above); shape kept."""
    value = _tiered(np.asarray(u), _near, _far)
    if np.isrealobj(u):
        # Rounding must not turn the exactly transparent outside into gain: a negative index squared would
        # flip its root.
        value.imag = np.pi * density(np.real(u))
    return value


def cauchy_slope(u: Numbers) -> Complex:
    """dc/du for u above the axis or on it (limit from above); shape kept."""
    return _tiered(np.asarray(u), _near_slope, _far_slope)


def _tiered(u: Numbers, near: Callable[..., Complex], far: Callable[..., Complex]) -> Complex:
    flat = u.ravel()
    size = np.abs(flat)
    tier = np.searchsorted([start for start, _ in TIERS], size, side="right")
    result = np.empty(flat.shape, dtype=complex)
    close = tier == 0
    result[close] = near(flat[close])
    for index, (_, terms) in enumerate(TIERS, start=1):
        chosen = tier == index
        result[chosen] = far(flat[chosen], terms)
    return result.reshape(u.shape)


def _logarithm(y: Numbers) -> Numbers:
    """log of v - u, 0 for 0 (it is times y^2); of real y that of the size: the rest has a closed form."""
    filled = np.where(y == 0, 1.0, y)
    return np.asarray(np.log(np.abs(filled) if np.isrealobj(y) else filled))


def _near(u: Numbers) -> Complex:
    y = KNOTS[:, None] - u
    return np.asarray(DIFFERENCES @ (y * y * y * _logarithm(y)) / 6, dtype=complex)


def _near_slope(u: Numbers) -> Complex:
    y = KNOTS[:, None] - u
    square = y * y
    slope = np.asarray(DIFFERENCES @ (square * _logarithm(y)) / -2, dtype=complex)
    if np.isrealobj(u):
        slope.imag = np.pi / 2 * (DIFFERENCES @ np.where(y < 0, square, 0.0))
        slope.imag[np.abs(u) >= 2] = 0.0
    return slope


def _far(u: Numbers, terms: int) -> Complex:
    return np.asarray(-_series_in(u**-2, MOMENTS[:terms]) / u)


def _far_slope(u: Numbers, terms: int) -> Complex:
    square = u**-2
    return np.asarray(square * _series_in(square, MOMENTS[:terms] * (2 * np.arange(terms) + 1)))
