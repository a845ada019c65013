"""Could a line too narrow for the rows explain a conflict? Lines are tried in a few neighbouring gaps.

With narrow lines allowed between all rows every table is possible; so they are allowed a third of the gap
from any row, and in at most three neighbouring gaps. Where they bring the factor to 1, or down by 4, the rows
cannot tell a wrong number from a line that they missed.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.least_factor import Attained, factor_with
from pulseprop.causality.passive_class import PassiveClass
from pulseprop.causality.proof import Proof

__all__ = ["UnresolvedLine", "unresolved_line"]

Real = NDArray[np.float64]

SHARES = np.array([1 / 3, 2 / 3])
"""Places of lines in a gap. Nearer to a row, a line is as good as a wrong row: at a quarter of the gap one
displaced row falls as far as true data that miss a line (2.6 to 4 against 2.6 to 3.9 times; measured)."""
GAPS = 3
"""Neighbouring gaps in which lines may lie."""
TRIED = 6
"""Windows of gaps that are tried."""
FALL = 4.0
"""Fall of the factor that leaves the question open."""


@dataclass(frozen=True, kw_only=True)
class UnresolvedLine:
    """A line at omega (rad/s) that would bring the factor down to `factor`; rows `spacing` (rad/s) apart
    would show whether it is there."""

    omega: float
    factor: float
    spacing: float


def unresolved_line(cls: PassiveClass, attained: Attained, proof: Proof) -> UnresolvedLine | None:
    """The line that explains most, None where none is enough. Raises NumericalLimit."""
    rows = np.union1d(cls.rows, cls.k_rows)
    if len(rows) < 2 or len(cls.rows) < 2:
        return None
    places = rows[:-1, None] + SHARES * np.diff(rows)[:, None]
    enough = max(1.0, attained.factor / FALL)
    found = [
        (line, window)
        for window in _promising(cls, proof, places)
        if (line := _explained(cls, attained, proof, places[window], enough)) is not None
    ]
    if not found:
        return None
    (factor, place), window = min(found, key=lambda one: one[0][0])
    gap = np.diff(rows)[window][np.searchsorted(rows[window], place, side="right") - 1]
    return UnresolvedLine(omega=place * cls.unit, factor=factor, spacing=float(gap) * cls.unit / 4)


def _promising(cls: PassiveClass, proof: Proof, places: Real) -> list[slice]:
    """Windows of neighbouring gaps whose lines the proof favours most, those of one peak only once."""
    columns = _columns(cls, places.ravel())
    favour = (proof.weights @ columns) / np.max(np.abs(columns) / cls.error[:, None], axis=0)
    of_gap = np.maximum(np.max(favour.reshape(places.shape), axis=1), 0.0)
    width = min(GAPS, len(of_gap))
    of_window = np.convolve(of_gap, np.ones(width), mode="valid")
    chosen: list[slice] = []
    for _ in range(TRIED):
        start = int(np.argmax(of_window))
        if of_window[start] <= 0:
            break
        chosen.append(slice(start, start + width))
        of_window[max(start - 1, 0) : start + 2] = 0.0
    return chosen


def _columns(cls: PassiveClass, places: Real) -> Real:
    """Lines at places inside the rows, the largest change of the index 1: (R + K, places)."""
    apart = _apart(cls, places)
    return np.pad(np.min(np.abs(apart), axis=0) / apart, ((0, len(cls.k_rows)), (0, 0)))


def _apart(cls: PassiveClass, places: Real) -> Real:
    """Distance in s of places from the rows of n: (R, places)."""
    return np.asarray((places - cls.rows[:, None]) * (places + cls.rows[:, None]))


def _explained(
    cls: PassiveClass, attained: Attained, proof: Proof, places: Real, enough: float
) -> tuple[float, float] | None:
    """Factor with lines at these places, and the place of the strongest; None where it is not enough."""
    every = places.ravel()
    strengths = np.pi * np.min(np.abs(_apart(cls, every)), axis=0)
    # the rows of the proof alone rule most lines out, and are few
    for rows in (proof.weights != 0, np.ones(len(cls.target), dtype=bool)):
        factor, amounts = factor_with(cls, attained.masses, _columns(cls, every), strengths, rows)
        if factor > enough:
            return None
    return factor, float(every[np.argmax(amounts)])
