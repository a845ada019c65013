"""The numbers behind the figures, thinned to what a page can hold."""

from __future__ import annotations

from collections.abc import Iterable
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from pulseprop.grid import Grid
from pulseprop.material.medium import Medium, Resonance
from pulseprop.material.response import View
from pulseprop.measures.contrast import thinned
from pulseprop.measures.profile import find_peak
from pulseprop.numerics.interpolation import band_limited, mean_turn
from pulseprop.numerics.series import product, variable

__all__ = [
    "POINTS",
    "ChiCurve",
    "FieldFacts",
    "IndexCurve",
    "PulseCurve",
    "bounds_of",
    "chi_curves",
    "extremes",
    "field_facts",
    "index_curves",
    "pulse_curve",
    "strongest_line",
    "thin_pairs",
    "volts_per_metre",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

SPEED_OF_LIGHT = 299792458.0

VACUUM_IMPEDANCE = 376.730313412
"""1 / (epsilon0 c) in ohm: CODATA 2022."""

POINTS = 1600
"""Points of a curve: more than a screen has columns."""

LINE_PLACES = np.sinh(np.linspace(-4.0, 4.0, 81)) / 4
"""Where a line is looked at, in its widths: out to seven of them, closest in the middle."""

MOST_LINES = 20
"""Lines of one medium that are resolved; of a long list the others are seen at the even places."""


MOST_LOOKED_AT = 200
"""Lines of one medium among which the strongest is sought."""


class IndexCurve(NamedTuple):
    """n - 1 and k of a medium over vacuum wavelength in nm, and its GVD in fs^2/mm; all (K,)."""

    name: str
    wavelength_nm: Real
    excess: Real
    k: Real
    gvd: Real


def index_curves(
    media: Iterable[Medium], low_nm: float, high_nm: float, points: int = 161
) -> list[IndexCurve]:
    """Curves of media between two vacuum wavelengths, cut to the range where the data behind each hold."""
    curves = [_index_curve(medium, low_nm, high_nm, points) for medium in media]
    return [curve for curve in curves if curve.wavelength_nm.size]


def _index_curve(medium: Medium, low_nm: float, high_nm: float, points: int) -> IndexCurve:
    omega = _places(medium, *_reach(medium, low_nm, high_nm), points)
    excess = medium.refraction(omega)[0] if omega.size else np.empty(0, dtype=complex)
    return IndexCurve(
        medium.name, 2 * np.pi * SPEED_OF_LIGHT / omega * 1e9, excess.real, excess.imag, _gvd(medium, omega)
    )


def _gvd(medium: Medium, omega: Real) -> Real:
    """The second derivative of omega n / c in fs^2/mm, all places at once."""
    if not omega.size:
        return omega
    series = product(variable(omega, 3), medium.refraction(omega, 3, View.PRINTED))
    return np.asarray(2e27 * series[2].real / SPEED_OF_LIGHT)


class ChiCurve(NamedTuple):
    """Susceptibility of a medium, complex, over frequency in THz, ascending; both (K,)."""

    name: str
    frequency: Real
    chi: Complex


def chi_curves(media: Iterable[Medium], low_nm: float, high_nm: float, points: int = 161) -> list[ChiCurve]:
    """chi of media between two vacuum wavelengths, cut to the range where the data behind each hold."""
    curves = [_chi_curve(medium, *_reach(medium, low_nm, high_nm), points) for medium in media]
    return [curve for curve in curves if curve.frequency.size]


def strongest_line(media: Iterable[Medium], low_nm: float, high_nm: float) -> ChiCurve | None:
    """chi about the line that absorbs most between two wavelengths, out to seven of its widths, or None."""
    found: list[tuple[float, Medium, Resonance]] = []
    for medium in media:
        low, high = _reach(medium, low_nm, high_nm)
        for line in medium.resonances[:MOST_LOOKED_AT]:
            if low < line.centre < high:
                found.append((float(medium.susceptibility(np.array(line.centre)).imag), medium, line))
    if not found:
        return None
    _, medium, line = max(found, key=lambda entry: entry[0])
    omega = np.unique(line.centre + line.width * LINE_PLACES)
    return ChiCurve(medium.name, omega * 1e-12 / (2 * np.pi), medium.susceptibility(omega))


def _chi_curve(medium: Medium, low: float, high: float, points: int) -> ChiCurve:
    omega = _places(medium, low, high, points)[::-1]
    chi = medium.susceptibility(omega) if omega.size else np.empty(0, dtype=complex)
    return ChiCurve(medium.name, omega * 1e-12 / (2 * np.pi), chi)


def _reach(medium: Medium, low_nm: float, high_nm: float) -> tuple[float, float]:
    """Angular frequencies between two wavelengths where the data behind a medium hold."""
    high, low = (2 * np.pi * SPEED_OF_LIGHT / (edge * 1e-9) for edge in (low_nm, high_nm))
    return max(low, medium.band.low), min(high, medium.band.high)


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


def bounds_of(envelope: Complex, step: float, least: float) -> tuple[float, float, float]:
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


class FieldFacts(NamedTuple):
    """Of the real field: peak-to-peak value in W^(1/2); instant (s) of its main peak, front's clock."""

    peak_to_peak: float
    arrival: float


def field_facts(grid: Grid, envelope: Complex, centre: float) -> FieldFacts:
    """Of the field three cycles of the centre frequency (Hz) about the envelope's peak."""
    near = pulse_curve(grid, envelope, 3 / centre, 3 / centre)
    main = int(np.argmax(np.abs(near.field)))
    origin = grid.start + grid.step * find_peak(envelope).position
    return FieldFacts(float(np.ptp(near.field)), origin + float(near.time[main]))


def volts_per_metre(field: float, radius: float) -> float:
    """Electric field on the axis of a Gaussian beam of this 1/e^2 radius (m), of a field in W^(1/2).

    |field|^2 is the power averaged over the carrier, so E^2 = 2 I / (epsilon0 c) and I = 2 P / (pi w^2).
    """
    return field * float(np.sqrt(4 * VACUUM_IMPEDANCE / np.pi)) / radius


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
