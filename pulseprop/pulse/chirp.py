"""The chirp that a measured duration or autocorrelation implies, and how to find its sign."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError, NumericalLimit
from pulseprop.measures.autocorrelation import autocorrelation_fwhm, intensity_autocorrelation
from pulseprop.measures.widths import fwhm
from pulseprop.numerics.interpolation import band_limited
from pulseprop.pulse.measured import MeasuredPulse
from pulseprop.pulse.pulse import Pulse
from pulseprop.pulse.source import launch

__all__ = [
    "AutocorrelationFit",
    "GlassForSign",
    "chirp_from_duration",
    "gdd_from_autocorrelation",
    "glass_that_tells_the_sign",
    "launched_autocorrelation_fwhm",
    "launched_fwhm",
]

Real = NDArray[np.float64]
Source = Pulse | MeasuredPulse

LAUNCH_SHARE = 1e-11
"""Energy left out of the window in which a chirped pulse is measured."""

SCAN = 1.25
"""Ratio of neighbouring trial dispersions on the way to a bracket."""

MATCH = 1e-6
"""Relative difference of durations that counts as equal."""

STRONGEST = 400.0
"""Broadening beyond which no chirp is sought."""


def _chirped(source: Source, gdd: float) -> Source:
    return replace(source, gdd=gdd)


def launched_fwhm(source: Source) -> float:
    """Intensity FWHM in s of a pulse as launched, chirp included."""
    grid, envelope = launch(source, share=LAUNCH_SHARE)
    return fwhm(envelope, grid.step)


def launched_autocorrelation_fwhm(source: Source) -> float:
    """FWHM in s of the intensity autocorrelation of a pulse as launched."""
    grid, envelope = launch(source, share=LAUNCH_SHARE)
    return autocorrelation_fwhm(envelope, grid.step)


def chirp_from_duration(source: Source, measured: float) -> tuple[float, float]:
    """The smallest positive and the smallest negative GDD (s^2) that give the measured intensity FWHM (s).

    The root of the full shape's FWHM, not of the Gaussian formula; the pulse's own gdd is replaced, its tod
    and fod stay. The two differ in size where the spectrum is not symmetric and tod or fod stand. Raises
    InputError where the duration is shorter than without GDD, or where no GDD gives it.
    """
    shortest = launched_fwhm(_chirped(source, 0.0))
    if not measured > shortest * (1 - MATCH):
        raise InputError(
            f"the measured duration, {1e15 * measured:.5g} fs, is shorter than the transform limit of the "
            f"spectrum, {1e15 * shortest:.5g} fs",
            allowed=f"{1e15 * shortest:.5g} fs or more",
            remedy="Check the bandwidth, the shape and the deconvolution factor of the measured duration",
        )
    if measured <= shortest * (1 + MATCH):
        return 0.0, 0.0
    return _root(source, measured, shortest, 1), _root(source, measured, shortest, -1)


def _root(source: Source, measured: float, shortest: float, sign: int) -> float:
    from scipy.optimize import brentq

    def excess(size: float) -> float:
        return launched_fwhm(_chirped(source, sign * size)) / measured - 1

    # Well below the Gaussian's answer; other shapes differ from it by tens of per cent.
    low, high = 0.0, 0.3 * shortest**2 / (4 * np.log(2)) * np.sqrt((measured / shortest) ** 2 - 1)
    while excess(high) > 0:
        high /= 4
    while excess(high) < 0:
        low, high = high, SCAN * high
        if high > STRONGEST * shortest * measured:
            raise InputError(
                "no GDD gives the measured duration",
                value=f"{1e15 * measured:.5g} fs",
                remedy="State gdd instead",
            )
    root = float(brentq(excess, low, high, xtol=1e-10 * high, rtol=1e-10))
    if abs(excess(root)) > MATCH:
        raise InputError(
            "the FWHM jumps over the measured duration where a side peak crosses half maximum",
            value=f"{1e15 * measured:.5g} fs",
            remedy=f"State gdd; the jump lies at {sign * root * 1e30:.5g} fs^2",
        )
    return sign * root


@dataclass(frozen=True, kw_only=True, eq=False)
class AutocorrelationFit:
    """The intensity autocorrelation that comes closest to a measured one.

    gdd: |GDD| in s^2. residual: rms of measured minus fitted over the height of the fitted peak. centre:
    delay of the peak in s. scale, background: in the unit of the measured signal. fitted: (K,) at the
    measured delays, in that unit. pulse_fwhm, autocorrelation_fwhm: s, of the fitted pulse.
    """

    gdd: float
    residual: float
    centre: float
    scale: float
    background: float
    fitted: Real
    pulse_fwhm: float
    autocorrelation_fwhm: float


def gdd_from_autocorrelation(source: Source, delay: Real, signal: Real) -> AutocorrelationFit:
    """Least-squares |GDD| of a pulse of known spectrum from its measured intensity autocorrelation.

    delay: (K,) s, signal: (K,), any unit; peak position, height and background are fitted along. The pulse's
    own gdd is replaced; with neither tod nor fod both signs give one trace. Raises InputError for fewer than
    8 rows or numbers that are not finite, NumericalLimit where the fit does not settle.
    """
    from scipy.optimize import least_squares

    delay, signal = _checked(delay, signal)
    limit = launched_fwhm(_chirped(source, 0.0))
    start, middle = _first_guess(source, delay, signal, limit)

    def misfit(parameters: Real) -> Real:
        model = _model(source, abs(parameters[0]) * limit**2, delay - parameters[1] * limit)
        return _linear(model, signal)[0] - signal

    found = least_squares(
        misfit, [start / limit**2, middle / limit], x_scale=[0.1, 0.1], xtol=1e-12, ftol=1e-12
    )
    if not found.success:
        raise NumericalLimit(
            "the fit of a chirp to the measured autocorrelation does not settle",
            value=found.message,
            remedy="Check its delays, their unit and its background, or leave the autocorrelation out",
        )
    gdd, middle = abs(float(found.x[0])) * limit**2, float(found.x[1]) * limit
    fitted, scale, background = _linear(_model(source, gdd, delay - middle), signal)
    best = _chirped(source, gdd)
    return AutocorrelationFit(
        gdd=gdd,
        residual=float(np.sqrt(np.mean((fitted - signal) ** 2))) / abs(scale),
        centre=middle,
        scale=scale,
        background=background,
        fitted=fitted,
        pulse_fwhm=launched_fwhm(best),
        autocorrelation_fwhm=launched_autocorrelation_fwhm(best),
    )


def _checked(delay: Real, signal: Real) -> tuple[Real, Real]:
    delay, signal = np.asarray(delay, dtype=float), np.asarray(signal, dtype=float)
    if delay.ndim != 1 or delay.shape != signal.shape or delay.size < 8:
        raise InputError(
            "an autocorrelation needs as many signals as delays",
            value=f"{delay.size} delays, {signal.size} signals",
            allowed="equal numbers, 8 rows or more",
        )
    wrong = ~(np.isfinite(delay) & np.isfinite(signal))
    if wrong.any():
        raise InputError(
            "an autocorrelation holds what is not a number", place=f"row {int(np.argmax(wrong)) + 1}"
        )
    if not signal.max() > signal.min():
        raise InputError(
            "the autocorrelation is constant", value=float(signal.max()), allowed="a trace with a peak"
        )
    return delay, signal


def _first_guess(source: Source, delay: Real, signal: Real, limit: float) -> tuple[float, float]:
    """|GDD| and centre from a coarse scan, with the middle of the trace's upper half as centre."""
    weight = np.maximum(signal - 0.5 * (signal.max() + signal.min()), 0.0)
    middle = float(np.dot(weight, delay) / weight.sum())
    longest = float(np.ptp(delay)) / limit
    trials = limit**2 * np.concatenate(([0.0], np.geomspace(0.05, max(longest, 0.2), 24)))

    def misfit(gdd: float) -> float:
        return float(np.sum((_linear(_model(source, gdd, delay - middle), signal)[0] - signal) ** 2))

    return float(min(trials, key=misfit)), middle


def _model(source: Source, gdd: float, delay: Real) -> Real:
    """The autocorrelation of the chirped pulse at any delays, 1 at zero."""
    grid, envelope = launch(_chirped(source, gdd), share=LAUNCH_SHARE)
    trace = intensity_autocorrelation(envelope, grid.step)
    middle = trace.signal.size // 2
    return band_limited(trace.signal, delay / (0.5 * grid.step), origin=middle, wrap=False).real


def _linear(model: Real, signal: Real) -> tuple[Real, float, float]:
    """The best scale * model + background, with its two numbers."""
    design = np.column_stack((model, np.ones_like(model)))
    (scale, background), *_ = np.linalg.lstsq(design, signal, rcond=None)
    return design @ np.array([scale, background]), float(scale), float(background)


@dataclass(frozen=True, kw_only=True)
class GlassForSign:
    """A piece of medium whose insertion tells the sign of a chirp from the autocorrelation.

    thickness: m. width_now: autocorrelation FWHM in s without it. width_if_positive, width_if_negative: with
    it, for either sign. clear: their ratio is at least the one wanted; otherwise it is the largest that any
    thickness gives about full compression.
    """

    thickness: float
    width_now: float
    width_if_positive: float
    width_if_negative: float
    clear: bool

    @property
    def ratio(self) -> float:
        """The wider over the narrower."""
        widths = (self.width_if_positive, self.width_if_negative)
        return max(widths) / min(widths)


def glass_that_tells_the_sign(
    source: Source,
    gdd: float,
    gdd_per_length: Callable[[float], float],
    *,
    ratio: float = 1.5,
) -> GlassForSign:
    """The thinnest piece of a medium after which +|gdd| and -|gdd| show autocorrelation widths `ratio` apart.

    gdd: s^2, either sign. gdd_per_length: GDD per length in s^2/m of the medium at an angular frequency
    (rad/s). Third and higher orders of the medium are left out. Raises InputError where there is no chirp, or
    the medium has no GDD.
    """
    size = abs(gdd)
    strength = float(gdd_per_length(source.centre))
    if size == 0 or strength == 0 or not np.isfinite(size * strength):
        raise InputError(
            "no glass tells the sign",
            value=f"GDD {gdd * 1e30:.5g} fs^2",
            allowed="a chirp and a dispersive medium",
        )
    full = size / abs(strength)

    def inserted(thickness: float) -> tuple[float, float]:
        extra = strength * thickness
        positive, negative = (_chirped(source, sign * size + extra) for sign in (1, -1))
        return launched_autocorrelation_fwhm(positive), launched_autocorrelation_fwhm(negative)

    low, high = 0.0, full
    clear = max(inserted(full)) >= ratio * min(inserted(full))
    while clear and high - low > 1e-3 * full:
        middle = 0.5 * (low + high)
        widths = inserted(middle)
        low, high = (low, middle) if max(widths) >= ratio * min(widths) else (middle, high)
    positive, negative = inserted(high)
    return GlassForSign(
        thickness=high,
        width_now=launched_autocorrelation_fwhm(_chirped(source, size)),
        width_if_positive=positive,
        width_if_negative=negative,
        clear=clear,
    )
