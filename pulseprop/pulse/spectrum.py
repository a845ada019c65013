"""A pulse from a measured spectrum.

The instrument's reading is a power per unit of its own axis. It becomes a spectrum per frequency with the
Jacobian (|d lambda / d nu| = lambda^2 / c), and the amplitude, its square root, is interpolated against
frequency by a monotone piecewise cubic (PCHIP), so that it never overshoots and closes continuously where the
noise begins.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import PLANCK, SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.measures.widths import fwhm
from pulseprop.pulse.measured import CutLimit, MeasuredPulse
from pulseprop.pulse.source import launch

__all__ = ["AXES", "DEFAULT_CUT", "READINGS", "pulse_from_spectrum"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Curve = Callable[[Real], Real]

AXES = ("wavelength", "frequency", "wavenumber", "photon_energy")
"""What the axis of a spectrum may be: vacuum wavelength in m, Hz, 1/m, J."""

READINGS = ("counts", "power", "amplitude")
"""What the reading may be.

Counts and power are per unit of the axis, amplitude is |A(omega)| up to a factor.
"""

DEFAULT_CUT = 0.005
"""Share of the peak below which a reading counts as noise unless the user says otherwise."""

LARGEST_CUT = 0.5

RESOLVED = 32
"""Length of the field's window over the inverse of the row spacing; PCHIP wings fall with t^-3 in between."""


def pulse_from_spectrum(
    x: Real,
    y: Real,
    *,
    axis: str,
    reading: str,
    energy: float,
    phase: Real | None = None,
    background: float | Real = 0.0,
    noise_cut: float = DEFAULT_CUT,
    gdd: float = 0.0,
    tod: float = 0.0,
    fod: float = 0.0,
    carrier_phase: float = 0.0,
    beam_radius: float | None = None,
    repetition_rate: float | None = None,
) -> MeasuredPulse:
    """The pulse behind a measured spectrum.

    x: (K,), SI, strictly rising or falling. y: (K,) readings. phase: (K,) rad, field times exp(+i phase); its
    mean slope is taken off so that the pulse stands at t = 0. background: a number or (K,), subtracted from
    y. noise_cut: share of the peak reading (of its square for amplitudes) below which rows become zero, 0 to
    0.5. The rest as for `Pulse`. The result's `limits` tell the transform limit at half, once and twice the
    cut. Raises InputError.
    """
    x, y = _checked(x, y, axis, reading, noise_cut)
    signal = y - _background(background, y.size)
    strength = np.where(signal > 0, signal, 0.0) ** (2 if reading == "amplitude" else 1)
    if not strength.max() > 0:
        raise InputError(
            "the spectrum has no row above its background", value=float(signal.max()), allowed="above 0"
        )
    relative = strength / strength.max()
    omega = _angular_frequency(x, axis)
    jacobian = x * x if axis == "wavelength" and reading != "amplitude" else np.ones_like(x)
    order = np.argsort(omega)
    omega, relative, jacobian = omega[order], relative[order], jacobian[order]

    cuts = _neighbours(noise_cut)
    bare = [_flat_pulse(omega, relative, jacobian, cut) for cut in cuts]
    limits = tuple(CutLimit(cut, _limit(pulse)) for cut, pulse in zip(cuts, bare, strict=True))
    chosen = bare[cuts.index(noise_cut)]
    said = (*_row_notes(signal, relative, noise_cut), _limit_note(limits), *chosen.said)
    if phase is not None:
        chosen, moved = _with_phase(chosen, omega, _checked_phase(phase, y.size)[order])
        said = (*said, moved)
    return replace(
        chosen,
        energy=energy,
        gdd=gdd,
        tod=tod,
        fod=fod,
        carrier_phase=carrier_phase,
        beam_radius=beam_radius,
        repetition_rate=repetition_rate,
        limits=limits,
        said=said,
    )


def _checked(x: Real, y: Real, axis: str, reading: str, noise_cut: float) -> tuple[Real, Real]:
    if axis not in AXES:
        raise InputError("a spectrum has another axis", value=axis, allowed=", ".join(AXES))
    if reading not in READINGS:
        raise InputError("a spectrum has another reading", value=reading, allowed=", ".join(READINGS))
    if not 0 <= noise_cut <= LARGEST_CUT:
        raise InputError(
            "the noise cut is a share of the peak", value=noise_cut, allowed=f"0 to {LARGEST_CUT}"
        )
    x, y = np.asarray(x, dtype=float), np.asarray(y, dtype=float)
    if x.ndim != 1 or x.shape != y.shape or x.size < 4:
        raise InputError(
            "a spectrum needs as many readings as places",
            value=f"{x.size} places, {y.size} readings",
            allowed="equal numbers, 4 rows or more",
        )
    _refuse_row(~np.isfinite(x), x, f"a {axis} is not a number")
    _refuse_row(~np.isfinite(y), y, "a reading is not a number")
    _refuse_row(x <= 0, x, f"a {axis} is not positive")
    steps = np.diff(x)
    wrong = np.sign(steps) != np.sign(x[-1] - x[0])
    _refuse_row(np.concatenate(([False], wrong)), x, f"the {axis} column turns back or repeats")
    return x, y


def _refuse_row(wrong: NDArray[np.bool_], values: Real, problem: str) -> None:
    if wrong.any():
        row = int(np.argmax(wrong))
        raise InputError(problem, value=float(values[row]), place=f"row {row + 1}", allowed="rows in order")


def _background(background: float | Real, count: int) -> float | Real:
    level = np.asarray(background, dtype=float)
    if level.shape not in ((), (count,)) or not np.isfinite(level).all():
        raise InputError(
            "the background does not fit the spectrum",
            value=f"shape {level.shape}",
            allowed=f"one finite number or {count} of them",
        )
    return level


def _checked_phase(phase: Real, count: int) -> Real:
    phase = np.asarray(phase, dtype=float)
    if phase.shape != (count,) or not np.isfinite(phase).all():
        raise InputError(
            "the phase does not fit the spectrum",
            value=f"shape {phase.shape}",
            allowed=f"{count} finite numbers",
        )
    return phase


def _angular_frequency(x: Real, axis: str) -> Real:
    if axis == "wavelength":
        return TWO_PI_C / x
    per_unit = {"frequency": 1.0, "wavenumber": SPEED_OF_LIGHT, "photon_energy": 1 / PLANCK}
    return 2 * np.pi * per_unit[axis] * x


def _neighbours(cut: float) -> tuple[float, float, float]:
    """The cut with others to compare: half and twice, or for no cut the default and half of it."""
    return (cut / 2, cut, 2 * cut) if cut else (0.0, DEFAULT_CUT / 2, DEFAULT_CUT)


def _flat_pulse(omega: Real, relative: Real, jacobian: Real, cut: float) -> MeasuredPulse:
    """The spectrum with flat phase, 1 J, zero where the relative reading is below the cut."""
    amplitude = np.sqrt(np.where(relative >= cut, relative * jacobian, 0.0))
    knots, heights, said = _closed(omega, amplitude)
    curve, _ = _pchip(knots, heights / heights.max())
    norm, centre = _moments(curve, knots)
    scale = 1 / np.sqrt(norm / (2 * np.pi))
    return MeasuredPulse(
        unit_spectrum=lambda at: (scale * curve(at)).astype(complex),
        band=(float(knots[0]), float(knots[-1])),
        window=RESOLVED * 2 * np.pi / float(np.median(np.diff(knots))),
        centre=centre,
        energy=1.0,
        said=said,
    )


def _closed(omega: Real, amplitude: Real) -> tuple[Real, Real, tuple[str, ...]]:
    """The rows from the last zero before the spectrum to the first after it.

    Ends that are not zero get one.
    """
    used = np.flatnonzero(amplitude)
    first, last = max(int(used[0]) - 1, 0), min(int(used[-1]) + 2, omega.size)
    knots, heights = omega[first:last], amplitude[first:last]
    said: tuple[str, ...] = ()
    top = float(amplitude.max())
    if heights[0] > 0:
        said = (*said, _open_end("low", float(heights[0]) / top))
        below = max(2 * knots[0] - knots[1], 0.5 * knots[0])
        knots, heights = np.concatenate(([below], knots)), np.concatenate(([0.0], heights))
    if heights[-1] > 0:
        said = (*said, _open_end("high", float(heights[-1]) / top))
        knots, heights = np.append(knots, 2 * knots[-1] - knots[-2]), np.append(heights, 0.0)
    return knots, heights, said


def _open_end(side: str, height: float) -> str:
    return (
        f"The table ends at its {side}-frequency side at {100 * height**2:.2g} % of the peak per frequency; "
        "the spectrum was closed within one more row. Light there needs a wider table; a baseline of the "
        "detector is no light, and widens the spectrum: state it as background."
    )


def _pchip(knots: Real, heights: Real) -> tuple[Curve, Curve]:
    """The monotone cubic through the knots and its derivative."""
    from scipy.interpolate import PchipInterpolator

    curve = PchipInterpolator(knots, heights)
    return curve, curve.derivative()


def _quadrature(knots: Real) -> tuple[Real, Real]:
    """Nodes and weights that integrate squares of a piecewise cubic, times omega, exactly."""
    nodes, weights = np.polynomial.legendre.leggauss(4)
    half = 0.5 * np.diff(knots)
    return ((knots[:-1] + half)[:, None] + half[:, None] * nodes).ravel(), (half[:, None] * weights).ravel()


def _moments(curve: Curve, knots: Real) -> tuple[float, float]:
    """int curve^2 d omega and the mean of omega under it."""
    omega, weights = _quadrature(knots)
    density = curve(omega) ** 2 * weights
    total = float(density.sum())
    return total, float(np.dot(omega, density)) / total


def _limit(pulse: MeasuredPulse) -> float:
    grid, envelope = launch(pulse, share=1e-9)
    return fwhm(envelope, grid.step)


def _with_phase(pulse: MeasuredPulse, omega: Real, phase: Real) -> tuple[MeasuredPulse, str]:
    """The pulse with a measured phase, less its mean slope."""
    curve, slope = _pchip(omega, np.unwrap(phase))
    low, high = float(omega[0]), float(omega[-1])
    knots = omega[(omega >= pulse.band[0]) & (omega <= pulse.band[1])]
    at, weights = _quadrature(knots)
    density = np.abs(pulse.unit_spectrum(at)) ** 2 * weights
    delay = float(np.dot(slope(at), density) / density.sum())
    reach = float(np.max(np.abs(slope(at[density > 1e-6 * density.max()]) - delay)))
    flat = pulse.unit_spectrum

    def turned(where: Real) -> Complex:
        angle = curve(np.clip(where, low, high)) - delay * (where - pulse.centre)
        return np.asarray(flat(where) * np.exp(1j * angle))

    moved = f"The measured phase has a mean group delay of {1e15 * delay:.4g} fs, which was taken off."
    return replace(pulse, unit_spectrum=turned, window=pulse.window + 4 * reach), moved


def _row_notes(signal: Real, relative: Real, cut: float) -> tuple[str, ...]:
    dropped = int(np.count_nonzero(relative < cut)) if cut else int(np.count_nonzero(signal <= 0))
    negative = int(np.count_nonzero(signal < 0))
    if not dropped:
        return ()
    below = f" ({negative} of them below the background)" if negative else ""
    return (
        f"{dropped} of {relative.size} rows lie under {100 * cut:.3g} % of the peak{below} "
        "and count as zero.",
    )


def _limit_note(limits: tuple[CutLimit, ...]) -> str:
    first, *others = (
        f"at {100 * one.cut:.3g} % of the peak: limit {1e15 * one.fwhm:.3g} fs" for one in limits
    )
    return "; ".join((f"Noise cut {first}", *others)) + "."
