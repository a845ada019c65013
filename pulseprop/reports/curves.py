"""The numbers behind the figures, thinned to what a page can hold."""

from __future__ import annotations

from collections.abc import Iterable
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from pulseprop.grid import Grid
from pulseprop.material.medium import Medium
from pulseprop.measures.contrast import thinned
from pulseprop.measures.profile import find_peak
from pulseprop.numerics.interpolation import band_limited, mean_turn

__all__ = [
    "POINTS",
    "IndexCurve",
    "PulseCurve",
    "bounds_of",
    "extremes",
    "index_curves",
    "pulse_curve",
    "thin_pairs",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

SPEED_OF_LIGHT = 299792458.0

POINTS = 2000
"""Points of a curve: more than a screen has columns."""

VISIBLE = 2e-3
"""Power over the peak below which nothing is seen on a linear axis."""


LINE_PLACES = np.sinh(np.linspace(-4.0, 4.0, 81)) / 4
"""Where a line is looked at, in its widths: out to seven of them, closest in the middle."""

MOST_LINES = 20
"""Lines of one medium that are resolved; of a long list the others are seen at the even places."""


class IndexCurve(NamedTuple):
    """Refractive index n + ik of a medium over vacuum wavelength in nm, and its GVD in fs^2/mm; all (K,)."""

    name: str
    wavelength_nm: Real
    n: Real
    k: Real
    gvd: Real


def index_curves(
    media: Iterable[Medium], low_nm: float, high_nm: float, points: int = 201
) -> list[IndexCurve]:
    """Curves of media between two vacuum wavelengths, cut to the range where the data behind each hold."""
    curves = [_index_curve(medium, low_nm, high_nm, points) for medium in media]
    return [curve for curve in curves if curve.wavelength_nm.size]


def _index_curve(medium: Medium, low_nm: float, high_nm: float, points: int) -> IndexCurve:
    high, low = (2 * np.pi * SPEED_OF_LIGHT / (edge * 1e-9) for edge in (low_nm, high_nm))
    omega = _places(medium, max(low, medium.band.low), min(high, medium.band.high), points)
    index = medium.index(omega)
    wavelength = 2 * np.pi * SPEED_OF_LIGHT / omega * 1e9
    gvd = np.array([medium.orders(float(place)).gvd for place in omega]) * 1e27
    return IndexCurve(medium.name, wavelength, index.real, index.imag, gvd)


def _places(medium: Medium, low: float, high: float, points: int) -> Real:
    """Angular frequencies from high to low, evenly in their logarithm, denser where lines stand."""
    if not low < high:
        return np.empty(0)
    places = [np.geomspace(low, high, points)]
    narrow = sorted(medium.resonances, key=lambda line: line.width)[:MOST_LINES]
    places += [line.centre + line.width * LINE_PLACES for line in narrow]
    omega = np.unique(np.concatenate(places))[::-1]
    return omega[(omega >= low) & (omega <= high)]


class PulseCurve(NamedTuple):
    """Time in s from the peak, power in W, and the carrier-resolved field in W^(1/2); all (K,)."""

    time: Real
    power: Real
    field: Real


def bounds_of(envelope: Complex, step: float, least: float = VISIBLE) -> tuple[float, float, float]:
    """Instant of the highest sample from the window's start, and how far on each side the power reaches above
    `least` of the peak; all in s."""
    height = envelope.real**2 + envelope.imag**2
    peak = int(np.argmax(height))
    seen = np.flatnonzero(height > least * height[peak])
    return step * peak, step * (peak - int(seen[0])), step * (int(seen[-1]) - peak)


def pulse_curve(grid: Grid, envelope: Complex, before: float, after: float) -> PulseCurve:
    """A stretch of a pulse about its peak, seconds before and after it.

    Between samples the field is band-limited; where a stretch has more samples than a screen has columns, the
    highest of each group stands for it.
    """
    height = envelope.real**2 + envelope.imag**2
    position = find_peak(envelope).position
    peak = round(position)
    first, last = -before / grid.step, after / grid.step
    if last - first > POINTS:
        index = np.arange(int(first), int(last) + 1)
        time, power = thinned(grid.step * index[0], grid.step, height[(peak + index) % height.size], POINTS)
        return PulseCurve(time, power, np.full(time.shape, np.nan))
    offset = np.linspace(first, last, POINTS)
    field = band_limited(envelope, offset + (position - peak), origin=peak, turn=mean_turn(envelope))
    time = grid.step * offset
    carrier = np.exp(-2j * np.pi * grid.carrier * (time + grid.start + grid.step * position))
    return PulseCurve(time, np.abs(field) ** 2, (field * carrier).real)


def extremes(values: Real, group: int) -> NDArray[np.intp]:
    """Indices of the lowest and highest of each group of values (N,), ascending; a short rest is left out."""
    whole = values.size // group * group
    blocks = values[:whole].reshape(-1, group)
    ends = np.sort(np.stack((blocks.argmin(axis=1), blocks.argmax(axis=1)), axis=1), axis=1)
    return np.asarray((ends + np.arange(0, whole, group)[:, None]).ravel())


def thin_pairs(x: Real, y: Real, points: int) -> tuple[Real, Real]:
    """At most about `points` pairs: fringes keep both their edges."""
    group = -(-2 * x.size // points)
    if group <= 2:
        return x, y
    index = extremes(y, group)
    return x[index], y[index]
