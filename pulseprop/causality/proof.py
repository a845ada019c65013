"""From the dual vector of a programme with some masses to a proof about all of them.

Weights w of the rows prove that no material of the class has the data within t uncertainties,

    t = (w . data - price limit) / sum |w| error,

where w . column <= price strength for every column of the class: every spline, a mass at any place outside,
the constant. (Without a limit on the strength the price is 0.) The dual vector of a programme keeps this at
the places of its own masses, and misses it a little elsewhere. It is brought back into the proof by a share
of weights that keep it with room to spare: more of the reddest row of n, less of the bluest and of all k.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_class import Masses, PassiveClass

__all__ = ["Proof", "favoured_masses", "proven"]

Real = NDArray[np.float64]

ROUNDING = 2e-15
"""Share of the sum of |w| by which every column is kept below 0: what rounding may take from a sum."""
ROUNDS = 8
BLENDS = np.geomspace(1e-6, 1e6, 97)
"""Ratios in which the two ways inward are tried."""


@dataclass(frozen=True, eq=False)
class Proof:
    """weights: w, (R + K,), sum |w| error = 1. price of one unit of strength. factor: proven least factor."""

    weights: Real
    price: float
    factor: float


def favoured_masses(cls: PassiveClass, weights: Real, price: float, least: float = 0.0) -> Masses:
    """Masses outside that the weights (R + K,) favour locally most, and by more than `least`."""
    index = weights[: len(cls.rows)]
    found = [side.favoured(index, np.pi * price) for side in cls.sides]
    below, above = (places[values > least] for places, values in found)
    return Masses(below, above if cls.limit is None else above[np.isfinite(above)])


def proven(
    cls: PassiveClass, weights: Real, price: float, rows: NDArray[np.bool_] | None = None
) -> Proof | None:
    """The proof next to weights (R + K,), price >= 0; None where there is none nearby.

    rows: (R + K,), those of k that may take part; all unless given. Where splines that only lower limits
    hold stand in the way of the rows of n, the rows of k alone.
    """
    weights = np.where(cls.least, np.maximum(weights, 0.0), weights)
    weights = np.where(_of_no_use(cls), 0.0, weights)
    of_k = np.where(np.arange(len(weights)) < len(cls.rows), 0.0, weights)
    if len(cls.rows) == 1:
        return _brought_in(cls, of_k, price, rows)  # one row of n alone can be anything
    found = _brought_in(cls, weights, price, rows)
    return _brought_in(cls, of_k, price, rows) if found is None and np.any(cls.least) else found


def _brought_in(
    cls: PassiveClass, weights: Real, price: float, rows: NDArray[np.bool_] | None
) -> Proof | None:
    """The weights moved inward until they are a proof; None where they do not become one."""
    ways = _ways_inward(cls, rows)
    for _ in range(ROUNDS):
        shares = _needed(cls, weights, price, ways)
        if shares is None:
            return None
        if not np.any(shares):
            return _normalised(cls, weights, price)
        weights = weights + shares @ ways
    return None


def _normalised(cls: PassiveClass, weights: Real, price: float) -> Proof:
    size = float(np.abs(weights) @ cls.error) or 1.0
    missed = float(weights @ cls.target) - price * (cls.limit or 0.0)
    return Proof(weights / size, price / size, max(missed / size, 0.0))


def _of_no_use(cls: PassiveClass) -> NDArray[np.bool_]:
    """Lower limits, (R + K,), under a spline that no other row of k holds: they cannot take part."""
    k_rows = np.arange(len(cls.target)) >= len(cls.rows)
    loose = ~np.any(cls.spline_columns[k_rows & ~cls.least] > 0, axis=0)
    under = np.any(cls.spline_columns[:, loose] > 0, axis=1)
    return np.asarray(cls.least & under)


def _ways_inward(cls: PassiveClass, rows: NDArray[np.bool_] | None) -> Real:
    """Weights (3, R + K) that no column favours, but those of splines that none of the rows holds from above.

    +1 on the reddest row of n with -1 on the bluest: the constant is on the border; the same with so little
    on the reddest that a mass at s = 0 is; -1 on each row of k that holds splines from above.
    """
    count = len(cls.rows)
    ways = np.zeros((3, len(cls.target)))
    if count > 1:
        ways[:2, 0] = 1.0, (cls.rows[0] / cls.rows[-1]) ** 2
        ways[:2, count - 1] = -1.0
    free = cls.least if rows is None else cls.least | ~rows
    ways[2, count:] = np.where(free[count:], 0.0, -1.0)
    held = -ways[2] @ cls.spline_columns
    some = held > 0
    for way in ways[:2]:
        pull = (way @ cls.spline_columns)[some] / held[some]
        way += max(float(np.max(pull, initial=0.0)), 0.0) * ways[2]
    return ways


def _needed(cls: PassiveClass, weights: Real, price: float, ways: Real) -> Real | None:
    """Shares (3,) of the ways inward that take every column below 0; None where they cannot."""
    allowed = -ROUNDING * float(np.sum(np.abs(weights)))
    of_splines, of_masses = _favours(cls, weights, price, ways)
    alone = not np.any(weights[: len(cls.rows)])  # without rows of n masses are favoured by exactly 0
    outside = np.zeros(2) if alone else _cheapest(cls, *of_masses, allowed, ways)
    if outside is None:
        return None
    favour, room = of_splines
    touched = (weights != 0) @ (cls.spline_columns != 0)
    over = np.where(touched, favour - outside @ room[:2] - allowed, 0.0)
    if np.any((over > 0) & (room[2] <= 0)):
        return None
    within = float(np.max(over[over > 0] / room[2][over > 0], initial=0.0))
    return np.append(outside, within * (1 + 1e-6))


def _cheapest(cls: PassiveClass, favour: Real, room: Real, allowed: float, ways: Real) -> Real | None:
    """Shares (2,) of the first two ways that take all masses below 0 at the least loss of proof."""
    over = favour - allowed
    bad = over > 0
    if not np.any(bad):
        return np.zeros(2)
    blends = np.stack((1 / (1 + BLENDS), BLENDS / (1 + BLENDS)), axis=1)
    rooms = blends @ room[:2, bad]
    with np.errstate(divide="ignore"):
        share = np.max(np.where(rooms > 0, over[bad] / rooms, np.inf), axis=1)
    loss = share * (blends @ (np.abs(ways[:2]) @ cls.error - ways[:2] @ cls.target))
    best = int(np.argmin(np.where(np.isfinite(share), loss, np.inf)))
    return blends[best] * share[best] * (1 + 1e-6) if np.isfinite(share[best]) else None


def _favours(
    cls: PassiveClass, weights: Real, price: float, ways: Real
) -> tuple[tuple[Real, Real], tuple[Real, Real]]:
    """By how much weights favour splines and locally favoured masses, and room of each way inward there."""
    strengths = cls.splines.strengths() if cls.splines is not None else np.zeros(0)
    of_splines = weights @ cls.spline_columns - price * strengths, -ways @ cls.spline_columns
    count = len(cls.rows)
    found = [side.favoured(weights[:count], np.pi * price) for side in cls.sides]
    rooms = [
        -ways[:, :count] @ side.columns(places) for side, (places, _) in zip(cls.sides, found, strict=True)
    ]
    favour = np.concatenate([values for _, values in found])
    return of_splines, (favour, np.concatenate(rooms, axis=1))
