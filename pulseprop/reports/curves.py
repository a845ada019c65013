"""The numbers behind the figures of pulses, thinned to what a page can hold."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT, VACUUM_PERMITTIVITY
from pulseprop.grid import Grid
from pulseprop.measures.contrast import thinned
from pulseprop.measures.profile import find_peak
from pulseprop.numerics.interpolation import band_limited, mean_turn

__all__ = [
    "POINTS",
    "UNITS",
    "FieldFacts",
    "PulseCurve",
    "bounds_of",
    "extremes",
    "field_facts",
    "pulse_curve",
    "thin_pairs",
    "volts_per_metre",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

UNITS = 1e15
"""Femtoseconds in a second."""

POINTS = 1600
"""Points of a curve: more than a screen has columns."""


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
    return field * float(np.sqrt(4 / (np.pi * VACUUM_PERMITTIVITY * SPEED_OF_LIGHT))) / radius


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
