"""Lowest and highest value of a linear functional over all materials of a class, proven from outside.

Weights w of the rows prove  f . x >= w . (rows)  for every material whose columns obey w A <= f. Where
columns violate that by up to r times their size, and all sizes add up to at most M in any material of the
class (one more linear programme, solved once), the proof still holds less r M. The columns outside the band
are a continuum: they are looked at on a fine grid, the worst places are refined, and join the programme until
each end is proven to a small share of the distance between both.
"""

from __future__ import annotations

from collections.abc import Sequence
from contextlib import suppress

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.bounds_materials import Functional, Materials
from pulseprop.errors import NumericalLimit
from pulseprop.numerics.box_programme import solve_box

__all__ = ["Proofs"]

Real = NDArray[np.float64]
Interval = tuple[float, float]

ROUNDS = 15
WELL_WITHIN = 0.05
"""Share of the uncertainties that a material leaves free from which on the programmes have room to start."""
ROUGH = 0.5
"""How far the proof of M may miss."""
ROUGHLY = 1e-2
"""Accuracy of programmes whose value only has to be of the right size."""
FIRST, LAST = 3e-4, 1e-9
"""Accuracy of the first programme of an end, and the best that is asked for."""
TOLERABLE = 1e-2
"""Accuracy at which a programme that rounding has stopped still serves: the proof decides."""
TINY = 1e-30
COUNTS = 0.01
"""Places that violate by less than this share of the worst can wait."""
TOWARDS = (1 / 3, 2 / 3)
"""Shares of the way from a new place to the known ones beside it."""
SHARPER = 0.2
"""Accuracy of the next programme of an end, over that of the last and over what the goal asks for."""
ZOOMS, SHARES = 5, np.linspace(0.0, 1.0, 9)


class Proofs:
    """All proofs about one class of materials: they share its matrix, its size, and the places found useful.

    known: places of a material within the limits, where one is known.

    Raises NumericalLimit where no material of the class keeps within the limits, or nothing limits it.
    """

    def __init__(self, materials: Materials, known: Real | None = None) -> None:
        self.materials = materials
        self.places = materials.coarse if known is None else np.union1d(materials.coarse, known)
        self.grid_columns = materials.continuum(materials.grid)
        self.grid_sizes = self._sizes(self.grid_columns)
        self.fixed_sizes = self._sizes(materials.fixed)
        self._inner = self._room()
        self.total = self._total()
        self._base = self.places

    def interval(self, functional: Functional, given_away: float) -> Interval:
        """Lowest and highest value, each proven to the share `given_away` of the width.

        Raises NumericalLimit where the programmes are not solved.
        """
        low, high = _End(self, functional), _End(self, functional.negative())
        for _ in range(ROUNDS):
            width = max(-high.reached - low.reached, 0.0)
            late = [end for end in (low, high) if end.reached - end.proven > given_away * width]
            if not late:
                break
            with suppress(NumericalLimit):  # what is proven already stays so
                for end in late:
                    end.improve(given_away * width)
                continue
            break
        # the next functional is like this one; those before it no longer matter
        self.places = np.unique(np.concatenate((self._base, low.found, high.found)))
        return low.proven, -high.proven

    def of_material(self, functionals: Sequence[Functional]) -> Real:
        """Values of a material well within the limits."""
        return np.array([self._of_inner(functional) for functional in functionals])

    def _of_inner(self, functional: Functional) -> float:
        places, amounts, _ = self._inner
        return float(np.append(functional.fixed, functional.continuum(places)) @ amounts)

    def solved(self, functional: Functional, places: Real, accuracy: float) -> tuple[Real, float]:
        """Weights of the rows, and the value of the functional that one of the materials has."""
        materials = self.materials
        matrix = np.hstack([materials.fixed, materials.continuum(places)])
        cost = np.append(functional.fixed, functional.continuum(places))
        scale = float(np.max(np.abs(cost)))
        found = solve_box(
            matrix,
            materials.lower,
            materials.upper,
            cost=cost / scale,
            accuracy=accuracy,
            floor=TINY,
            tolerable=max(accuracy, TOLERABLE),
        )
        amounts = np.maximum(found.x, 0.0)
        share = self._inward(matrix @ amounts)
        return found.dual * scale, share * self._of_inner(functional) + (1 - share) * float(cost @ amounts)

    def _inward(self, rows: Real) -> float:
        """Share of the inner material that brings rows back within the limits."""
        inner = self._inner[2]
        over = np.maximum(rows - self.materials.upper, self.materials.lower - rows)
        out = over > 0
        room = np.where(
            rows > self.materials.upper, self.materials.upper - inner, inner - self.materials.lower
        )
        return float(np.max(over[out] / (over[out] + np.maximum(room[out], 0.0)), initial=0.0))

    def worth(self, weights: Real) -> float:
        """What the weights prove where no column violates them."""
        held = weights != 0
        limit = np.where(weights > 0, self.materials.lower, self.materials.upper)
        return float(weights[held] @ limit[held])

    def worst(self, functional: Functional, weights: Real) -> tuple[float, Real]:
        """Largest violation of any column over its size; the places that violate."""
        materials = self.materials
        fixed = (weights @ materials.fixed - functional.fixed) / self.fixed_sizes
        on_grid = (weights @ self.grid_columns - functional.continuum(materials.grid)) / self.grid_sizes
        place, value = self._refined(functional, weights, on_grid)
        largest = float(np.max(np.concatenate((fixed, value))))
        return largest, place[value > max(COUNTS * largest, 0.0)]

    def _excess(self, functional: Functional, weights: Real, q: Real) -> Real:
        """By how much the columns at q violate the weights, over their size."""
        columns = self.materials.continuum(q)
        return np.asarray((weights @ columns - functional.continuum(q)) / self._sizes(columns))

    def _refined(self, functional: Functional, weights: Real, on_grid: Real) -> tuple[Real, Real]:
        """All local maxima, between the points of the grid."""
        padded = np.pad(on_grid, 1, constant_values=-np.inf)
        peak = np.flatnonzero((on_grid >= padded[:-2]) & (on_grid >= padded[2:]))
        least, most = self.materials.least[peak, None], self.materials.most[peak, None]
        for _ in range(ZOOMS):
            tried = least + (most - least) * SHARES
            excess = self._excess(functional, weights, tried.ravel()).reshape(tried.shape)
            best = np.arange(len(peak)), np.argmax(excess, axis=1)
            place, value = tried[best], excess[best]
            step = (most - least) * SHARES[1]
            least, most = (
                np.maximum(least, place[:, None] - step),
                np.minimum(most, place[:, None] + step),
            )
        return place, value

    def _sizes(self, columns: Real) -> Real:
        """Largest entry of each, in units of the rows."""
        return np.asarray(np.max(np.abs(columns) / self.materials.size[:, None], axis=0))

    def _total(self) -> float:
        """M: no material of the class has columns whose sizes add up to more."""
        try:
            return self._proven_total()
        except NumericalLimit:
            raise self._unlimited() from None

    def _unlimited(self) -> NumericalLimit:
        """Why nothing limits the sizes, and what would."""
        known = "State the index at another wavelength, or a limit on the strength of all absorption"
        if np.any(self.materials.passive.least):
            return NumericalLimit(
                "rows of k that are lower limits only leave open how strongly the material absorbs there",
                remedy=f"Measure those rows through less of it. Or: {known[0].lower()}{known[1:]}",
            )
        return NumericalLimit("the rows do not limit what the material absorbs outside them", remedy=known)

    def _proven_total(self) -> float:
        sizes = Functional(
            fixed=-self.fixed_sizes, continuum=lambda q: -self._sizes(self.materials.continuum(q))
        )
        for _ in range(ROUNDS):
            weights, _ = self.solved(sizes, self.places, ROUGHLY)
            worst, more = self.worst(sizes, weights)
            if worst <= ROUGH:
                return -self.worth(weights) / (1 - max(worst, 0.0))
            self.places = np.union1d(self.places, more)
        raise NumericalLimit("no proof of the total was found")

    def _room(self) -> tuple[Real, Real, Real]:
        """Places, amounts of all columns, and rows of a material well within all limits, if any."""
        none = Functional(fixed=np.zeros(len(self.fixed_sizes)), continuum=np.zeros_like)
        materials = self.materials
        for _ in range(ROUNDS):
            matrix = np.hstack([materials.fixed, materials.continuum(self.places)])
            found = solve_box(
                matrix, materials.lower, materials.upper, stretch=materials.size, accuracy=ROUGHLY, floor=1.0
            )
            amounts = np.maximum(found.x, 0.0)
            inner = self.places, amounts, matrix @ amounts
            if found.t < -WELL_WITHIN:
                return inner
            _, more = self.worst(none, found.dual)
            if not len(more):
                break
            self.places = np.union1d(self.places, _with_neighbours(more, self.places))
        if found.t > 0:
            raise NumericalLimit("no passive causal material has these numbers within their uncertainties")
        return inner


class _End:
    """The least value of a functional: `proven` from below, `reached` by a material of the class."""

    def __init__(self, proofs: Proofs, functional: Functional) -> None:
        self.proofs, self.functional = proofs, functional
        self.places, self.found = proofs.places, np.zeros(0)
        self.proven, self.reached, self._accuracy = -np.inf, np.inf, FIRST
        self._round()

    def improve(self, goal: float) -> None:
        """One more round, towards a distance `goal` of proven and reached."""
        wanted = SHARPER * goal / (abs(self.reached) + TINY)
        self._accuracy = max(min(SHARPER * self._accuracy, wanted), LAST)
        self._round()

    def _round(self) -> None:
        """Solve, prove, and let the places join that would have helped."""
        proofs, functional = self.proofs, self.functional
        weights, reached = proofs.solved(functional, self.places, self._accuracy)
        self.reached = min(self.reached, reached)
        worst, more = proofs.worst(functional, weights)
        self.proven = max(self.proven, proofs.worth(weights) - max(worst, 0.0) * proofs.total)
        more = _with_neighbours(more, self.places)
        self.places = np.union1d(self.places, more)
        self.found = np.union1d(self.found, more)


def _with_neighbours(more: Real, places: Real) -> Real:
    """Places, and some towards the known ones beside each: alone they would only halve the gap each round."""
    after = np.searchsorted(places, more)
    left, right = places[np.maximum(after - 1, 0)], places[np.minimum(after, len(places) - 1)]
    towards = [more + share * (end - more) for end in (left, right) for share in TOWARDS]
    return np.unique(np.concatenate((more, *towards)))
