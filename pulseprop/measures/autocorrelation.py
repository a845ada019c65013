"""What an autocorrelator would show of a field."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.measures.profile import half_maximum, power
from pulseprop.measures.window import energy_window, quiet_start
from pulseprop.numerics.interpolation import band_limited
from pulseprop.numerics.transforms import fast_length

__all__ = [
    "Autocorrelation",
    "autocorrelation_fwhm",
    "intensity_autocorrelation",
    "interferometric_autocorrelation",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

NEGLECTED = 1e-18
"""Share of the energy at the ends of the window that is left out, so that empty stretches cost no memory."""

FRINGE_POINTS = 16
"""Delays an optical period in the interferometric trace; its fastest fringe has half a period."""

LONGEST_FRINGED = 1 << 17
"""Samples about the peak that enter a fringe-resolved trace; fainter ringing further off is left out."""

LONGEST_TRACE = 20001
"""Delays in an interferometric trace for looking."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Autocorrelation:
    """What the instrument shows.

    delay: s, (K,), ascending about 0. signal: (K,); 1 at zero delay for the intensity trace, 8 for the
    fringe-resolved one.
    """

    delay: Real
    signal: Real


def _gathered(envelope: Complex) -> Complex:
    """The field in one piece, cut to where its energy is."""
    height = power(envelope)
    start = quiet_start(height)
    if start:
        envelope, height = np.roll(envelope, -start), np.roll(height, -start)
    return envelope[energy_window(height, NEGLECTED)]


def _correlation(left: Complex, right: Complex, length: int) -> Complex:
    """sum_t left(t) conj(right(t - tau)) for tau in fft order, zero padded to `length`."""
    product = np.fft.fft(left, length)
    product *= np.fft.fft(right, length).conj()
    return np.asarray(np.fft.ifft(product))


def _about_peak(field: Complex) -> Complex:
    """At most `LONGEST_FRINGED` samples about the highest."""
    first = max(int(np.argmax(power(field))) - LONGEST_FRINGED // 2, 0)
    return field[first : first + LONGEST_FRINGED]


def _doubled(field: Complex) -> Complex:
    """The same field on twice as many samples, so that its square and cube fit into their band."""
    count = field.size
    spectrum = np.fft.fft(field)
    padded = np.zeros(2 * count, dtype=complex)
    padded[: (count + 1) // 2] = 2 * spectrum[: (count + 1) // 2]
    padded[-(count // 2) :] = 2 * spectrum[(count + 1) // 2 :]
    return np.asarray(np.fft.ifft(padded))


def intensity_autocorrelation(envelope: Complex, step: float) -> Autocorrelation:
    """int P(t) P(t - tau) dt over its value at tau = 0, on delays half a step apart.

    The field (N,) must be oversampled twice; no wrap-around.
    """
    height = power(_gathered(envelope))
    length = fast_length(2 * height.size)
    spectrum = np.fft.rfft(height, length)
    squared = np.square(spectrum.real) + np.square(spectrum.imag)
    # Twice as many delays: the trace fills the whole band of the field's samples.
    signal = np.fft.irfft(squared, 2 * length)
    reach = 2 * height.size - 1
    signal = np.concatenate((signal[-reach:], signal[: reach + 1])) / signal[0]
    delay = np.linspace(-0.5 * step * reach, 0.5 * step * reach, signal.size)
    return Autocorrelation(delay=delay, signal=signal)


def autocorrelation_fwhm(envelope: Complex, step: float) -> float:
    """FWHM in s of the intensity autocorrelation, between its outermost half-maximum points."""
    trace = intensity_autocorrelation(envelope, step)
    return half_maximum(trace.signal, np.real).width * 0.5 * step


def interferometric_autocorrelation(
    envelope: Complex, step: float, carrier: float, delay: Real | None = None
) -> Autocorrelation:
    """int |(E(t) + E(t - tau))^2|^2 dt, normalised to 1 far from zero delay and so to 8 at zero.

    envelope: (N,) about `carrier` (Hz), oversampled twice. delay: s; by default enough delays to see every
    fringe over three widths of the intensity autocorrelation, at most 20,001. In terms of E and P = |E|^2 the
    integral is 2 int P^2 + 4 int P P' + 4 Re int (P + P') E E'* + 2 Re int E^2 E'*^2, a prime marking the
    delayed one.
    """
    if delay is None:
        delay = _fringe_delays(1.5 * autocorrelation_fwhm(envelope, step), carrier)
    field = _doubled(_about_peak(_gathered(envelope)))
    height = power(field)
    length = fast_length(2 * field.size)
    both = _correlation(height.astype(complex), height.astype(complex), length)
    single = _correlation(height * field, field, length) + _correlation(field, height * field, length)
    double = _correlation(field * field, field * field, length)
    position = delay / (0.5 * step)
    turn = np.exp(-2j * np.pi * carrier * delay)
    floor = 2 * both[0].real
    signal = floor + 4 * band_limited(both, position).real
    signal += 4 * (band_limited(single, position) * turn).real
    signal += 2 * (band_limited(double, position) * turn * turn).real
    signal[np.abs(position) > field.size] = floor
    return Autocorrelation(delay=delay, signal=signal / floor)


def _fringe_delays(reach: float, carrier: float) -> Real:
    count = int(min(2 * np.ceil(reach * carrier * FRINGE_POINTS) + 1, LONGEST_TRACE))
    return np.linspace(-reach, reach, count)
