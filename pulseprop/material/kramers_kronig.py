"""Kramers-Kronig relations between the absorption index k and the refraction n - 1, on tables.

In the convention exp(-i omega t), n + i k:

    n(omega) - 1 =  (2/pi)       PV int_0^inf  w k(w) / (w^2 - omega^2) dw
    k(omega)     = -(2 omega/pi) PV int_0^inf  (n(w) - 1) / (w^2 - omega^2) dw

(R. de L. Kronig, J. Opt. Soc. Am. 12, 547 (1926); H. A. Kramers, Atti Congr. Int. Fis. Como 2, 545 (1927)). A
table covers part of the axis; what it leaves out adds a smooth function to n: an even one of omega, and
nearly a constant where it lies far off. Anchors, that is frequencies at which the answer is known, remove it:
one its constant, m of them the polynomial of degree m - 1 in omega^2. That is the multiply subtractive
relation (K. F. Palmer, M. Z. Williams and B. A. Budde, Appl. Opt. 37, 2660 (1998)).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.material.absorption_density import AbsorptionDensity, Form, Tails, density_through

__all__ = [
    "Anchor",
    "Transformed",
    "absorption_from_refraction",
    "refraction_from_absorption",
    "tail_shares",
]

Real = NDArray[np.float64]
Complex = NDArray[np.complex128]
Numbers = NDArray[np.inexact[Any]]


@dataclass(frozen=True, kw_only=True)
class Anchor:
    """A frequency in rad/s at which the answer is known: the index n, or the absorption index k.

    uncertainty: of the value, same unit; None where it is not stated.
    """

    omega: float
    value: float
    uncertainty: float | None = None


@dataclass(frozen=True, kw_only=True, eq=False)
class Transformed:
    """A transform with what it took.

    values: n - 1 + i k, or k, at the frequencies asked for. from_below, from_above: what the tails add at
    `middle`, halfway between the two middle rows (rad/s). subtraction: coefficients (anchors,) of the powers
    of (omega / middle)^2 that the anchors added (for k: times omega / middle); empty without anchors, and n
    then holds only up to what absorbs outside the table and its tails.
    """

    values: Numbers
    from_below: float
    from_above: float
    middle: float
    subtraction: Real


def refraction_from_absorption(
    rows: Real,
    k: Real,
    omega: Numbers,
    *,
    form: Form = "c2",
    tails: Tails = Tails(),  # noqa: B008 (frozen)
    anchors: Sequence[Anchor] = (),
) -> Transformed:
    """n - 1 + i k on or above the real axis from k on rows.

    rows: rad/s, ascending, above 0, uneven as they come, shape (R,). k: shape (R,). omega: any shape; real
    ones give the principal value. form: "linear" joins the rows by straight lines (error falls with the
    square of the spacing), "c2" by a cubic spline with continuous second derivative (fourth power). anchors:
    values are indices n.

    Raises InputError for bad rows, two anchors at one frequency, frequencies below the axis, or on a row
    where k breaks off.
    """
    rows, k = _checked(rows, k)
    density = density_through(rows, k, form=form, tails=tails, parity=-1)
    known = np.array([anchor.value - 1 for anchor in anchors])
    found = density.transform(_places(anchors)).real
    middle = _middle(rows)
    subtraction = _even_polynomial(_places(anchors) / middle, known - found)
    values = density.transform(omega) + _polynomial(subtraction, np.asarray(omega) / middle)
    below, above = tail_shares(density, tails, middle)
    return Transformed(
        values=values, from_below=below, from_above=above, middle=middle, subtraction=subtraction
    )


def absorption_from_refraction(
    rows: Real,
    refraction: Real,
    omega: Real,
    *,
    form: Form = "c2",
    tails: Tails = Tails(),  # noqa: B008 (frozen)
    anchors: Sequence[Anchor] = (),
) -> Transformed:
    """k at real omega (rad/s) from n - 1 on rows.

    More must be known than a table of n inside a band holds: n - 1 as far up and down as it varies. Matched
    tails take it as constant below the rows and as falling with omega^-2 above. A constant in n has no
    absorption, so a level of n that belongs to absorption far above the rows is to be taken off first, or
    replaced by anchors: values k; one removes a term proportional to omega, each further one the next odd
    power.

    Shapes and errors as in `refraction_from_absorption`.
    """
    rows, refraction = _checked(rows, refraction)
    omega = np.asarray(omega, dtype=float)
    density = density_through(rows, refraction, form=form, tails=tails, parity=1)
    places = _places(anchors)
    known = np.array([anchor.value for anchor in anchors])
    middle = _middle(rows)
    missing = known + density.transform(places).real
    subtraction = _even_polynomial(places / middle, missing / (places / middle))
    odd = omega / middle * _polynomial(subtraction, omega / middle)
    values = np.asarray(odd - density.transform(omega).real)
    below, above = tail_shares(density, tails, middle)
    return Transformed(
        values=values, from_below=-below, from_above=-above, middle=middle, subtraction=subtraction
    )


def tail_shares(density: AbsorptionDensity, tails: Tails, omega: float) -> tuple[float, float]:
    """What the tails below and above the rows add to the transform at a frequency between the rows, rad/s."""
    place = np.array([omega])
    below = above = 0.0
    rest = density
    if tails.below == "matched":
        rest = _part(density, density.edges[1:], density.pieces[1:], density.far)
        only = _part(density, density.edges[:2], density.pieces[:1], 0.0)
        below = float(only.transform(place).real[0])
    if tails.above == "matched":
        without = _part(density, rest.edges, rest.pieces, 0.0)
        above = float((rest.transform(place) - without.transform(place)).real[0])
    return below, above


def _part(density: AbsorptionDensity, edges: Real, pieces: Real, far: float) -> AbsorptionDensity:
    return replace(density, edges=edges, pieces=pieces, far=far)


def _checked(rows: Real, values: Real) -> tuple[Real, Real]:
    rows, values = np.asarray(rows, dtype=float), np.asarray(values, dtype=float)
    if rows.ndim != 1 or rows.shape != values.shape:
        raise InputError("rows and values differ in length", value=f"{rows.shape} and {values.shape}")
    bad = np.flatnonzero(~(np.isfinite(rows) & np.isfinite(values)))
    if len(bad):
        raise InputError("a value is not a finite number", place=f"row {bad[0] + 1}")
    if len(rows) and rows[0] <= 0:
        raise InputError("a frequency is not positive", value=rows[0], allowed="above 0 rad/s", place="row 1")
    wrong = np.flatnonzero(np.diff(rows) <= 0)
    if len(wrong):
        raise InputError("frequencies do not ascend", value=rows[wrong[0] + 1], place=f"row {wrong[0] + 2}")
    return rows, values


def _middle(rows: Real) -> float:
    """Halfway between the two middle rows: never on a row, where a tail taken alone has a logarithm."""
    index = len(rows) // 2
    return float(rows[index - 1] + rows[index]) / 2


def _places(anchors: Sequence[Anchor]) -> Real:
    places = np.array([anchor.omega for anchor in anchors], dtype=float)
    if len(set(places.tolist())) < len(places):
        raise InputError(
            "two anchors stand at one frequency", value=places.tolist(), remedy="keep one of them"
        )
    return places


def _even_polynomial(x: Real, values: Real) -> Real:
    """Coefficients of the polynomial in x^2 through the values: one for each."""
    return np.asarray(np.linalg.solve(np.vander(x**2, increasing=True), values)) if len(x) else np.zeros(0)


def _polynomial(coefficients: Real, x: Numbers) -> Numbers:
    total = np.zeros_like(x)
    for coefficient in coefficients[::-1]:
        total = total * x**2 + coefficient
    return np.asarray(total)
