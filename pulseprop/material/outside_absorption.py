"""Absorption outside a table, inferred from what the index inside lacks: never negative, the smoothest."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.material.absorption_density import AbsorptionDensity
from pulseprop.material.passive_fit import passive_fit
from pulseprop.numerics.spline_basis import basis_pieces, basis_transforms

__all__ = ["OutsideAbsorption", "outside_knots", "roughness"]

Real = NDArray[np.float64]

KNOT_RATIO = 1.3
NEAREST_GAP = 0.5
"""First knot outside the rows, in spacings of the end rows; distances then grow by KNOT_RATIO."""
FARTHEST = 300.0
"""Last knot over the highest frequency, and half the lowest over the first knot."""
DEFAULT_UNCERTAINTY = 1e-5
"""Of an index whose uncertainty is not stated: as for published coefficients."""


@dataclass(frozen=True, eq=False, kw_only=True)
class OutsideAbsorption:
    """constant + bands below and above the rows; factor: of the uncertainties, 1 at most."""

    constant: float
    densities: tuple[AbsorptionDensity, ...]
    factor: float

    @classmethod
    def through(
        cls, rows: Real, places: Real, missing: Real, uncertainty: Sequence[float | None]
    ) -> OutsideAbsorption:
        """What adds `missing` (M,) to the index at `places` (M,), rad/s, from outside rows and places.

        Raises InputError where no non-negative absorption does so within the uncertainties.
        """
        known = np.unique(np.concatenate((rows, places)))
        sides = [(knots, basis_pieces(knots)) for knots in outside_knots(known)]
        columns = [basis_transforms(knots, pieces, places) for knots, pieces in sides]
        matrix = np.concatenate([np.ones((len(places), 1)), *columns], axis=1)
        rough = np.concatenate([[0.0], *(roughness(known, knots) for knots, _ in sides)])
        tolerance = np.array([DEFAULT_UNCERTAINTY if u is None else u for u in uncertainty])
        fit = passive_fit(matrix, missing, tolerance, rough, np.zeros((0, matrix.shape[1])))
        if fit.factor > 1:
            raise InputError(
                "no absorption outside the table gives the medium all the anchors' indices",
                value=f"they differ by {fit.factor:.3g} times their uncertainties",
                allowed="1 at most",
                place="anchor",
                remedy="Check the anchors, the background and the tails, or state larger uncertainties.",
            )
        shares = np.split(fit.weights[1:], [columns[0].shape[1]])
        return cls(
            constant=float(fit.weights[0]),
            densities=tuple(
                AbsorptionDensity(edges=knots, pieces=pieces @ share)
                for (knots, pieces), share in zip(sides, shares, strict=True)
                if np.any(share > 0)
            ),
            factor=fit.factor,
        )


def outside_knots(rows: Real) -> tuple[Real, Real]:
    """Knots up to the first and from the last row (rad/s, both ascending), denser towards the rows."""
    first, last = float(rows[0]), float(rows[-1])
    near = min(NEAREST_GAP * float(rows[1] - rows[0]), first / 8)
    steps = 1 + int(np.log(first / 2 / near) / np.log(KNOT_RATIO))
    down = first - near * KNOT_RATIO ** np.arange(steps)
    rest = down[-1] * KNOT_RATIO ** -np.arange(1.0, int(np.log(FARTHEST) / np.log(KNOT_RATIO)))
    gap = NEAREST_GAP * float(rows[-1] - rows[-2])
    steps = 1 + int(np.log(FARTHEST * last / gap) / np.log(KNOT_RATIO))
    up = last + gap * KNOT_RATIO ** np.arange(steps)
    return np.concatenate(([first], down, rest))[::-1], np.concatenate(([last], up))


def roughness(rows: Real, knots: Real) -> Real:
    """For each B-spline outside the rows, the fourth derivative of its n at the nearest end of the rows.

    Of area a at the distance d it is 24 a / d^5 times w/(w + nearest row), dimensionless: in units of the
    last row.
    """
    unit = rows[-1]
    centre = (knots[:-4] + knots[4:]) / 2 / unit
    area = (knots[4:] - knots[:-4]) / 4 / unit
    nearest = np.clip(centre, rows[0] / unit, 1.0)
    return np.asarray(24 * area * centre / (centre + nearest) / np.abs(centre - nearest) ** 5)
