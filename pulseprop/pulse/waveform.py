"""A pulse from a measured waveform E(t), such as an electro-optic trace of a terahertz pulse."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.measures.profile import power
from pulseprop.pulse.measured import MeasuredPulse
from pulseprop.pulse.sampled import sampled_transform

__all__ = ["pulse_from_waveform"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

EVEN = 1e-3
"""Deviation of the instants from even spacing, in steps, that is taken for rounding of the printed time."""

OPEN_END = 0.01
"""Field at an end of the record over its peak that is worth a note."""

HIGH_BAND, HIGH_SHARE = 0.9, 1e-3
"""More than this share of the energy above this part of the band: noise, or samples too far apart."""


def pulse_from_waveform(
    time: Real,
    field: Real,
    *,
    energy: float,
    gdd: float = 0.0,
    tod: float = 0.0,
    fod: float = 0.0,
    carrier_phase: float = 0.0,
    beam_radius: float | None = None,
    repetition_rate: float | None = None,
) -> MeasuredPulse:
    """The pulse behind a record of the real field.

    time: (K,) s, strictly rising; unevenly spaced records are resampled by a cubic spline and the notes say
    so. field: (K,), any unit: it is scaled to `energy`. The mean of the field is taken off (nothing
    propagates at zero frequency), and t = 0 is moved to the sample of largest |field|. The spectrum is that
    of the samples, exact up to their Nyquist frequency and zero beyond. Raises InputError for fewer than 16
    rows, numbers that are not finite, a time that does not rise, or no field.
    """
    time, field = _checked(time, field)
    time, field, resampled = _even(time, field)
    step = float((time[-1] - time[0]) / (time.size - 1))
    mean = float(field.mean())
    field = field - mean
    top = int(np.argmax(np.abs(field)))
    height = float(abs(field[top]))
    if not height > 0:
        raise InputError("the waveform is constant", value=mean, allowed="a field that changes")
    transform = sampled_transform(field / height, -top * step, step)
    # The analytic signal carries twice the positive half: by Parseval, twice the energy of the samples.
    scale = 2 / np.sqrt(2 * step * float(np.dot(field, field)) / height**2)
    strength = power(transform.values)
    upper = transform.omega > 0
    centre = float(np.dot(transform.omega[upper], strength[upper]) / strength[upper].sum())
    high = float(strength[transform.omega > HIGH_BAND * transform.nyquist].sum() / strength[upper].sum())
    return MeasuredPulse(
        unit_spectrum=lambda omega: scale * transform(omega),
        band=(0.0, transform.nyquist),
        window=2.5 * time.size * step,
        centre=centre,
        energy=energy,
        gdd=gdd,
        tod=tod,
        fod=fod,
        carrier_phase=carrier_phase,
        beam_radius=beam_radius,
        repetition_rate=repetition_rate,
        said=(
            *resampled,
            f"The mean of the record, {100 * mean / height:.2g} % of its peak, was taken off.",
            f"Time zero was moved to the largest field, at {1e12 * time[top]:.5g} ps of the record.",
            *_end_notes(field, height),
            *_band_note(high),
        ),
    )


def _checked(time: Real, field: Real) -> tuple[Real, Real]:
    time, field = np.asarray(time, dtype=float), np.asarray(field, dtype=float)
    if time.ndim != 1 or time.shape != field.shape or time.size < 16:
        raise InputError(
            "a waveform needs as many fields as instants",
            value=f"{time.size} instants, {field.size} fields",
            allowed="equal numbers, 16 rows or more",
        )
    for name, values in (("instant", time), ("field", field)):
        wrong = ~np.isfinite(values)
        if wrong.any():
            row = int(np.argmax(wrong))
            raise InputError(f"a {name} is not a number", value=float(values[row]), place=f"row {row + 1}")
    steps = np.diff(time)
    if not (steps > 0).all():
        row = int(np.argmax(steps <= 0)) + 1
        raise InputError(
            "the time column turns back or repeats",
            value=float(time[row]),
            place=f"row {row + 1}",
            allowed="rising instants",
        )
    return time, field


def _even(time: Real, field: Real) -> tuple[Real, Real, tuple[str, ...]]:
    """The record on even instants, and what was done to it."""
    even, step = np.linspace(time[0], time[-1], time.size, retstep=True)
    worst = float(np.max(np.abs(time - even)) / step)
    if worst <= EVEN:
        return even, field, ()
    from scipy.interpolate import CubicSpline

    count = int(np.ceil((time[-1] - time[0]) / np.diff(time).min() - 1e-6)) + 1
    count = min(count, 8 * time.size)
    even = np.linspace(time[0], time[-1], count)
    note = (
        f"The instants are uneven by up to {worst:.2g} steps: "
        f"resampled from {time.size} to {count} by a spline."
    )
    return even, CubicSpline(time, field)(even), (note,)


def _end_notes(field: Real, height: float) -> tuple[str, ...]:
    edge = max(field.size // 100, 1)
    ends = {"begins": np.abs(field[:edge]).max(), "ends": np.abs(field[-edge:]).max()}
    return tuple(
        f"The record {word} at {100 * size / height:.2g} % of its peak: a longer record would tell more."
        for word, size in ends.items()
        if size > OPEN_END * height
    )


def _band_note(high: float) -> tuple[str, ...]:
    if high <= HIGH_SHARE:
        return ()
    return (
        f"{100 * high:.2g} % of the energy lies in the last tenth below the Nyquist frequency of the record: "
        "noise, or samples too far apart.",
    )
