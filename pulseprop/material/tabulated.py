"""n - 1 + i k from tabulated absorption, as Taylor series: what all media made of measured tables are.

    N(omega) = constant + sum of the transforms of densities,   constant >= 0.

Between rows the series comes in closed form from the C2 density up to the second derivative. The third
derivative of a cubic spline jumps at every row, so that a third derivative of the index taken at a point
would be infinite on the rows, and no table says more: third and fourth derivatives are means over one row
spacing to both sides, with the hat as weight (the second difference of the exact first and second
derivative). Away from the rows, where the absorption is zero or an assumed tail, all derivatives are those of
the analytic function.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import factorial
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.material.absorption_density import AbsorptionDensity
from pulseprop.material.response import Band
from pulseprop.numerics.principal_value import polynomial
from pulseprop.numerics.series import Series

__all__ = ["TabulatedRefraction", "density_series"]

Real = NDArray[np.float64]
Complex = NDArray[np.complex128]
Numbers = NDArray[np.inexact[Any]]

MOST_TERMS = 5
CONTOUR_POINTS = 64
CONTOUR_RADIUS = 0.4
"""Radius over distance to the nearest row: what is left out is 0.4^64, rounding grows by 0.4^-4."""


@dataclass(frozen=True, eq=False, kw_only=True)
class TabulatedRefraction:
    """A constant response >= 0 and densities of k; band: where data or assumed tails stand behind it."""

    band: Band
    densities: tuple[AbsorptionDensity, ...]
    constant: float = 0.0

    def refraction_series(self, omega: Numbers, count: int) -> Series:
        """Taylor coefficients of n - 1 + i k about each omega: (count, *omega.shape), count at most 5.

        omega: rad/s, real (limit from above), or above the axis for count <= 2. Raises InputError for more
        orders, below the axis, and where the tabulated absorption has a step.
        """
        total = np.zeros((count, *np.shape(omega)), dtype=complex)
        total[0] = self.constant
        for density in self.densities:
            total += density_series(density, np.asarray(omega), count)
        return total

    def singularities(self) -> Real:
        """Frequencies in rad/s at which the index is not analytic: the rows."""
        return np.unique(np.concatenate([density.edges for density in self.densities]))


def density_series(density: AbsorptionDensity, omega: Numbers, count: int) -> Series:
    """Taylor coefficients of the transform of one density, shapes and errors as in `refraction_series`."""
    if not 1 <= count <= MOST_TERMS or (count > 2 and np.iscomplexobj(omega)):
        raise InputError(
            "more orders than a table can tell", value=count, allowed="up to 5, real omega; else 2"
        )
    series = np.zeros((count, *omega.shape), dtype=complex)
    if count <= 2:
        series[0] = density.transform(omega)
        if count == 2:
            series[1] = density.derivative.transform(omega)
        return series
    real = np.asarray(omega, dtype=float)
    room, spacing = _surroundings(density, np.abs(real))
    away = room > spacing
    series[:, away] = _analytic(density, real[away], room[away], count)
    series[:, ~away] = _between_rows(density, real[~away], spacing[~away], count)
    return series


def _surroundings(density: AbsorptionDensity, size: Real) -> tuple[Real, Real]:
    """Distance to the nearest row, counted where no row lies on the far side, and the local row spacing."""
    rows = density.edges[1:] if density.edges[0] == 0 else density.edges
    room = np.maximum(rows[0] - size, size - rows[-1])
    piece = np.clip(np.searchsorted(rows, size, side="right") - 1, 0, len(rows) - 2)
    return room, np.diff(rows)[piece]


def _between_rows(density: AbsorptionDensity, omega: Real, spacing: Real, count: int) -> Series:
    slope = density.derivative
    series = np.empty((count, *omega.shape), dtype=complex)
    series[0] = density.transform(omega)
    series[1] = slope.transform(omega)
    series[2] = _curvature(slope, omega, spacing) / 2
    if count > 3:
        series[3] = _second_difference(slope.transform, omega, spacing) / factorial(3)
    if count > 4:
        before, after = (_curvature(slope, omega + side * spacing, spacing) for side in (-1, 1))
        series[4] = (before - 4 * series[2] + after) / spacing**2 / factorial(4)
    return series


def _curvature(slope: AbsorptionDensity, omega: Real, spacing: Real) -> Complex:
    """Second derivative; on an end row, where the tail makes a kink, its mean over a row to both sides."""
    result = np.empty(omega.shape, dtype=complex)
    curvature = slope.derivative
    kink = np.isin(np.abs(omega), curvature.jumps)
    result[~kink] = curvature.transform(omega[~kink])
    there, step = omega[kink], spacing[kink]
    result[kink] = (slope.transform(there + step) - slope.transform(there - step)) / (2 * step)
    return result


def _second_difference(function: Any, omega: Real, step: Real) -> Complex:
    return np.asarray((function(omega + step) - 2 * function(omega) + function(omega - step)) / step**2)


def _analytic(density: AbsorptionDensity, omega: Real, room: Real, count: int) -> Series:
    """Contour integral about each omega; below the axis N(z) = conj N(conj z) + 2 i k(z), k the tail."""
    turn = np.exp(2j * np.pi * (np.arange(CONTOUR_POINTS) + 0.5) / CONTOUR_POINTS)
    radius = CONTOUR_RADIUS * room[..., None]
    z = np.asarray(omega[..., None] + radius * turn, dtype=np.complex128)
    upper = z.imag > 0
    values = density.transform(np.where(upper, z, np.conj(z)))
    values = np.where(upper, values, np.conj(values) + 2j * _tail(density, z))
    return np.stack([np.mean(values * (radius * turn) ** -m, axis=-1) for m in range(count)])


def _tail(density: AbsorptionDensity, z: Complex) -> Complex:
    """The density continued analytically from |Re z| below the first or above the last row."""
    sign = np.where((z.real < 0) & (density.parity < 0), -1, 1)
    size = np.where(z.real < 0, -z, z)
    beyond = density.far * (density.edges[-1] / size) ** density.power
    below = polynomial(size / density.edges[1], density.pieces[0]) if density.edges[0] == 0 else 0.0
    return np.asarray(sign * np.where(size.real > density.edges[-1], beyond, below))
