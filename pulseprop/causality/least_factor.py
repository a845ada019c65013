"""The least factor by which the uncertainties must be stretched, between a material and a proof.

A programme with masses at some places, then with masses added where its dual vector favours them most, until
what the material attains and what is proven for all places agree (exchange: R. Hettich and K. O. Kortanek,
SIAM Rev. 35, 380 (1993)).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_class import Masses, PassiveClass
from pulseprop.causality.proof import Proof, favoured_masses, proven
from pulseprop.errors import NumericalLimit
from pulseprop.numerics.box_programme import solve_box

__all__ = ["FLOOR", "GAP", "Attained", "factor_with", "least_factor"]

Real = NDArray[np.float64]

GAP = 1e-3
"""Largest difference of attained and proven factor, over the attained one."""
FLOOR = 1e-2
"""The gap of a factor below this is taken over this: the numbers fit a hundred times better than stated."""
ROUNDS = 12
ACCURACY = (6e-4, 3e-4)
"""Of the programmes one after another, and of all further ones: early ones have not the final masses yet."""
NEAR = (-np.inf, 0.0)
"""How much the weights must favour a mass for it to join; at first all that they favour locally most do."""
TOLERABLE = 0.1
"""Accuracy at which a programme that rounding has stopped is still worth a look: the proof decides."""


@dataclass(frozen=True, eq=False)
class Attained:
    """A material: amounts of the columns of `PassiveClass.matrix(masses)`; factor: the stretch it needs."""

    masses: Masses
    amounts: Real
    factor: float


def least_factor(cls: PassiveClass) -> tuple[Attained, Proof]:
    """The best material found and the best proof.

    Raises NumericalLimit where they do not come within GAP of each other.
    """
    masses = cls.first_masses()
    best, proof = None, Proof(np.zeros(len(cls.target)), 0.0, 0.0)
    for turn in range(ROUNDS):
        attained, weights, price = _solved(cls, masses, ACCURACY[min(turn, len(ACCURACY) - 1)])
        best = attained if best is None or attained.factor < best.factor else best
        found = proven(cls, weights, price)
        proof = found if found is not None and found.factor > proof.factor else proof
        if best.factor - proof.factor <= GAP * max(best.factor, FLOOR):
            return best, proof
        least = NEAR[min(turn, len(NEAR) - 1)]
        masses = masses.joined(favoured_masses(cls, weights, price, least))
    raise NumericalLimit(
        "the uncertainty factor could not be proven",
        value=f"between {proof.factor:.6g} and {best.factor if best else np.inf:.6g}",
        allowed=f"a difference of {GAP:g} of it",
        remedy="Give fewer rows, or larger uncertainties: these are near the limit of double precision",
    )


def _solved(cls: PassiveClass, masses: Masses, accuracy: float) -> tuple[Attained, Real, float]:
    """The material of these masses, weights of the rows and the price of strength."""
    matrix, strengths = cls.matrix(masses), cls.strengths(masses)
    every = np.ones(len(cls.target), dtype=bool)
    amounts, weights, price = _programme(cls, matrix, strengths, every, accuracy)
    return Attained(masses, amounts, float(np.max(_stretch(cls, matrix @ amounts)))), weights, price


def factor_with(
    cls: PassiveClass, masses: Masses, lines: Real, strengths: Real, rows: NDArray[np.bool_]
) -> tuple[float, Real]:
    """Least factor on some rows (R + K,) where materials may have further columns, and the amounts of these.

    lines: (R + K, any), of the given strengths. Masses are not added.
    """
    matrix = np.concatenate((cls.matrix(masses), lines), axis=1)
    every = np.concatenate((cls.strengths(masses), strengths))
    amounts, _, _ = _programme(cls, matrix, every, rows, ACCURACY[-1])
    factor = float(np.max(_stretch(cls, matrix @ amounts)[rows]))
    return factor, amounts[len(amounts) - len(strengths) :]


def _programme(
    cls: PassiveClass, matrix: Real, strengths: Real, rows: NDArray[np.bool_], accuracy: float
) -> tuple[Real, Real, float]:
    """Amounts of the columns, weights of the chosen rows and the price of strength."""
    matrix, lower, stretch = matrix[rows], cls.target[rows], cls.error[rows]
    upper = np.where(cls.least[rows], np.inf, lower)
    if cls.limit is not None:
        matrix = np.concatenate((matrix, strengths[None] / cls.limit))
        lower, upper, stretch = np.append(lower, -np.inf), np.append(upper, 1.0), np.append(stretch, 0.0)
    found = solve_box(
        matrix,
        lower,
        upper,
        stretch=stretch,
        accuracy=accuracy,
        floor=FLOOR,
        tolerable=max(accuracy, TOLERABLE),
    )
    amounts, weights, price = np.maximum(found.x, 0.0), found.dual, 0.0
    if cls.limit is not None:
        weights, price = weights[:-1], max(-float(weights[-1]), 0.0) / cls.limit
        amounts = amounts / max(float(matrix[-1] @ amounts), 1.0)
    return amounts, weights, price


def _stretch(cls: PassiveClass, value: Real) -> Real:
    """By how much each row misses, over its uncertainty: (R + K,)."""
    missed = np.where(cls.least, np.maximum(cls.target - value, 0.0), np.abs(value - cls.target))
    return np.asarray(missed / cls.error)
