"""A measured table of n, or of n and k, as the passive causal medium that explains it best.

    n + i k - 1 = constant + N,   constant >= 0,   N the transform of a non-negative C2 density of k.

Where only n is given the density vanishes between the first and the last row; where k is given it is a cubic
spline with knots at the rows that runs on smoothly past both ends. Of all such media the one is taken that
needs the uncertainties stretched by the least factor, and the smoothest among equals. A table that no such
medium has within its uncertainties is refused, or used as printed: then a spline of n and k, valid between
its rows only, and no causal model.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, Protocol

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError, RangeError
from pulseprop.material.absorption_density import AbsorptionDensity
from pulseprop.material.outside_absorption import outside_absorption
from pulseprop.material.passive_fit import passive_fit
from pulseprop.material.printed_digits import half_unit, index_uncertainty
from pulseprop.material.response import Band
from pulseprop.material.table_rows import ordered_rows
from pulseprop.material.tabulated import TabulatedRefraction
from pulseprop.numerics.cauchy import piecewise_value
from pulseprop.numerics.knots import between_rows, outside_knots
from pulseprop.numerics.series import Series
from pulseprop.numerics.spline import cubic_pieces, derivative_pieces
from pulseprop.numerics.spline_basis import basis_pieces, basis_transforms, basis_values

__all__ = ["IndexTable", "index_table"]

Real = NDArray[np.float64]
Numbers = NDArray[np.inexact[Any]]


class _Model(Protocol):
    @property
    def band(self) -> Band: ...

    def refraction_series(self, omega: Numbers, count: int) -> Series: ...

    def singularities(self) -> Real: ...


@dataclass(frozen=True, kw_only=True, eq=False)
class IndexTable:
    """n + i k - 1 of a tabulated medium.

    omega, index, k: the rows, rad/s ascending, read-only (k None where not given), with their uncertainties
    index_error and k_error. uncertainty_factor: least factor by which the uncertainties must be stretched.
    causal: False where the table is used as printed. notes: what was assumed.
    """

    omega: Real
    index: Real
    index_error: Real
    k: Real | None
    k_error: Real | None
    uncertainty_factor: float
    causal: bool
    model: _Model
    notes: tuple[str, ...] = ()

    def __post_init__(self) -> None:
        for column in (self.omega, self.index, self.index_error, self.k, self.k_error):
            if column is not None:
                column.setflags(write=False)

    @property
    def band(self) -> Band:
        """From the first to the last row, rad/s."""
        return self.model.band

    def refraction_series(self, omega: Numbers, count: int) -> Series:
        """Taylor coefficients as of `TabulatedRefraction`; RangeError off rows that are used as printed."""
        return self.model.refraction_series(omega, count)

    def singularities(self) -> Real:
        """Frequencies in rad/s at which the index is not analytic."""
        return self.model.singularities()


def index_table(
    omega: Real,
    index: Real,
    k: Real | None = None,
    *,
    index_error: Real | float | None = None,
    k_error: Real | float | None = None,
    printed_axis: Real | None = None,
    as_printed: bool = False,
    numbers: Sequence[int] | None = None,
) -> IndexTable:
    """The medium of a table.

    omega: rad/s, monotonic, at least five rows, (R,). index, k: as printed, (R,). index_error, k_error:
    uncertainties, one for all or one a row, above 0; taken from the printed digits where not given, with
    those of `printed_axis`, the wavelengths as printed. numbers: the file's row numbers.

    Raises InputError for bad rows, and where no passive causal medium has these numbers within their
    uncertainties unless as_printed; NumericalLimit where the linear programme fails.
    """
    index = np.asarray(index, dtype=float)
    errors = [_error(index_error, index_uncertainty(index, printed_axis) if index_error is None else None)]
    columns = [index, np.broadcast_to(errors[0], index.shape)]
    if k is not None:
        k = np.asarray(k, dtype=float)
        columns += [k, np.broadcast_to(_error(k_error, half_unit(k) if k_error is None else None), k.shape)]
    omega, *rest, rows = ordered_rows(omega, *columns, numbers=numbers)
    _refuse_bad(rest, rows)
    factor, model = _index_only(omega, *rest) if k is None else _with_absorption(omega, *rest)
    causal = factor <= 1
    if not causal and not as_printed:
        raise _no_such_matter(factor)
    note = f"passive causal model at {factor:.3g} times the stated uncertainties"
    if not causal:
        model = _Printed(omega=omega, values=rest[0] - 1 + 1j * (rest[2] if k is not None else 0.0))
        note = (
            f"used as printed: a passive causal medium would need {factor:.3g} times the stated uncertainties"
        )
    return IndexTable(
        omega=omega,
        index=rest[0],
        index_error=rest[1],
        k=rest[2] if k is not None else None,
        k_error=rest[3] if k is not None else None,
        uncertainty_factor=factor,
        causal=causal,
        model=model,
        notes=(note,),
    )


def _index_only(omega: Real, index: Real, error: Real) -> tuple[float, _Model]:
    outside = outside_absorption(omega, omega, index - 1, error)
    band = Band(float(omega[0]), float(omega[-1]))
    return outside.factor, TabulatedRefraction(
        band=band, densities=outside.densities, constant=outside.constant
    )


def _with_absorption(omega: Real, index: Real, error: Real, k: Real, k_error: Real) -> tuple[float, _Model]:
    below, above = outside_knots(omega)
    knots = np.concatenate((below[:-1], omega, above[1:]))
    pieces = basis_pieces(knots)
    of_index = np.insert(basis_transforms(knots, pieces, omega), 0, 1.0, axis=1)
    of_k = np.insert(basis_values(knots, pieces, omega), 0, 0.0, axis=1)
    bends = np.insert(_bends(omega, knots, pieces), 0, 0.0, axis=1)
    fit = passive_fit(
        np.concatenate((of_index, of_k)),
        np.concatenate((index - 1, k)),
        np.concatenate((error, k_error + between_rows(omega, k))),
        np.zeros(of_index.shape[1]),
        bends / np.max(np.abs(bends)),
        within=1.0,  # as many splines as rows: at the least factor they would follow the noise of k
    )
    density = AbsorptionDensity(edges=knots, pieces=pieces @ fit.weights[1:])
    band = Band(float(omega[0]), float(omega[-1]))
    return fit.factor, TabulatedRefraction(band=band, densities=(density,), constant=float(fit.weights[0]))


def _bends(omega: Real, knots: Real, pieces: Real) -> Real:
    """Steps of the splines' third derivative at the knots over distance from the rows: (knots, splines).

    The fourth derivative of N is the sum of step / (knot - omega) over pi; on the rows the row spacing stands
    for distance.
    """
    unit = omega[-1]
    length = np.diff(knots) / unit
    third = np.pad(6 * pieces[:, 3, :] / length[:, None] ** 3, ((1, 1), (0, 0)))
    spacing = np.minimum(np.append(np.inf, length), np.append(length, np.inf))
    distance = np.maximum(np.maximum(omega[0] - knots, knots - omega[-1]) / unit, spacing)
    return np.asarray(np.diff(third, axis=0) / distance[:, None])


@dataclass(frozen=True, eq=False, kw_only=True)
class _Printed:
    """The C2 spline through n - 1 + i k, between the rows only."""

    omega: Real
    values: Numbers

    @property
    def band(self) -> Band:
        return Band(float(self.omega[0]), float(self.omega[-1]))

    def refraction_series(self, omega: Numbers, count: int) -> Series:
        size = np.abs(omega)
        if np.iscomplexobj(omega) or not np.all(self.band.contains(size)):
            raise RangeError(
                "a table used as printed says nothing off its rows",
                value=f"{np.max(size):.6g} rad/s",
                allowed=f"{self.omega[0]:.6g} to {self.omega[-1]:.6g} rad/s, real",
            )
        series = np.zeros((count, *size.shape), dtype=complex)
        for part, unit in ((self.values.real, 1.0), (self.values.imag, 1j)):
            pieces, factorial = cubic_pieces(self.omega, part, None, None), 1
            for m in range(min(count, 4)):
                factorial *= max(m, 1)
                series[m] += unit * piecewise_value(self.omega, pieces, size) / factorial
                pieces = derivative_pieces(self.omega, pieces)
        turned = np.where(omega < 0, -1.0, 1.0) ** np.arange(count).reshape(-1, *[1] * size.ndim)
        return np.asarray(np.where(omega < 0, np.conj(series), series) * turned, dtype=complex)

    def singularities(self) -> Real:
        return self.omega


def _error(stated: Real | float | None, printed: Real | None) -> Real:
    error = np.asarray(printed if stated is None else stated, dtype=float)
    if not np.all(np.isfinite(error) & (error > 0)):
        raise InputError("an uncertainty must be above 0", value=float(np.min(error)), place="uncertainty")
    return error


def _refuse_bad(columns: Sequence[Real], rows: Real) -> None:
    if len(rows) < 5:
        raise InputError("too few rows for a table of the index", value=len(rows), allowed="5 or more")
    index = columns[0]
    if np.any(index <= 0):
        row = int(rows[np.argmin(index)])
        raise InputError("an index is not positive", value=float(np.min(index)), place=f"row {row}")
    if len(columns) > 2 and np.any(columns[2] < 0):
        row = int(rows[np.argmin(columns[2])])
        raise InputError(
            "an absorption index k is negative: n + i k absorbs with positive k here",
            value=float(np.min(columns[2])),
            allowed="0 or more",
            place=f"row {row}",
        )


def _no_such_matter(factor: float) -> InputError:
    return InputError(
        "no passive causal medium has this table's numbers within their uncertainties",
        value=f"they would have to be {factor:.3g} times as large",
        allowed="a factor of 1 at most",
        remedy="Check order and columns of the table, its units and the stated uncertainty; "
        "or set as_printed = true to use it as it stands, not as a causal model.",
    )
