"""A conflict checked for itself, without the solver that found it: on the whole axis, not on samples.

With weights w of rows f the sum over w f must not exceed price times strength for any part of a material:
each B-spline of k (some hundred numbers), the constant, and a mass anywhere outside the rows. Of the mass at
the distance S from the outermost row, on x = ln S, the sum is one of logistic curves; on each stretch of x it
is held between its Taylor polynomial and the greatest fourth derivative, and stretches are halved until
nothing is left open.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.conflict import Conflict
from pulseprop.causality.passive_data import PassiveData
from pulseprop.numerics.knots import outside_knots
from pulseprop.numerics.spline_basis import basis_pieces, basis_transforms, basis_values

__all__ = ["Checked", "check_conflict"]

Real = NDArray[np.float64]

FOURTH = 0.13
"""No fourth derivative of 1/(1 + exp(-x)) is larger."""
FIRST = 0.25
"""Half width of the first stretches."""
LEAST = 1e-7
"""Half width below which a stretch that is still open counts as one where the conflict fails."""
ROUNDING = 4e-15
"""Share of the sum of |w| that rounding of a sum may make of nothing."""
REACH = 40.0
"""Logarithm beyond the scales of the rows from which on the sum is its limit, to rounding."""
BLOCK = 2048


@dataclass(frozen=True, kw_only=True)
class Checked:
    """holds: whether no part of any material exceeds the conflict. worst: the largest excess that could not
    be ruled out, 0 or less where it holds. factor: worked out anew from weights, values and errors."""

    holds: bool
    worst: float
    factor: float


def check_conflict(data: PassiveData, conflict: Conflict) -> Checked:
    """Whether the conflict proves its factor for the data."""
    index = [row for row in conflict.rows if row.quantity == "n"]
    of_k = [row for row in conflict.rows if row.quantity == "k"]
    unit = float(data.omega[-1]) if data.k_omega is None else float(max([*data.omega[-1:], data.k_omega[-1]]))
    price = conflict.price * unit**2
    worst = [0.0 if _one_sided(data, conflict) else np.inf]
    places, weights = data.omega[[row.row for row in index]] / unit, np.array([row.weight for row in index])
    if len(index):
        worst += [
            _worst_mass(weights * sign, away, price, stretch)
            for sign, away, stretch in _outside(data, places, unit)
        ]
    if data.k_omega is not None:
        rows, of_rows = np.array([row.row for row in of_k], dtype=int), np.array([row.weight for row in of_k])
        worst.append(_worst_spline(data.k_omega / unit, places, weights, rows, of_rows, price))
    size = sum(abs(row.weight) * row.error for row in conflict.rows)
    missed = sum(row.weight * row.value for row in conflict.rows) - conflict.most
    largest = max(worst) - ROUNDING
    return Checked(holds=largest <= 0, worst=largest, factor=missed / size if size else 0.0)


def _one_sided(data: PassiveData, conflict: Conflict) -> bool:
    """Whether lower limits are used as lower limits."""
    least = data.least
    return least is None or all(
        row.weight >= 0 for row in conflict.rows if row.quantity == "k" and least[row.row]
    )


def _outside(data: PassiveData, places: Real, unit: float) -> list[tuple[int, Real, tuple[float, float]]]:
    """Sign, distances of the rows, and (least, greatest) S of each stretch of masses outside."""
    every = np.concatenate((data.omega, np.zeros(0) if data.k_omega is None else data.k_omega)) / unit
    first, last = float(np.min(every)), float(np.max(every))
    low, high = float(data.omega[0]) / unit, float(data.omega[-1]) / unit
    clear = data.knowledge.transparent
    down, up = [(0.0, first)], [(last, np.inf)]
    if clear is not None:
        a, b = clear[0] / unit, clear[1] / unit
        down = [part for part in ((0.0, min(first, a)), (b, first)) if part[0] < part[1]]
        up = [part for part in ((last, a), (max(last, b), np.inf)) if part[0] < part[1]]
    away_down, away_up = (places - low) * (places + low), (high - places) * (high + places)
    below = [(-1, away_down, ((low - to) * (low + to), (low - at) * (low + at))) for at, to in down]
    above = [(1, away_up, ((at - high) * (at + high), (to - high) * (to + high))) for at, to in up]
    return below + above


def _worst_mass(weights: Real, away: Real, price: float, stretch: tuple[float, float]) -> float:
    """Largest sum of weights S/(S + away) - pi price S that cannot be ruled out on the stretch of S."""
    scales = away[away > 0]
    span = (np.log(np.min(scales)), np.log(np.max(scales))) if len(scales) else (0.0, 0.0)
    low = max(np.log(stretch[0]) if stretch[0] > 0 else -np.inf, span[0] - REACH)
    high = min(np.log(stretch[1]), span[1] + REACH)
    ends = [float(np.sum(weights[away == 0]))] if stretch[0] == 0 else []
    if np.isinf(stretch[1]):
        ends.append(float(np.sum(weights)) if price == 0 else 0.0)
    count = max(int(np.ceil((high - low) / (2 * FIRST))), 1)
    half = (high - low) / (2 * count)
    middle = low + half * (2 * np.arange(count) + 1)
    return max([_bounded(weights, np.log(np.maximum(away, 1e-300)), np.pi * price, middle, half), *ends])


def _bounded(weights: Real, scale: Real, price: float, middle: Real, half: float) -> float:
    worst = -np.inf
    while len(middle):
        top = np.concatenate(
            [
                _greatest(weights, scale, price, middle[at : at + BLOCK], half)
                for at in range(0, len(middle), BLOCK)
            ]
        )
        settled = top <= ROUNDING
        worst = max(worst, float(np.max(top[settled], initial=-np.inf)))
        middle = middle[~settled]
        if len(middle) and half < LEAST:
            return float(np.max(top))
        half /= 2
        middle = np.concatenate((middle - half, middle + half))
    return worst


def _greatest(weights: Real, scale: Real, price: float, middle: Real, half: float) -> Real:
    """Upper bound of the sum on middle +- half, (stretches,)."""
    share = 1 / (1 + np.exp(np.minimum(scale - middle[:, None], 700.0)))
    first = share * (1 - share)
    cost = price * np.exp(middle)
    value = share @ weights - cost
    slope = first @ weights - cost
    bend = (first * (1 - 2 * share)) @ weights - cost
    third = (first * (1 - 6 * share + 6 * share**2)) @ weights - cost
    steep = np.abs(slope)
    vertex = np.where(bend < 0, steep / np.where(bend < 0, -bend, 1.0), np.inf)
    to = np.minimum(vertex, half)
    rest = (FOURTH * float(np.sum(np.abs(weights))) + cost * np.exp(half)) * half**4 / 24
    return np.asarray(value + steep * to + bend * to**2 / 2 + np.abs(third) * half**3 / 6 + rest)


def _worst_spline(
    k_rows: Real, places: Real, weights: Real, rows: NDArray[np.intp], of_rows: Real, price: float
) -> float:
    """Largest sum over a B-spline of k, its strength by quadrature."""
    below, above = outside_knots(k_rows)
    knots = np.concatenate((below[-4:-1], k_rows, above[1:4]))
    pieces = basis_pieces(knots)
    total = of_rows @ basis_values(knots, pieces, k_rows[rows]) if len(rows) else np.zeros(len(knots) - 4)
    if len(places):
        total = total + weights @ basis_transforms(knots, pieces, places)
    nodes, parts = np.polynomial.legendre.leggauss(4)
    at = (knots[:-1, None] + knots[1:, None]) / 2 + np.diff(knots)[:, None] / 2 * nodes
    area = (np.diff(knots)[:, None] / 2 * parts * 2 * at).ravel()
    return float(np.max(total - price * (area @ basis_values(knots, pieces, at.ravel()))))
