"""Could lines too narrow for the rows explain a conflict? Lines are tried in a few gaps between rows.

With narrow lines allowed between all rows every table is possible; so they are allowed a quarter of the gap
from any row, in at most three neighbouring gaps, and in a few such windows, one after another, each where the
rows that still disagree ask for it most. Where they bring the factor to 1, or down by 4, the rows cannot tell
wrong numbers from lines that they missed.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.least_factor import FLOOR, TOLERABLE, Attained
from pulseprop.causality.passive_class import PassiveClass
from pulseprop.causality.proof import Proof
from pulseprop.errors import NumericalLimit
from pulseprop.numerics.box_programme import solve_box

__all__ = ["UnresolvedLine", "unresolved_line"]

Real = NDArray[np.float64]
Bools = NDArray[np.bool_]

SHARES = np.array([1 / 4, 1 / 2, 3 / 4])
"""Places of lines in a gap. Nearer to a row, a line is as good as a wrong row."""
WINDOW = 3
"""Neighbouring gaps in which lines may lie together."""
WINDOWS = 3
"""Windows where k is given: a line wider than a third of a gap shows in k, and mistakes of whole columns
still fall by 1.2 to 3."""
WINDOWS_OF_INDEX = 6
"""Windows where only n is given: four lines of up to four gaps width need up to six, one in a hundred of
such tables more than five (measured)."""
TRIED = 3
"""Windows that are tried for each that is taken."""
FALL = 4.0
"""Fall of the factor that leaves the question open."""
CARRYING = 1e-3
"""Share of the weights from which on a row takes part when windows are compared."""
ACCURACY = 3e-3
"""Of the programmes: a fall by 4 is told from one by 3.9 or so."""


@dataclass(frozen=True, kw_only=True)
class UnresolvedLine:
    """Lines that would bring the factor down to `factor`, in so many `windows` of three neighbouring gaps.

    omega: of the one that changes the rows most, rad/s; rows `spacing` (rad/s) apart would show whether it is
    there.
    """

    omega: float
    factor: float
    spacing: float
    windows: int


def unresolved_line(cls: PassiveClass, attained: Attained, proof: Proof) -> UnresolvedLine | None:
    """The lines that explain the conflict, None where none do."""
    if len(cls.rows) < 2:
        return None
    lines = _Lines(cls, attained)
    weights, enough = proof.weights, max(1.0, attained.factor / FALL)
    for windows in range(1, 1 + (WINDOWS if len(cls.k_rows) else WINDOWS_OF_INDEX)):
        found = lines.widened(weights)
        if found is None:
            return None
        if found.factor <= enough:
            omega, spacing = lines.strongest(found.amounts)
            return UnresolvedLine(omega=omega, factor=found.factor, spacing=spacing, windows=windows)
        weights = found.weights
    return None


@dataclass(frozen=True, eq=False)
class _Explained:
    """Factor with the lines of the open gaps, their amounts, and weights of the rows that still disagree."""

    factor: float
    amounts: Real
    weights: Real


class _Lines:
    """Lines in the gaps between rows; `open`: gaps where they are allowed by now."""

    def __init__(self, cls: PassiveClass, attained: Attained) -> None:
        self.cls = cls
        self.rows = np.union1d(cls.rows, cls.k_rows)
        self.places = (self.rows[:-1, None] + SHARES * np.diff(self.rows)[:, None]).ravel()
        apart = (self.places - cls.rows[:, None]) * (self.places + cls.rows[:, None])
        nearest = np.min(np.abs(apart), axis=0)
        self.columns = np.pad(nearest / apart, ((0, len(cls.k_rows)), (0, 0)))
        self.strengths = np.pi * nearest
        self.open = np.zeros(len(self.rows) - 1, dtype=bool)
        self.known = cls.matrix(attained.masses), cls.strengths(attained.masses)

    def widened(self, weights: Real) -> _Explained | None:
        """With the window that explains most of the rows that carry the weights; None where none would."""
        share = np.abs(weights) * self.cls.error
        carrying = share > CARRYING * np.sum(share)
        tried = [(self._solved(window, carrying), window) for window in self._promising(weights)]
        solved = [(found.factor, at) for at, (found, _) in enumerate(tried) if found is not None]
        if not solved:
            return None
        self.open = tried[min(solved)[1]][1]
        return self._solved(self.open, np.ones(len(weights), dtype=bool))

    def strongest(self, amounts: Real) -> tuple[float, float]:
        """Where the line lies that changes the rows most, and a quarter of its gap, both rad/s."""
        at = int(np.flatnonzero(self._allowed(self.open))[np.argmax(amounts)])
        gap = float(np.diff(self.rows)[at // len(SHARES)])
        return float(self.places[at]) * self.cls.unit, gap * self.cls.unit / 4

    def _promising(self, weights: Real) -> Iterator[Bools]:
        """Open gaps with one more window, those that the weights favour most, of one peak only once."""
        favour = (weights @ self.columns) / np.max(np.abs(self.columns) / self.cls.error[:, None], axis=0)
        of_gap = np.maximum(np.max(favour.reshape(-1, len(SHARES)), axis=1), 0.0)
        of_gap[self.open] = 0.0
        width = min(WINDOW, len(of_gap))
        of_window = np.convolve(of_gap, np.ones(width), mode="valid")
        for _ in range(TRIED):
            start = int(np.argmax(of_window))
            if of_window[start] <= 0:
                return
            also = self.open.copy()
            also[start : start + width] = True
            yield also
            of_window[max(start - 1, 0) : start + 2] = 0.0

    def _allowed(self, gaps: Bools) -> Bools:
        return np.repeat(gaps, len(SHARES))

    def _solved(self, gaps: Bools, rows: Bools) -> _Explained | None:
        """With lines in these gaps on these rows; None where the programme is not solved."""
        cls, allowed = self.cls, self._allowed(gaps)
        matrix = np.concatenate((self.known[0], self.columns[:, allowed]), axis=1)[rows]
        target, error, least = cls.target[rows], cls.error[rows], cls.least[rows]
        lower, upper, stretch = target, np.where(least, np.inf, target), error
        if cls.limit is not None:
            strengths = np.concatenate((self.known[1], self.strengths[allowed])) / cls.limit
            matrix = np.concatenate((matrix, strengths[None]))
            lower, upper, stretch = np.append(lower, -np.inf), np.append(upper, 1.0), np.append(stretch, 0.0)
        try:
            found = solve_box(
                matrix, lower, upper, stretch=stretch, accuracy=ACCURACY, floor=FLOOR, tolerable=TOLERABLE
            )
        except NumericalLimit:
            return None
        count = len(target)
        amounts = np.maximum(found.x, 0.0)
        if cls.limit is not None:
            amounts = amounts / max(float(matrix[-1] @ amounts), 1.0)
        value = matrix[:count] @ amounts
        missed = np.where(least, np.maximum(target - value, 0.0), np.abs(value - target))
        weights = np.zeros(len(cls.target))
        weights[rows] = found.dual[:count]
        return _Explained(float(np.max(missed / error)), amounts[len(self.known[1]) :], weights)
