"""Fast Cauchy integrals of a piecewise cubic: many pieces of any lengths onto many places.

    F(z) = int density(w) / (w - z) dw,   the density a cubic on each piece.

A piece near z is integrated in closed form. A piece far from it stands as Gauss-Legendre charges, and far
groups of pieces as charges on Chebyshev nodes of their common stretch (interpolation of the kernel: W. Fong
and E. Darve, J. Comput. Phys. 228, 8712 (2009), here in one dimension and with the places left as they are).
Groups halve in number of pieces from level to level, so uneven rows cost no more than even ones: work grows
as places times log(pieces).
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.numerics.principal_value import cubic_cauchy, polynomial

__all__ = ["Level", "cauchy_levels", "monomial_cauchy", "piecewise_cauchy", "piecewise_value"]

Real = NDArray[np.float64]
Complex = NDArray[np.complex128]
Numbers = NDArray[np.inexact[Any]]
Indices = NDArray[np.intp]

SEPARATION = 3.0
"""A group is far when |z - centre| is at least this many half lengths: errors fall as 5.83^-nodes there."""
NODES = 19
"""Chebyshev nodes of a group: 5.83^-19 = 3e-15."""
GAUSS_NODES = 12
"""Gauss-Legendre nodes of one piece, exact to twice their number: 5.83^-21 for a cubic."""
BLOCK = 2048
"""Places handled together: working arrays stay in the cache, and memory under a few MB."""


@dataclass(frozen=True)
class Level:
    """Groups of pieces: centre and half length (groups,), nodes and charges (groups, nodes)."""

    centre: Real
    half: Real
    nodes: Real
    charges: Real


def piecewise_value(edges: Real, coefficients: Real, omega: Numbers) -> Numbers:
    """The density at real omega, 0 outside the edges; coefficients as in `piecewise_cauchy`."""
    inside = (omega >= edges[0]) & (omega <= edges[-1])
    piece = np.clip(np.searchsorted(edges, omega, side="right") - 1, 0, len(edges) - 2)
    t = (omega - edges[piece]) / (edges[piece + 1] - edges[piece])
    return np.where(inside, polynomial(t, coefficients[piece]), 0.0)


def piecewise_cauchy(
    edges: Real, coefficients: Real, z: Numbers, levels: list[Level] | None = None
) -> Numbers:
    """F(z), shape of z; real z gives the principal value.

    edges: ascending, shape (pieces + 1,). coefficients: (pieces, 4) in t = (w - left)/(right - left). z: any
    shape, real or complex off the axis. Relative error about 1e-13 of int |density / (w - z)|, more only
    where that itself diverges. At an edge the logarithm is left out (see `principal_value`): the limit where
    the density is continuous. levels: of the same edges and coefficients, if at hand.
    """
    places = np.asarray(z).ravel()
    levels = cauchy_levels(edges, coefficients) if levels is None else levels
    result = np.empty(places.shape, dtype=np.result_type(places, np.float64))
    for start in range(0, len(places), BLOCK):
        block = places[start : start + BLOCK]
        result[start : start + BLOCK] = _block(levels, edges, coefficients, block)
    return result.reshape(np.shape(z))


def cauchy_levels(edges: Real, coefficients: Real) -> list[Level]:
    """The charges of all groups: the pieces first, then pairs of neighbours, up to one group of all."""
    levels = [_pieces(edges, coefficients)]
    size = 2
    while len(levels[-1].centre) > 1:
        low = edges[: len(coefficients) : size]
        high = np.append(edges[size : len(coefficients) : size], edges[-1])
        levels.append(_joined(levels[-1], low, high))
        size *= 2
    return levels


def _pieces(edges: Real, coefficients: Real) -> Level:
    x, weight = np.polynomial.legendre.leggauss(GAUSS_NODES)
    length = np.diff(edges)
    t = (1 + x) / 2
    nodes = edges[:-1, None] + length[:, None] * t
    charges = length[:, None] * (weight / 2) * polynomial(t, coefficients[:, None, :])
    return Level((edges[:-1] + edges[1:]) / 2, length / 2, nodes, np.asarray(charges))


def _joined(below: Level, low: Real, high: Real) -> Level:
    """Charges of neighbours carried to the Chebyshev nodes of their union, by Chebyshev moments."""
    count = len(low)
    centre, half = (low + high) / 2, (high - low) / 2
    width = 2 * below.nodes.shape[1]
    charges = np.zeros((2 * count, width // 2))
    charges[: len(below.charges)] = below.charges
    nodes = np.repeat(centre, 2)[:, None] * np.ones(width // 2)
    nodes[: len(below.nodes)] = below.nodes
    charges = charges.reshape(count, width)
    x = (nodes.reshape(count, width) - centre[:, None]) / half[:, None]
    moments = np.stack([np.sum(charges * t, axis=1) for t in _chebyshev(x)], axis=1)
    angle = np.pi * (np.arange(NODES) + 0.5) / NODES
    spread = (
        np.cos(np.arange(NODES)[:, None] * angle) * np.where(np.arange(NODES) == 0, 1, 2)[:, None] / NODES
    )
    return Level(centre, half, centre[:, None] + half[:, None] * np.cos(angle), moments @ spread)


def _chebyshev(x: Real) -> Iterator[Real]:
    """T_0(x), T_1(x), … up to NODES of them."""
    before, now = np.ones_like(x), x
    yield before
    for _ in range(NODES - 1):
        yield now
        before, now = now, 2 * x * now - before


def _block(levels: list[Level], edges: Real, coefficients: Real, z: Numbers) -> Numbers:
    total = np.zeros_like(z, dtype=np.result_type(z, np.float64))
    place = np.arange(len(z))
    group = np.zeros(len(z), dtype=np.intp)
    for depth in range(len(levels) - 1, -1, -1):
        level = levels[depth]
        far = np.abs(z[place] - level.centre[group]) >= SEPARATION * level.half[group]
        _add(total, place[far], _from_charges(level, group[far], z[place[far]]))
        place, group = place[~far], group[~far]
        if depth:
            place, group = _children(place, group, len(levels[depth - 1].centre))
    near = cubic_cauchy(z[place], edges[group], edges[group + 1], coefficients[group])
    _add(total, place, near)
    return total


def _children(place: Indices, group: Indices, count: int) -> tuple[Indices, Indices]:
    group = np.concatenate((2 * group, 2 * group + 1))
    present = group < count
    return np.concatenate((place, place))[present], group[present]


def _from_charges(level: Level, group: Indices, z: Numbers) -> Numbers:
    return np.asarray(np.sum(level.charges[group] / (level.nodes[group] - z[:, None]), axis=1))


def _add(total: Numbers, place: Indices, share: Numbers) -> None:
    count = len(total)
    if np.iscomplexobj(total):
        total.real += np.bincount(place, share.real, count)
        total.imag += np.bincount(place, share.imag, count)
    else:
        total += np.bincount(place, share.real, count)


def monomial_cauchy(edges: Real, z: Real) -> Real:
    """int t^m / (w - z) dw over each piece for m = 0 … 3: shape (places, pieces, 4); z real, (places,).

    The whole matrix, for fits; t as in `piecewise_cauchy`, and edges likewise without their logarithm.
    """
    left, right = edges[:-1], edges[1:]
    x, weight = np.polynomial.legendre.leggauss(GAUSS_NODES)
    powers = ((1 + x[:, None]) / 2) ** np.arange(4) * (weight[:, None] / 2)
    nodes = left[:, None] + (right - left)[:, None] * (1 + x) / 2
    result = np.empty((len(z), len(left), 4))
    for place, row in zip(z, result, strict=True):
        np.matmul(1 / (nodes - place), powers, out=row)
    result *= (right - left)[:, None]
    place, piece = np.nonzero(np.abs(z[:, None] - (left + right) / 2) < SEPARATION * (right - left) / 2)
    result[place, piece] = cubic_cauchy(z[place, None], left[piece, None], right[piece, None], np.eye(4))
    return result
