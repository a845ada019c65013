"""Numbers of a pulse and how they answer to its spectrum: each with its exact first variation.

A pulse is its spectrum B on lit samples. The variation g (n,) of a number f says

    d f = Re sum_k g_k d(ln B_k),

so that with the logarithm of a transfer in hand, d(ln B) = d(exponent), every derivative by a setting is
one dot product. Peaks and windows lie where they are best, so that their own movement does not enter (the
envelope theorem).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.samples import Samples
from pulseprop.measures.profile import half_maximum
from pulseprop.numerics.transforms import backward, forward

__all__ = ["Varied", "contained", "energy", "limit_power", "peak_power", "square_integral", "width"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

RIVAL = 0.8
"""Local maxima of the samples above this share of the largest are looked at between samples."""
RIVALS = 3
NEWTON_STEPS = 4


@dataclass(frozen=True, eq=False)
class Varied:
    """A value and its variation by ln B, complex (n,). place: s, where the value belongs to an instant."""

    value: float
    variation: Complex
    place: float = 0.0


def energy(samples: Samples, spectrum: Complex) -> Varied:
    """Energy in J."""
    density = (spectrum.real**2 + spectrum.imag**2) / samples.grid.span
    return Varied(float(density.sum()), np.asarray(2.0 * density, dtype=complex))


def limit_power(samples: Samples, spectrum: Complex) -> Varied:
    """Peak power in W of the same spectrum with flat phase: the square of the integral of |B|."""
    height = np.abs(spectrum) / samples.grid.span
    field = float(height.sum())
    return Varied(field**2, (2.0 * field * height).astype(complex))


def peak_power(samples: Samples, spectrum: Complex, field: Complex) -> Varied:
    """Largest power in W between the samples of `field`, the envelope of `spectrum`; place: its instant."""
    tops = [_refined(samples, spectrum, at) for at in _rivals(field)]
    place, contributions = max(tops, key=lambda top: abs(top[1].sum()))
    total = contributions.sum()
    return Varied(float(abs(total) ** 2), 2.0 * np.conj(total) * contributions, place)


def _rivals(field: Complex) -> list[int]:
    height = field.real**2 + field.imag**2
    high = np.flatnonzero(height >= RIVAL * height.max())
    local = high[(height[high] >= height[high - 1]) & (height[high] >= height[(high + 1) % height.size])]
    return [int(at) for at in local[np.argsort(height[local], kind="stable")[::-1][:RIVALS]]]


def _refined(samples: Samples, spectrum: Complex, at: int) -> tuple[float, Complex]:
    """Newton's method on the power near sample `at`: the instant, and what each frequency adds there."""
    step, place = samples.grid.step, at * samples.grid.step
    contributions = at_instant(samples, spectrum, place)
    for _ in range(NEWTON_STEPS):
        slope, bend = _turning(samples, contributions)
        move = -slope / bend if bend < 0 else np.sign(slope) * 0.25 * step
        move = float(np.clip(move, -0.5 * step, 0.5 * step))
        place += move
        contributions = at_instant(samples, spectrum, place)
        if abs(move) < 1e-6 * step:
            break
    return place, contributions


def _turning(samples: Samples, contributions: Complex) -> tuple[float, float]:
    """First and second derivative of the power by time."""
    field = contributions.sum()
    first = -1j * np.dot(samples.detuning, contributions)
    second = -np.dot(samples.detuning**2, contributions)
    slope = 2.0 * (np.conj(field) * first).real
    return float(slope), float(2.0 * (abs(first) ** 2 + (np.conj(field) * second).real))


def at_instant(samples: Samples, spectrum: Complex, place: float) -> Complex:
    """B exp(-i detuning t) / span at t = place (s): their sum is the field there."""
    count = spectrum.size
    fine = int(np.ceil(np.sqrt(count)))
    coarse = -(-count // fine)
    turn = -2j * np.pi * place / samples.grid.span
    first = samples.first - samples.grid.points // 2
    factors = np.outer(
        np.exp(turn * (first + fine * np.arange(coarse))), np.exp(turn * np.arange(fine)) / samples.grid.span
    )
    return np.asarray(spectrum * factors.ravel()[:count])


def square_integral(samples: Samples, spectrum: Complex, field: Complex) -> Varied:
    """int P^2 dt in W^2 s."""
    power = field.real**2 + field.imag**2
    step = samples.grid.step
    variation = 4.0 * step * spectrum * samples.folded(np.asarray(power * np.conj(field)))
    return Varied(float(np.dot(power, power)) * step, variation)


def contained(samples: Samples, spectrum: Complex, field: Complex, window: float) -> Varied:
    """Energy in J within a window of `window` s, laid where it holds most; place: the window's middle.

    The running integral of the band-limited power is exact: its transform is that of the power times a sinc.
    """
    grid = samples.grid
    power = field.real**2 + field.imag**2
    frequency = (np.arange(grid.points) - grid.points // 2) / grid.span
    box = window * np.sinc(frequency * window)
    turning = forward(power.astype(complex)) * box
    place = _top_between(turning, frequency, backward(turning).real, grid.step)
    # The box around `place` as the samples see it: what each instant's power adds to the integral.
    weights = backward(box * np.exp(2j * np.pi * frequency * place)).real
    variation = 2.0 * spectrum * samples.folded(np.asarray(weights * np.conj(field)))
    return Varied(float(np.dot(weights, power)), variation, place)


def _top_between(turning: Complex, frequency: Real, running: Real, step: float) -> float:
    """Where a band-limited periodic real function is largest, s; turning: its transform."""
    place = int(np.argmax(running)) * step
    rate = -2j * np.pi * frequency
    for _ in range(NEWTON_STEPS):
        here = turning * np.exp(rate * place)
        slope, bend = float((rate * here).sum().real), float((rate**2 * here).sum().real)
        if not bend < 0:
            break
        place += float(np.clip(-slope / bend, -0.5 * step, 0.5 * step))
    return place


def width(samples: Samples, spectrum: Complex, field: Complex, peak: Varied) -> Varied:
    """Intensity FWHM in s between the outermost half-maximum points.

    Differentiable except where a side peak crosses half maximum.
    """
    step = samples.grid.step
    stretch = half_maximum(field)
    variation = np.zeros(spectrum.size, dtype=complex)
    for place, sign in ((stretch.left * step, -1.0), (stretch.right * step, 1.0)):
        contributions = at_instant(samples, spectrum, place)
        field_there = contributions.sum()
        slope, _ = _turning(samples, contributions)
        grown = 2.0 * np.conj(field_there) * contributions - 0.5 * peak.variation
        variation -= sign * grown / slope
    return Varied(stretch.width * step, variation, stretch.peak.position * step)
