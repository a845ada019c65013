"""Absorption outside a table, inferred from what the index inside lacks: never negative, the smoothest."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.material.absorption_density import AbsorptionDensity
from pulseprop.material.passive_fit import passive_fit
from pulseprop.numerics.knots import outside_knots
from pulseprop.numerics.spline_basis import basis_pieces, basis_transforms

__all__ = ["OutsideAbsorption", "outside_absorption"]

Real = NDArray[np.float64]

EXACT = 1e-3
"""Share of the uncertainties below which a fit counts as exact. More is not left to smoothness: few bands act
on many rows, so the least factor shows the noise, and the flattest curve within all uncertainty is biased."""
STRENGTH = 0.3
"""Weight of strength beside roughness: bands then lie about a third of the first row's frequency."""


@dataclass(frozen=True, eq=False, kw_only=True)
class OutsideAbsorption:
    """constant + bands below and above the rows; factor: least stretch of the uncertainties."""

    constant: float
    densities: tuple[AbsorptionDensity, ...]
    factor: float


def outside_absorption(rows: Real, places: Real, missing: Real, uncertainty: Real) -> OutsideAbsorption:
    """What adds `missing` (M,) to the index at `places` (M,), rad/s, from outside rows and places.

    uncertainty: (M,); where no non-negative absorption does so within it, the factor is above 1.
    """
    known = np.unique(np.concatenate((rows, places)))
    sides = [(knots, basis_pieces(knots)) for knots in outside_knots(known)]
    columns = [basis_transforms(knots, pieces, places) for knots, pieces in sides]
    matrix = np.concatenate([np.ones((len(places), 1)), *columns], axis=1)
    rough = np.concatenate([[0.0], *(_roughness(known, knots) for knots, _ in sides)])
    fit = passive_fit(matrix, missing, uncertainty, rough, np.zeros((0, matrix.shape[1])), within=EXACT)
    shares = np.split(fit.weights[1:], [columns[0].shape[1]])
    return OutsideAbsorption(
        constant=float(fit.weights[0]),
        densities=tuple(
            AbsorptionDensity(edges=knots, pieces=pieces @ share)
            for (knots, pieces), share in zip(sides, shares, strict=True)
            if np.any(share > 0)
        ),
        factor=fit.factor,
    )


def _roughness(rows: Real, knots: Real) -> Real:
    """For each B-spline outside the rows, the fourth derivative of its n at the nearest end of the rows.

    Of area a at the distance d it is 24 a / d^5 times w/(w + nearest row), dimensionless: in units of the
    last row. Below the rows strength is added: any place there explains a fall of the index as 1/w^2, but the
    lower it lies the more it must absorb, until Re n < 0 in it and chi amplifies.
    """
    unit = rows[-1]
    first = rows[0] / unit
    centre = (knots[:-4] + knots[4:]) / 2 / unit
    area = (knots[4:] - knots[:-4]) / 4 / unit
    nearest = np.clip(centre, first, 1.0)
    ripple = 24 / np.abs(centre - nearest) ** 5
    strength = np.where(centre < first, STRENGTH * 24 / first**5 * (first / centre) ** 2, 0.0)
    return np.asarray(area * centre / (centre + nearest) * (ripple + strength))
