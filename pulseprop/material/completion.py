"""A printed formula continued beyond its range by absorption, so that it is causal on the whole axis.

A pole on the real axis, or a hard cut at the end of the range, would itself be acausal or lossless. Each pole
is replaced by the widest cubic B-spline band of absorption, in x proportional to omega^2, that lies wholly
outside the range and has the pole's strength and first moment; its width is what keeps the refraction in
range within `ALLOWED_SHIFT`:

    weight x_j / (x_j - x)  ->  weight x_j int B_j(x') / (x' - x) dx',
    shift = weight x_j variance / |x_j - x|^3.

Lorentz damping would not do: its absorption in range grows in proportion to the damping while the index
changes with its square. A positive offset stays: an instantaneous response is causal. A term -D L^2 is that
of a pole at zero frequency and becomes a band just above it. Other powers of the wavelength, and terms of
negative strength, have no band of their own: they are fitted, together with the rest, by non-negative bands
outside the range; how well that succeeds is reported.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import NumericalLimit
from pulseprop.numerics.bspline_cauchy import FAR, VARIANCE, cauchy, cauchy_slope, far_from, moments_of
from pulseprop.numerics.series import Numbers, Series

if TYPE_CHECKING:
    from pulseprop.material.formulas import Formula

__all__ = ["ALLOWED_SHIFT", "Completion", "complete"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

ALLOWED_SHIFT = 1e-8
"""Largest change of n in range that replacing poles by bands may cause."""

CHECK_POINTS = 101

LOWEST = 30.0
"""The low end of a range over the lowest candidate band. One still lower acts alike in range, but makes light
of long wavelengths so slow that no window holds the answer.
"""

PATIENCE = 50
"""Steps of the fit at most, over the number of its unknowns."""

WIDEST = 0.48
"""Knot distance of a candidate band over its distance from the range, which it just does not touch. In a
narrow band of the same strength n would fall below zero, and chi amplify.
"""

WINGS = (8.0, 64.0)
"""Widths of the wings over that of the core: they absorb the light that a narrow band alone would slow down
for ages.
"""


@dataclass(frozen=True, kw_only=True)
class Completion:
    """offset + sum_j strength_j int B((x' - centre_j)/knot_j)/knot_j / (x' - x) dx'.

    strength, centre, knot: (bands,), all in um^-2 as x is, strengths not negative.
    `shift` is the largest change of g in range, as measured.
    """

    offset: float
    strength: Real
    centre: Real
    knot: Real
    shift: float

    def series(self, x: Series) -> Series:
        """g and its slope (at most two terms) of a Taylor series x on or above the real axis."""
        flat = x[0].ravel()
        outer = np.zeros((len(x), flat.size), dtype=complex)
        outer[0] = self.offset
        for centre in np.unique(self.centre):
            same = self.centre == centre
            outer += _of_one_centre(flat - centre, self.strength[same], self.knot[same], len(x))
        outer = outer.reshape(x.shape)
        if len(x) > 1:
            outer[1] *= x[1]
        return outer


def _of_one_centre(distance: Numbers, strength: Real, knot: Real, count: int) -> Complex:
    """Value (and slope for count 2) of concentric bands at distances from their centre, shape (count, N)."""
    total = np.empty((count, distance.size), dtype=complex)
    far = np.abs(distance) > FAR * knot.max()
    if far.all():
        return np.stack(far_from(distance, moments_of(strength, knot), count)).astype(complex)
    total[:, far] = far_from(distance[far], moments_of(strength, knot), count)
    near = distance[~far]
    close = np.zeros((count, near.size), dtype=complex)
    for share, width in zip(strength, knot, strict=True):
        close[0] += cauchy(near / width) * (share / width)
        if count > 1:
            close[1] += cauchy_slope(near / width) * (share / width**2)
    total[:, ~far] = close
    return total


def complete(formula: Formula) -> Completion:
    """The completion of a formula; `shift` reports how far it moved the formula in range.

    Raises NumericalLimit where the fit of non-negative bands does not settle.
    """
    low, high = formula.x_range
    static = [-term.coefficient for term in formula.powers if term.exponent == -1 and term.coefficient < 0]
    plain = (
        formula.offset >= 0
        and len(static) == len(formula.powers)
        and all(pole.weight > 0 for pole in formula.poles)
    )
    candidate = _spread(formula, static, low, high) if plain else _fitted(formula, low, high)
    x = _check_places(low, high)[None]
    shift = float(np.max(np.abs(candidate.series(x)[0] - formula.printed(x)[0])))
    return replace(candidate, shift=shift)


def _spread(formula: Formula, static: list[float], low: float, high: float) -> Completion:
    count = len(formula.poles) + len(static)
    pieces = [
        piece
        for pole in formula.poles
        for piece in _bands_of(pole.weight * pole.place, pole.place, low, high, count)
    ]
    for free in static:
        place = 0.5 * ALLOWED_SHIFT / count * low**2 / free
        pieces += _bands_of(free, place, low, high, count)
    strength, centre, knot = np.array(pieces).reshape(-1, 3).T
    return Completion(offset=formula.offset, strength=strength, centre=centre, knot=knot, shift=0.0)


def _bands_of(
    strength: float, place: float, low: float, high: float, count: int
) -> list[tuple[float, float, float]]:
    """(strength, centre, knot) of a core and its wings, each wing of the variance of the core."""
    distance = min(abs(place - low), abs(place - high))
    widest = min(0.4 * distance, 0.45 * place)
    spread = np.sqrt(ALLOWED_SHIFT / count * distance**3 / (VARIANCE * strength))
    wings = [ratio for ratio in WINGS if ratio * spread / np.sqrt(len(WINGS) + 1) < widest]
    knot = min(spread / np.sqrt(len(wings) + 1), widest)
    core = strength * (1 - sum(ratio**-2 for ratio in wings))
    return [(core, place, knot), *((strength * ratio**-2, place, ratio * knot) for ratio in wings)]


def _check_places(low: float, high: float) -> Real:
    high = high if np.isfinite(high) else max(4 * low, 1.0)
    return np.asarray(low + (high - low) * (1 - np.cos(np.linspace(0, np.pi, CHECK_POINTS))) / 2)


def _fitted(formula: Formula, low: float, high: float) -> Completion:
    from scipy.optimize import nnls

    centre, knot = _candidate_bands(low, high)
    x = _check_places(low, high)
    columns = [np.ones_like(x)]
    for place, width in zip(centre, knot, strict=True):
        columns.append((cauchy((x - place) / width) / width).real)
    matrix = np.stack(columns, axis=1)
    scale = np.max(np.abs(matrix), axis=0)
    try:
        solution, _ = nnls(matrix / scale, formula.printed(x[None])[0].real, maxiter=PATIENCE * len(scale))
    except RuntimeError as error:
        raise NumericalLimit(
            "the causal completion of a formula was not found",
            value=str(error),
            remedy="Check coefficients and range of the formula, or take another record of the substance",
        ) from None
    weights = solution / scale
    used = weights[1:] > 0
    return Completion(
        offset=float(weights[0]), strength=weights[1:][used], centre=centre[used], knot=knot[used], shift=0.0
    )


def _candidate_bands(low: float, high: float) -> tuple[Real, Real]:
    """Bands whose supports (two knot distances to each side) lie outside [low, high] and above zero."""
    gaps = np.geomspace(0.01, 1000.0, 160)
    above = high * (1 + gaps)
    below = low / (1 + np.geomspace(0.01, LOWEST, 120))
    centre = np.concatenate((below, above))
    distance = np.where(centre < low, np.minimum(low - centre, centre), centre - high)
    return centre, WIDEST * distance
