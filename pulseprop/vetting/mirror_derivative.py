"""Whether one column of a mirror table is the derivative of another with respect to angular frequency.

The integral of the derivative between any two rows must be the difference of the other column, within the
uncertainties of both and the error of integrating between rows: the difference between the integral of a
cubic spline and the trapezium rule, which is that of the latter and so more than that of the former. No
derivative is taken, so rounding is not amplified; all pairs of rows are compared, so slow departures are seen
too.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.vetting.mirror_rows import MirrorCurve

__all__ = ["Agreement", "agreement", "common_rows"]

Real = NDArray[np.float64]

MOST_ROWS = 1200
"""Rows of which all pairs are compared; of more, evenly chosen ones."""
TURN = 2 * np.pi
SAFETY = 2.0
"""Times the estimated error of integrating between rows that is allowed."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Agreement:
    """factor: largest departure over what is allowed; the two columns agree up to 1. pair: index of the two
    rows that depart most. seen: largest change of the upper column over its allowed departure: below 1
    nothing is seen. coarse: share of the integral that the row spacing leaves open."""

    factor: float
    pair: tuple[int, int]
    seen: float
    coarse: float


def common_rows(upper: MirrorCurve, lower: MirrorCurve) -> tuple[MirrorCurve, MirrorCurve] | None:
    """Both curves at the rows that both have; None where they are fewer than four."""
    omega = np.intersect1d(upper.omega, lower.omega)
    return (upper.at(omega), lower.at(omega)) if len(omega) >= 4 else None


def agreement(upper: MirrorCurve, derivative: Real, error: Real, *, free_slope: bool = False) -> Agreement:
    """How far `upper` is from the integral of `derivative` (R,), known within `error` (R,), over its rows.

    A phase is known modulo 2 pi. free_slope: whether a term linear in frequency is left open.
    """
    step, own, spacing = _integrals(upper.omega, derivative, error)
    rest = np.diff(upper.values) - step
    if upper.quantity == "phase":
        rest -= TURN * np.round((rest - np.median(rest)) / TURN) + TURN * np.round(np.median(rest) / TURN)
    departure = np.append(0.0, np.cumsum(rest))
    if free_slope:
        departure -= np.interp(upper.omega, upper.omega[[0, -1]], departure[[0, -1]])
    allowed = np.append(0.0, np.cumsum(own + SAFETY * spacing))
    coarse = float(np.sum(spacing) / max(np.sum(np.abs(step)), np.finfo(float).tiny))
    return _judged(upper, departure, allowed, coarse)


def _integrals(omega: Real, derivative: Real, error: Real) -> tuple[Real, Real, Real]:
    """Of each interval between rows, (R - 1,): the integral, and how much it may be wrong for the errors of
    the rows and for their spacing."""
    from scipy.interpolate import CubicSpline

    width = np.diff(omega)
    antiderivative = CubicSpline(omega, derivative).antiderivative()
    integral = np.diff(antiderivative(omega))
    trapezium = width * (derivative[:-1] + derivative[1:]) / 2
    own = width * (error[:-1] + error[1:]) / 2
    return integral, np.asarray(own), np.abs(integral - trapezium)


def _judged(upper: MirrorCurve, departure: Real, allowed: Real, coarse: float) -> Agreement:
    keep = np.unique(np.linspace(0, len(departure) - 1, min(MOST_ROWS, len(departure))).astype(int))
    ratio, seen = _pairs(departure[keep], allowed[keep], upper.error[keep], upper.values[keep])
    one, other = np.unravel_index(int(np.argmax(ratio)), ratio.shape)
    pair = int(keep[min(one, other)]), int(keep[max(one, other)])
    return Agreement(factor=float(ratio.max()), pair=pair, seen=seen, coarse=coarse)


def _pairs(departure: Real, allowed: Real, error: Real, values: Real) -> tuple[Real, float]:
    """Departure over what is allowed for every pair of rows, and the largest change of the values over it."""
    limit = error[:, None] + error[None, :] + np.abs(allowed[:, None] - allowed[None, :])
    ratio = np.abs(departure[:, None] - departure[None, :]) / limit
    return ratio, float(np.max(np.abs(values[:, None] - values[None, :]) / limit))
