"""Phases fitted in the sense of least squares: where a search begins.

The mean square of the spectral phase beyond a constant and a delay, weighted by the amplitude spectrum, is
to second order the logarithm of the peak ratio with its sign turned, and for straight adjustments it is a
quadratic form. Fitting it takes no field.
"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.assembly import Assembly
from pulseprop.compensation.boxed import least_in_box
from pulseprop.errors import InputError

__all__ = ["curved_fit", "spectral_windows", "starts", "straight_fit", "whitened"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Window = Real
"""Weights (n,) over the lit samples, sum 1."""

FLAT_SPOTS = (-1.0, 0.0, 1.0)
"""Where a phase that cannot be flat everywhere may be flat, in standard deviations from the middle."""
SPOT = 0.8
"""Width of such a spot, standard deviations."""


def spectral_windows(amplitude: Real) -> list[Window]:
    """Weights (n,) under which fits are tried: |B|, |B|^2, and |B| about three places of the spectrum."""
    height = amplitude / amplitude.sum()
    index = np.arange(height.size)
    middle = float(np.dot(height, index))
    deviation = float(np.sqrt(np.dot(height, (index - middle) ** 2)))
    spots = [
        height * np.exp(-0.5 * ((index - middle - spot * deviation) / (SPOT * deviation)) ** 2)
        for spot in FLAT_SPOTS
    ]
    return [window / window.sum() for window in (height, height**2, *spots)]


def whitened(columns: Real, detuning: Real, window: Window) -> Real:
    """Columns (n,) or (n, c) times the root of the weights, with their constant and slope taken off."""
    root = np.sqrt(window)
    level, _ = np.linalg.qr(np.stack([root, root * detuning / np.abs(detuning).max()], axis=1))
    weighted = columns * (root if columns.ndim == 1 else root[:, None])
    return np.asarray(weighted - level @ (level.T @ weighted))


def straight_fit(phase: Real, slopes: Real, detuning: Real, window: Window) -> Real:
    """u in [0, 1]^k with the flattest phase + slopes @ u; phase (n,), slopes (n, k), rad."""
    base, columns = whitened(phase, detuning, window), whitened(slopes, detuning, window)
    where, _ = least_in_box((columns.T @ columns)[None], (columns.T @ base)[None])
    return np.asarray(where[0])


def curved_fit(assembly: Assembly, start: Real, window: Window, evaluations: int = 40) -> Real:
    """The same by scipy's bounded least squares from `start`, for settings that enter in any way."""
    from scipy.optimize import least_squares

    detuning = assembly.samples.detuning
    own = np.unwrap(np.angle(assembly.samples.amplitude))

    def residual(u: Real) -> Real:
        return whitened(assembly.exponent(u).imag + own, detuning, window)

    def jacobian(u: Real) -> Real:
        return whitened(assembly.jacobian(u).imag, detuning, window)

    inside = np.clip(start, 1e-6, 1 - 1e-6)
    try:
        found = least_squares(residual, inside, jacobian, bounds=(0.0, 1.0), max_nfev=evaluations)
    except InputError:
        return start
    return np.asarray(np.clip(found.x, 0.0, 1.0))


def starts(assembly: Assembly, first: Real) -> Iterator[Real]:
    """Settings from which to look for the best field; first: a guess, of which the curved ones are kept."""
    samples = assembly.samples
    amplitude = np.abs(samples.amplitude * np.exp(assembly.exponent(first).real))
    own = np.unwrap(np.angle(samples.amplitude))
    for window in spectral_windows(amplitude):
        if assembly.curved:
            yield curved_fit(assembly, first, window)
            continue
        origin = np.zeros(assembly.count)
        phase, slopes = assembly.exponent(origin).imag + own, assembly.jacobian(origin).imag
        yield straight_fit(phase, slopes, samples.detuning, window)
