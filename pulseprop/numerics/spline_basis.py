"""Cubic B-splines on any knots as piecewise cubics, and the Cauchy transforms of all of them."""

from __future__ import annotations

from math import factorial

import numpy as np
from numpy.typing import NDArray

from pulseprop.numerics.cauchy import monomial_cauchy

__all__ = ["basis_pieces", "basis_transforms", "basis_values"]

Real = NDArray[np.float64]


def basis_pieces(knots: Real) -> Real:
    """Coefficients (knots - 1, 4, knots - 4) of each B-spline on each piece, t = (x - left)/(right - left).

    knots: ascending, five or more.

    Each of the splines is non-negative, spans four pieces, and together they sum to 1 away from the ends.
    """
    from scipy.interpolate import BSpline

    length = np.diff(knots)
    steps = np.arange(1, 4)
    # three more knots to each side, as the library's splines are defined only where all of them overlap
    padded = np.concatenate((knots[0] - steps[::-1] * length[0], knots, knots[-1] + steps * length[-1]))
    spline = BSpline(padded, np.eye(len(padded) - 4), 3)
    orders = [spline, *(spline.derivative(m) for m in (1, 2, 3))]
    middle = (knots[:-1] + knots[1:]) / 2
    return _about_left(np.stack([order(middle)[:, 3:-3] for order in orders], axis=1), length)


def _about_left(middle: Real, length: Real) -> Real:
    """From derivatives at the middle of each piece to powers of t counted from its left end."""
    result = np.zeros_like(middle)
    for m in range(4):
        scaled = middle[:, m] * (length**m / factorial(m))[:, None]
        for j in range(m + 1):
            binomial = factorial(m) // (factorial(j) * factorial(m - j))
            result[:, j] += scaled * binomial * (-0.5) ** (m - j)
    return result


def basis_values(knots: Real, pieces: Real, omega: Real) -> Real:
    """The B-splines at omega between the knots: shape (places, splines)."""
    piece = np.clip(np.searchsorted(knots, omega, side="right") - 1, 0, len(knots) - 2)
    t = (omega - knots[piece]) / np.diff(knots)[piece]
    return np.asarray(np.einsum("im,imj->ij", t[:, None] ** np.arange(4), pieces[piece]))


def basis_transforms(knots: Real, pieces: Real, omega: Real) -> Real:
    """(2/pi) PV int_0^inf w B(w)/(w^2 - omega^2) dw of each B-spline, omega real: (places, splines)."""
    unit = knots[-1]
    both = np.concatenate((omega, -omega)) / unit
    moments = monomial_cauchy(knots / unit, both)
    here, mirrored = np.split(np.tensordot(moments, pieces, axes=([1, 2], [0, 1])), 2)
    return np.asarray((here + mirrored) / np.pi)
