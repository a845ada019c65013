"""The pulse before and after on one time axis, though each was computed in a window of its own."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.propagation.result import Fields

__all__ = ["CommonClock", "on_one_clock"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

MOST_SAMPLES = 1 << 21
"""Longest axis that is laid over both windows; a metre of fibre at 1 fs would take five million samples."""


@dataclass(frozen=True, kw_only=True)
class CommonClock:
    """time in s on the clock of the front, and both fields on it, zero outside their windows.

    Where the windows lie too far apart for one axis, `time` is the leaving window and `time_in` holds the
    instants of `entering`; else both are the same.
    """

    time: Real
    time_in: Real
    entering: Complex
    leaving: Complex


def on_one_clock(fields: Fields) -> CommonClock:
    """Both fields in the form that was asked for, divided by the carrier or not."""
    own = fields.grid_in
    lag = round((fields.grid_out.start - own.start) / own.step)
    out = fields.grid_out.moved(own.start + lag * own.step)
    entering, leaving = fields.envelope_in, out.to_field(fields.spectrum_out)
    if fields.form == "field":
        entering, leaving = own.carrier_resolved(entering), out.carrier_resolved(leaving)
    samples = out.points + abs(lag)
    if samples > max(MOST_SAMPLES, 2 * out.points):
        return CommonClock(time=out.time, time_in=own.time, entering=entering, leaving=leaving)
    time = min(own.start, out.start) + own.step * np.arange(samples, dtype=float)
    return CommonClock(
        time=time,
        time_in=time,
        entering=_placed(entering, max(-lag, 0), samples),
        leaving=_placed(leaving, max(lag, 0), samples),
    )


def _placed(field: Complex, first: int, samples: int) -> Complex:
    axis = np.zeros(samples, dtype=complex)
    axis[first : first + field.size] = field
    return axis
