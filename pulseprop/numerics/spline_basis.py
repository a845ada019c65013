"""Cubic B-splines on any knots as piecewise cubics, and the Cauchy transforms of all of them."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.numerics.cauchy import monomial_cauchy

__all__ = ["basis_pieces", "basis_spans", "basis_transforms", "basis_values"]

Real = NDArray[np.float64]

SPAN = 4
"""Pieces of a cubic B-spline, and powers on each."""
BLOCK = 64
"""Places handled together: the moments of all pieces stay a few MB."""


def basis_pieces(knots: Real) -> Real:
    """Coefficients (knots - 1, 4, knots - 4) of each B-spline on each piece, t = (x - left)/(right - left).

    knots: ascending, five or more.

    Each of the splines is non-negative, spans four pieces, and together they sum to 1 away from the ends.
    """
    spans = _recursion(knots)
    result = np.zeros((len(knots) - 1, SPAN, len(spans)))
    spline = np.arange(len(spans))
    for piece in range(SPAN):
        result[spline + piece, :, spline] = spans[:, piece]
    return result


def basis_spans(pieces: Real) -> Real:
    """What is not 0 of `basis_pieces`: (splines, 4 pieces from its first, 4 powers)."""
    spline = np.arange(pieces.shape[2])
    return np.stack([pieces[spline + piece, :, spline] for piece in range(SPAN)], axis=1)


def _recursion(knots: Real) -> Real:
    """Spans as of `basis_spans`, from those of lower degree (C. de Boor, J. Approx. Theory 6, 50 (1972))."""
    spans = np.zeros((len(knots) - 1, 1, SPAN))
    spans[:, 0, 0] = 1.0
    for degree in range(1, SPAN):
        count = len(spans) - 1
        rising, falling = knots[:count], knots[degree + 1 :]
        higher = np.zeros((count, degree + 1, SPAN))
        for piece in range(degree + 1):
            ends = np.stack((knots[piece : piece + count], knots[piece + 1 : piece + 1 + count]))
            if piece < degree:
                higher[:, piece] += _times_line(
                    spans[:-1, piece], (ends - rising) / (knots[degree:-1] - rising)
                )
            if piece > 0:
                higher[:, piece] += _times_line(
                    spans[1:, piece - 1], (falling - ends) / (falling - knots[1 : count + 1])
                )
        spans = higher
    return spans


def _times_line(powers: Real, ends: Real) -> Real:
    """Polynomials in t (splines, 4) times the lines that have `ends` (2, splines) at t = 0 and 1."""
    result = powers * ends[0][:, None]
    result[:, 1:] += powers[:, :-1] * (ends[1] - ends[0])[:, None]
    return np.asarray(result)


def basis_values(knots: Real, pieces: Real, omega: Real) -> Real:
    """The B-splines at omega between the knots: shape (places, splines)."""
    piece = np.clip(np.searchsorted(knots, omega, side="right") - 1, 0, len(knots) - 2)
    t = (omega - knots[piece]) / np.diff(knots)[piece]
    powers, spans = t[:, None] ** np.arange(SPAN), basis_spans(pieces)
    result = np.zeros((len(omega), len(spans)))
    for span in range(SPAN):
        spline = piece - span
        there = (spline >= 0) & (spline < len(spans))
        result[there, spline[there]] = np.einsum("im,im->i", powers[there], spans[spline[there], span])
    return result


def basis_transforms(knots: Real, pieces: Real, omega: Real) -> Real:
    """(2/pi) PV int_0^inf w B(w)/(w^2 - omega^2) dw of each B-spline, omega real: (places, splines)."""
    unit, spans = knots[-1], basis_spans(pieces)
    result = np.empty((len(omega), len(spans)))
    for start in range(0, len(omega), BLOCK):
        places = omega[start : start + BLOCK] / unit
        moments = monomial_cauchy(knots / unit, places) + monomial_cauchy(knots / unit, -places)
        result[start : start + BLOCK] = _combined(moments, spans) / np.pi
    return result


def _combined(moments: Real, spans: Real) -> Real:
    """Sums over the pieces of each spline and their powers: (places, splines)."""
    count = len(spans)
    parts = (np.einsum("ijm,jm->ij", moments[:, k : k + count], spans[:, k]) for k in range(SPAN))
    return np.asarray(sum(parts))
