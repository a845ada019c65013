"""What no compensator can undo: light that is gone, and structure in the phase that no smooth device has."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.goals import Judge
from pulseprop.compensation.result import Remainder
from pulseprop.constants import FEMTO, TWO_PI_C
from pulseprop.measures.limits import transform_limit
from pulseprop.measures.widths import spectral_fwhm

__all__ = ["remainder_of"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

DEGREE = 8
"""Of the polynomial that stands for every smooth phase."""
HALF = 0.5
SEEN = 0.01
"""Power over the peak of the spectrum above which a dark stretch matters."""


def remainder_of(judge: Judge, background: Complex) -> Remainder:
    """background: exponent (n,) of the elements on which nothing can be set."""
    samples = judge.samples
    entering = np.abs(samples.amplitude).astype(complex)
    leaving = entering * np.exp(background.real)
    grid = samples.grid
    before, after = samples.whole(entering), samples.whole(leaving)
    limit_in, limit_out = transform_limit(grid, before), transform_limit(grid, after)
    return Remainder(
        limit_in_fs=limit_in.fwhm * FEMTO,
        limit_out_fs=limit_out.fwhm * FEMTO,
        spectrum_in_THz=spectral_fwhm(before, 1 / grid.span) * 1e-12,
        spectrum_out_THz=spectral_fwhm(after, 1 / grid.span) * 1e-12,
        transmission=grid.energy(after) / grid.energy(before),
        peak_limit=limit_out.peak_power / limit_in.peak_power,
        smooth_peak_ratio=_smooth_peak_ratio(judge, background, np.abs(leaving)),
        dark_nm=_dark(samples.omega, np.abs(entering), background.real),
    )


def _smooth_peak_ratio(judge: Judge, background: Complex, leaving: Real) -> float:
    """The peak ratio after the fitted polynomial is taken off."""
    detuning = judge.samples.detuning / np.abs(judge.samples.detuning).max()
    own = np.unwrap(np.angle(judge.samples.amplitude))
    root = np.sqrt(leaving / leaving.sum())
    terms = np.polynomial.chebyshev.chebvander(detuning, DEGREE)
    level, _ = np.linalg.qr(terms * root[:, None])
    phase = (background.imag + own) * root
    rest = np.divide(phase - level @ (level.T @ phase), root, out=np.zeros_like(root), where=root > 0)
    ratio = judge.peak(background.real + 1j * (rest - own)) / judge.peak(background.real - 1j * own)
    return min(ratio, 1.0)


def _dark(omega: Real, entering: Real, loss: Real) -> tuple[tuple[float, float], ...]:
    """Stretches (nm, shortest first) where light that matters loses half of what the best place keeps."""
    seen = entering**2 > SEEN * float((entering**2).max())
    kept = np.exp(2 * loss)
    dark = seen & (kept < HALF * kept[seen].max())
    edges = np.flatnonzero(np.diff(np.concatenate([[False], dark, [False]]).astype(int)))
    stretches = zip(edges[::2], edges[1::2] - 1, strict=True)
    found = [
        (float(TWO_PI_C / omega[last] * 1e9), float(TWO_PI_C / omega[first] * 1e9))
        for first, last in stretches
    ]
    return tuple(sorted(found))
