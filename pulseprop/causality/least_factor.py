"""The least factor by which the uncertainties must be stretched, between a material and a proof.

A programme with masses at some places, then with masses added where its dual vector favours them, until what
the material attains and what is proven for all places agree (exchange: R. Hettich and K. O. Kortanek, SIAM
Rev. 35, 380 (1993)). (Masses that join on the way to a solution were tried: the interior point recovers from
late ones no faster than it starts anew, and early ones are rarely those that are missing in the end.)
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.passive_class import Masses, PassiveClass
from pulseprop.causality.proof import Proof, favoured_masses, proven
from pulseprop.errors import NumericalLimit
from pulseprop.numerics.box_programme import BoxSolution, Stop, solve_box

__all__ = ["FLOOR", "GAP", "Attained", "factor_with", "least_factor"]

Real = NDArray[np.float64]

GAP = 1e-3
"""Largest difference of attained and proven factor, over the attained one."""
FLOOR = 1e-2
"""The gap of a factor below this is taken over this: the numbers fit a hundred times better than stated."""
ROUNDS = 12
ACCURACY = (6e-4, 3e-4)
"""Of the programmes one after another, and of all further ones; most stop before that."""
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
    search = _Search(cls)
    every = np.ones(len(cls.target), dtype=bool)
    for turn in range(ROUNDS):
        accuracy = ACCURACY[min(turn, len(ACCURACY) - 1)]
        matrix, strengths = cls.matrix(search.masses), cls.strengths(search.masses)
        found = _solved(cls, matrix, strengths, every, accuracy, search.stop)
        if search.closed_by(found):
            return search.best, search.proof
    raise NumericalLimit(
        "the uncertainty factor could not be proven",
        value=f"between {search.proof.factor:.6g} and {search.best.factor:.6g}",
        allowed=f"a difference of {GAP:g} of it",
        remedy="Give fewer rows, or larger uncertainties: these are near the limit of double precision",
    )


class _Search:
    """Best material and best proof so far, and the masses of the programme at hand."""

    def __init__(self, cls: PassiveClass) -> None:
        self.cls, self.masses = cls, cls.first_masses()
        self.best = Attained(self.masses, np.zeros(0), np.inf)
        self.none = self.last = self.proof = Proof(np.zeros(len(cls.target)), 0.0, 0.0)

    @property
    def closed(self) -> bool:
        """Whether best material and best proof are close enough."""
        return self.best.factor - self.proof.factor <= GAP * max(self.best.factor, FLOOR)

    def stop(self, found: BoxSolution) -> bool:
        """Whether a solution on the way will do. One that proves less than that before lacks masses."""
        before, self.last = self.last, self._learnt(found)
        return self.closed or (self.last.factor < before.factor and len(self._more(found)) > len(self.masses))

    def closed_by(self, found: BoxSolution) -> bool:
        """The same of a solution at the end; if it will not do, the masses it favours join."""
        self.last = self._learnt(found)
        if not self.closed:
            self.masses, self.last = self._more(found), self.none
        return self.closed

    def _learnt(self, found: BoxSolution) -> Proof:
        attained, proof = self._attained(found), proven(self.cls, *_weights(self.cls, found)) or self.none
        self.best = attained if attained.factor < self.best.factor else self.best
        self.proof = proof if proof.factor > self.proof.factor else self.proof
        return proof

    def _more(self, found: BoxSolution) -> Masses:
        return self.masses.joined(favoured_masses(self.cls, *_weights(self.cls, found)))

    def _attained(self, found: BoxSolution) -> Attained:
        cls = self.cls
        amounts = _within(cls, found, cls.strengths(self.masses))
        of_splines, of_masses = np.split(amounts, [len(amounts) - len(self.masses)])
        value = cls.spline_columns @ of_splines + cls.mass_columns(self.masses) @ of_masses
        return Attained(self.masses, amounts, float(np.max(_stretch(cls, value))))


def factor_with(
    cls: PassiveClass, masses: Masses, lines: Real, strengths: Real, rows: NDArray[np.bool_]
) -> tuple[float, Real]:
    """Least factor on some rows (R + K,) where materials may have further columns, and the amounts of these.

    lines: (R + K, any), of the given strengths. Masses are not added.
    """
    matrix = np.concatenate((cls.matrix(masses), lines), axis=1)
    every = np.concatenate((cls.strengths(masses), strengths))
    amounts = _within(cls, _solved(cls, matrix, every, rows, ACCURACY[-1]), every)
    factor = float(np.max(_stretch(cls, matrix @ amounts)[rows]))
    return factor, amounts[len(amounts) - len(strengths) :]


def _solved(
    cls: PassiveClass,
    matrix: Real,
    strengths: Real,
    rows: NDArray[np.bool_],
    accuracy: float,
    stop: Stop | None = None,
) -> BoxSolution:
    """The programme of some columns on some rows, with the limit on their strength as the last row."""
    matrix, lower, stretch = matrix[rows], cls.target[rows], cls.error[rows]
    upper = np.where(cls.least[rows], np.inf, lower)
    if cls.limit is not None:
        matrix = np.concatenate((matrix, strengths[None] / cls.limit))
        lower, upper, stretch = np.append(lower, -np.inf), np.append(upper, 1.0), np.append(stretch, 0.0)
    return solve_box(
        matrix,
        lower,
        upper,
        stretch=stretch,
        accuracy=accuracy,
        floor=FLOOR,
        tolerable=max(accuracy, TOLERABLE),
        stop=stop,
    )


def _within(cls: PassiveClass, found: BoxSolution, strengths: Real) -> Real:
    """Amounts of the columns that keep the limit on their strength."""
    amounts = np.maximum(found.x, 0.0)
    if cls.limit is None:
        return amounts
    return np.asarray(amounts / max(float(amounts @ strengths) / cls.limit, 1.0))


def _weights(cls: PassiveClass, found: BoxSolution) -> tuple[Real, float]:
    """Of the rows, and the price of strength."""
    if cls.limit is None:
        return found.dual, 0.0
    return found.dual[:-1], max(-float(found.dual[-1]), 0.0) / cls.limit


def _stretch(cls: PassiveClass, value: Real) -> Real:
    """By how much each row misses, over its uncertainty: (R + K,)."""
    missed = np.where(cls.least, np.maximum(cls.target - value, 0.0), np.abs(value - cls.target))
    return np.asarray(missed / cls.error)
