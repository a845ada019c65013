"""A medium known by its absorbance: measured absorption with its own refraction, added to a background.

    n + i k = n_background + constant + N,     N the Kramers-Kronig transform of the tabulated k.

Anchors, frequencies at which the index of the whole is known, say what absorbs outside the table. One gives a
constant >= 0 (absorption far above); several give non-negative absorption bands outside the rows besides, the
smoothest that explain them, so that the whole stays causal on the whole axis.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError, NumericalLimit
from pulseprop.material.absorption_density import AbsorptionDensity, Tails, density_through
from pulseprop.material.absorption_quantities import (
    Quantity,
    absorption_index,
    beyond_ceiling,
    face_reflectance,
    internal_transmittance,
)
from pulseprop.material.kramers_kronig import Anchor, tail_shares
from pulseprop.material.outside_absorption import outside_absorption
from pulseprop.material.response import Band
from pulseprop.material.table_rows import noise_of, ordered_rows, row_list
from pulseprop.material.tabulated import TabulatedRefraction
from pulseprop.numerics.series import Series

__all__ = ["AbsorptionTable", "absorption_table"]

Real = NDArray[np.float64]
Complex = NDArray[np.complex128]
Numbers = NDArray[np.inexact[Any]]
Background = Callable[[Real], Numbers]

NOISE_DIPS = 5.0
"""Absorption below zero by up to this many standard deviations of the noise is noise."""
BASELINE = 2e-3
"""…and so is a dip up to this share of the largest value, as baselines go (common practice, no source)."""
MOST_K = 1e4
"""Largest k taken for real: metals reach some 1e3 in the far infrared (common practice, no source)."""
DEFAULT_UNCERTAINTY = 1e-5
"""Of an anchor whose uncertainty is not stated: as for published coefficients."""
ROUNDS = 60
SETTLED = 1e-12
"""Change of the faces' reflectance at which the plate counts as solved."""


@dataclass(frozen=True, kw_only=True, eq=False)
class AbsorptionTable:
    """Measured absorption as a causal addition to the index of a background.

    omega, k: the rows used, rad/s ascending, read-only. model: what is evaluated. notes: what was assumed,
    left out or changed. cautions: (code, text); "no-anchor" where the index is relative only.
    """

    omega: Real
    k: Real
    model: TabulatedRefraction
    notes: tuple[str, ...] = ()
    cautions: tuple[tuple[str, str], ...] = ()

    def __post_init__(self) -> None:
        for column in (self.omega, self.k):
            column.setflags(write=False)

    @property
    def band(self) -> Band:
        """The rows, with the tails where there are any (rad/s)."""
        return self.model.band

    def refraction_series(self, omega: Numbers, count: int) -> Series:
        """Taylor coefficients of what the table adds to n - 1 + i k: see `TabulatedRefraction`."""
        return self.model.refraction_series(omega, count)

    def singularities(self) -> Real:
        """Frequencies in rad/s at which the index is not analytic."""
        return self.model.singularities()


def absorption_table(
    omega: Real,
    values: Real,
    *,
    quantity: Quantity,
    path_length: float | None = None,
    concentration: float | None = None,
    ceiling: float | None = None,
    tails: Tails = Tails(),  # noqa: B008 (frozen)
    anchors: Sequence[Anchor] = (),
    background: Background | None = None,
    numbers: Sequence[int] | None = None,
) -> AbsorptionTable:
    """The table made from measured values.

    omega: rad/s, monotonic, shape (R,). values: as `quantity` says (`absorption_quantities`), SI. ceiling: in
    absorbance for transmittances, else in the values' own unit; rows above it are lower limits and are left
    out. anchors: indices of the whole medium. background: index n of the background at real omega, vacuum if
    not given. numbers: the file's row numbers.

    Raises InputError for rows out of order, missing numbers, gain beyond noise, too few rows, anchors that no
    causal matter has together with this absorption; NumericalLimit where the plate's faces do not settle.
    """
    omega, values, rows = ordered_rows(omega, values, numbers=numbers)
    hidden = beyond_ceiling(values, quantity, ceiling)
    notes = _ceiling_notes(omega, rows, hidden)
    omega, values, rows = omega[~hidden], values[~hidden], rows[~hidden]
    own = _vacuum if background is None else background
    _refuse_no_light(values, quantity, rows)

    def finished(inside: Real, kind: Quantity) -> AbsorptionTable:
        k = absorption_index(omega, inside, kind, path_length=path_length, concentration=concentration)
        _refuse_beyond_matter(k, rows)
        k, dips = _without_dips(k, rows)
        return _assembled(omega, k, tails, anchors, own, (*notes, *dips))

    if quantity != "transmittance":
        return finished(values, quantity)
    if background is None:
        raise InputError(
            "transmittance through both faces needs the index of the background", place="background"
        )
    return _plate(omega, values, own, finished)


def _vacuum(omega: Real) -> Real:
    return np.ones_like(omega)


def _plate(
    omega: Real, values: Real, own: Background, finished: Callable[[Real, Quantity], AbsorptionTable]
) -> AbsorptionTable:
    """Take the faces' loss out with the index found, until both agree."""
    reflectance = face_reflectance(np.asarray(own(omega), dtype=complex))
    for _ in range(ROUNDS):
        table = finished(internal_transmittance(values, reflectance), "internal_transmittance")
        before = reflectance
        reflectance = face_reflectance(own(omega) + table.refraction_series(omega, 1)[0])
        if np.max(np.abs(reflectance - before)) < SETTLED:
            return table
    raise NumericalLimit(
        "the loss at the faces and the index found from the rest do not settle",
        value=f"reflectance moves by {np.max(np.abs(reflectance - before)):.1e}",
        remedy="give internal_transmittance or absorbance with the faces taken out, or anchors",
    )


def _assembled(
    omega: Real,
    k: Real,
    tails: Tails,
    anchors: Sequence[Anchor],
    own: Background,
    notes: tuple[str, ...],
) -> AbsorptionTable:
    density = density_through(omega, k, form="c2", tails=tails, parity=-1)
    low = 0.0 if tails.below == "matched" else float(omega[0])
    high = np.inf if tails.above == "matched" else float(omega[-1])
    model = TabulatedRefraction(band=Band(low, high), densities=(density,))
    model, more, cautions = _anchored(omega, model, anchors, own)
    notes = (*notes, *_tail_notes(omega, density, tails), *_spline_notes(omega, k, density), *more)
    return AbsorptionTable(omega=omega, k=k, model=model, notes=notes, cautions=cautions)


def _anchored(
    rows: Real, model: TabulatedRefraction, anchors: Sequence[Anchor], own: Background
) -> tuple[TabulatedRefraction, tuple[str, ...], tuple[tuple[str, str], ...]]:
    if not anchors:
        text = "no anchor: the index is relative to the background's only, up to absorption outside the table"
        return model, (), (("no-anchor", text),)
    places = np.array([anchor.omega for anchor in anchors], dtype=float)
    index = np.array([anchor.value for anchor in anchors], dtype=float)
    missing = index - np.real(own(places)) - model.refraction_series(places, 1)[0].real
    if len(anchors) == 1:
        constant = _one_constant(float(missing[0]), anchors[0])
        note = f"one anchor: absorption far above the table adds {constant:.6g} to the index everywhere"
        return replace(model, constant=constant), (note,), ()
    outside = outside_absorption(rows, places, missing, _uncertainties(anchors))
    if outside.factor > 1:
        raise InputError(
            "no absorption outside the table gives the medium all the anchors' indices",
            value=f"they differ by {outside.factor:.3g} times their uncertainties",
            allowed="1 at most",
            place="anchor",
            remedy="Check the anchors, the background and the tails, or state larger uncertainties.",
        )
    added = replace(model, constant=outside.constant, densities=(*model.densities, *outside.densities))
    note = (
        f"{len(anchors)} anchors: absorption outside the table explains them "
        f"within {outside.factor:.2g} of their uncertainties"
    )
    return added, (note,), ()


def _uncertainties(anchors: Sequence[Anchor]) -> Real:
    stated = [anchor.uncertainty for anchor in anchors]
    return np.array([DEFAULT_UNCERTAINTY if u is None else u for u in stated], dtype=float)


def _one_constant(missing: float, anchor: Anchor) -> float:
    """What one anchor adds; negative within its uncertainty counts as none."""
    if missing >= 0:
        return missing
    if -missing <= (anchor.uncertainty or 0.0):
        return 0.0
    raise InputError(
        "the anchor's index lies below what background and tabulated absorption alone give, and nothing that "
        "absorbs elsewhere lowers the index at all frequencies",
        value=anchor.value,
        allowed=f"{anchor.value - missing:.6g} or more, within its uncertainty",
        place="anchor",
        remedy="Check the anchor, the background (vacuum, if it absorbs in the table itself) and the tails.",
    )


def _without_dips(k: Real, rows: Real) -> tuple[Real, tuple[str, ...]]:
    """Negative k within noise set to zero and noted; beyond noise refused."""
    below = k < 0
    if not np.any(below):
        return k, ()
    allowed = max(NOISE_DIPS * noise_of(k), BASELINE * float(np.max(k)))
    deep = k < -allowed
    if np.any(deep):
        raise InputError(
            "absorption is negative beyond noise: gain, or a loss at the faces taken off twice",
            value=f"k = {np.min(k):.3g}",
            allowed=f"k of {-allowed:.2g} or more",
            place=row_list(rows[deep]),
            remedy="Check the kind of the quantity (a transmittance is a share of 1, not per cent), the "
            "reference and the baseline.",
        )
    note = (
        f"absorption slightly below zero (k down to {np.min(k):.2g}) taken as zero in {row_list(rows[below])}"
    )
    return np.maximum(k, 0.0), (note,)


def _refuse_beyond_matter(k: Real, rows: Real) -> None:
    """A slip of units or of a digit, told before anything overflows."""
    absurd = ~(k <= MOST_K)
    if np.any(absurd):
        raise InputError(
            "no matter absorbs like this",
            value=f"k = {np.max(k):.3g}",
            allowed=f"k up to {MOST_K:g}",
            place=row_list(rows[absurd]),
            remedy="Check the unit, the path length and the digits.",
        )


def _refuse_no_light(values: Real, quantity: Quantity, rows: Real) -> None:
    dark = values <= 0
    if quantity in ("internal_transmittance", "transmittance") and np.any(dark):
        raise InputError(
            "a transmittance of zero or less says nothing about the absorption",
            value=float(values[dark][0]),
            allowed="above 0",
            place=row_list(rows[dark]),
            remedy="State the instrument's ceiling: rows beyond it are left out.",
        )


def _ceiling_notes(omega: Real, rows: Real, hidden: NDArray[np.bool_]) -> tuple[str, ...]:
    if not np.any(hidden):
        return ()
    low, high = (TWO_PI_C / omega[hidden][[-1, 0]]) * 1e9
    return (
        f"{row_list(rows[hidden])} ({low:.6g} to {high:.6g} nm) above the stated ceiling "
        "are lower limits: left out; absorption is interpolated over them and may be higher",
    )


def _tail_notes(omega: Real, density: AbsorptionDensity, tails: Tails) -> tuple[str, ...]:
    middle = len(omega) // 2
    below, above = tail_shares(density, tails, float(omega[middle - 1] + omega[middle]) / 2)
    nm = TWO_PI_C * 1e9
    low = f"above {nm / omega[0]:.6g} nm absorption index"
    high = f"below {nm / omega[-1]:.6g} nm absorption index"
    return (
        f"{low} proportional to frequency assumed: {below:+.2g} in n at mid-table"
        if tails.below == "matched"
        else f"{low} zero assumed",
        f"{high} falling as the inverse cube of frequency assumed: {above:+.2g} in n at mid-table"
        if tails.above == "matched"
        else f"{high} zero assumed",
    )


def _spline_notes(omega: Real, k: Real, density: AbsorptionDensity) -> tuple[str, ...]:
    """How far the smooth curve dips below zero between rows."""
    between = (omega[:-1, None] + np.diff(omega)[:, None] * np.array([0.25, 0.5, 0.75])).ravel()
    dip = -float(np.min(density.value(between)))
    if dip <= 1e-6 * float(np.max(k)):
        return ()
    return (f"between rows the smooth curve through k dips to {-dip:.2g} where k falls steeply",)
