"""Pulse shapes: the field over time and its spectrum, in units of the intensity FWHM.

x = t / FWHM, u = (omega - centre) FWHM, field(0) = 1 and spectrum(u) = int field(x) exp(i u x) dx, all real
and even.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property, lru_cache, partial
from math import gamma

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.pulse.sampled import SampledTransform, sampled_transform

__all__ = [
    "FINITE_FWHM",
    "SHAPES",
    "Shape",
    "finite_field",
    "finite_spectrum",
    "gaussian_field",
    "gaussian_spectrum",
    "lorentzian_field",
    "lorentzian_spectrum",
    "sech2_field",
    "sech2_spectrum",
    "shape_named",
    "supergaussian_field",
    "supergaussian_spectrum",
]

Real = NDArray[np.float64]

LN2 = float(np.log(2))

SECH_RATE = float(2 * np.arccosh(np.sqrt(2)))
"""FWHM over T0 of sech^2(t/T0)."""

LORENTZIAN_SCALE = float(0.5 / np.sqrt(np.sqrt(2) - 1))
"""t0 over FWHM of the power 1/(1 + (t/t0)^2)^2."""

FINITE_FWHM = float(np.sqrt(LN2 / (8 + LN2)))
"""Intensity FWHM of exp(-1/(x(1-x))) over its support, 0.28237: the root of exp(8 - 2/(x(1-x))) = 1/2."""

LARGEST_ORDER = 32
"""Highest order of a supergaussian: its edge then rises within a hundredth of the FWHM."""

NOISE = 1e-16
"""Spectra computed by FFT end where they stay below this share of their peak, the rounding of doubles."""


def gaussian_field(x: Real) -> Real:
    """exp(-2 ln2 x^2)."""
    return np.asarray(np.exp(-2 * LN2 * np.square(x)))


def gaussian_spectrum(u: Real) -> Real:
    """sqrt(pi / (2 ln2)) exp(-u^2 / (8 ln2))."""
    return np.asarray(np.sqrt(np.pi / (2 * LN2)) * np.exp(-np.square(u) / (8 * LN2)))


def _sech(y: Real) -> Real:
    """1/cosh without overflow."""
    decay = np.exp(-np.abs(y))
    return np.asarray(2 * decay / (1 + decay * decay))


def sech2_field(x: Real) -> Real:
    """sech(x SECH_RATE): the power is sech^2."""
    return _sech(SECH_RATE * np.asarray(x))


def sech2_spectrum(u: Real) -> Real:
    """(pi / w) sech(pi u / (2 w)), w = SECH_RATE."""
    return (np.pi / SECH_RATE) * _sech(np.pi / (2 * SECH_RATE) * np.asarray(u))


def lorentzian_field(x: Real) -> Real:
    """1/(1 + (x/x0)^2): the field, not the power, is a Lorentzian."""
    return np.asarray(1 / (1 + np.square(np.asarray(x) / LORENTZIAN_SCALE)))


def lorentzian_spectrum(u: Real) -> Real:
    """pi x0 exp(-x0 |u|), x0 = LORENTZIAN_SCALE."""
    return np.asarray(np.pi * LORENTZIAN_SCALE * np.exp(-LORENTZIAN_SCALE * np.abs(u)))


def supergaussian_field(x: Real, order: int = 2) -> Real:
    """exp(-(ln2 / 2) (2 x)^(2 order)); order 1 is the Gaussian."""
    with np.errstate(over="ignore"):
        return np.asarray(np.exp(-0.5 * LN2 * np.square(2 * np.asarray(x)) ** order))


def supergaussian_spectrum(u: Real, order: int = 2) -> Real:
    """Transform of `supergaussian_field`, to 5e-15 of its peak."""
    return np.asarray(_supergaussian_transform(order)(np.asarray(u, dtype=float)).real)


def finite_field(x: Real) -> Real:
    """exp(4 - 1/(y(1 - y))), y = 1/2 + FINITE_FWHM x.

    Exactly zero for y outside 0 to 1, and smooth everywhere.
    """
    y = 0.5 + FINITE_FWHM * np.asarray(x, dtype=float)
    room = y * (1 - y)
    inside = room > 0
    return np.where(inside, np.exp(4 - 1 / np.where(inside, room, 1.0)), 0.0)


def finite_spectrum(u: Real) -> Real:
    """Transform of `finite_field`, to 5e-15 of its peak."""
    return np.asarray(_finite_transform()(np.asarray(u, dtype=float)).real)


@lru_cache(maxsize=16)
def _supergaussian_transform(order: int) -> SampledTransform:
    end = 0.5 * (100.0 / LN2) ** (0.5 / order)
    return _transform_of(partial(supergaussian_field, order=order), end)


@lru_cache(maxsize=1)
def _finite_transform() -> SampledTransform:
    return _transform_of(finite_field, 0.5 / FINITE_FWHM)


def _transform_of(field: Callable[[Real], Real], end: float) -> SampledTransform:
    """Trapezoid transform of a smooth even field that vanishes at |x| = end.

    8192 samples leave no aliasing.
    """
    x, step = np.linspace(-end, end, 8193, retstep=True)
    full = sampled_transform(field(x), -end, float(step))
    size = np.abs(full.values)
    keep = int(np.max(np.abs(np.flatnonzero(size > NOISE * size.max()) - size.size // 2))) + 1
    middle = size.size // 2
    # Zeros on both sides, so that the interpolation never reaches round to the other end.
    values = np.zeros(2 * (keep + 32), dtype=complex)
    values[32 : 32 + 2 * keep] = full.values[middle - keep : middle + keep].real
    return SampledTransform(values=values, spacing=full.spacing, middle=0.0)


@dataclass(frozen=True, kw_only=True)
class Shape:
    """A shape as its two functions and what follows from them.

    energy: int field(x)^2 dx. spectral_end: |u| beyond which the spectrum is below 1e-20 of its peak, or
    ends. changes_sign: the spectrum is negative somewhere, so that flat phase makes a shorter pulse of it.
    """

    name: str
    field: Callable[[Real], Real]
    spectrum: Callable[[Real], Real]
    energy: float
    spectral_end: float
    changes_sign: bool = False

    @cached_property
    def time_bandwidth(self) -> float:
        """Intensity FWHM times the FWHM of the spectrum per ordinary frequency, dimensionless."""
        u = np.linspace(0, self.spectral_end, 4001)
        power = self.spectrum(u) ** 2
        half = power[0] / 2
        last = int(np.flatnonzero(power >= half)[-1])
        low, high = u[last], u[last + 1]
        for _ in range(60):
            middle = 0.5 * (low + high)
            above = float(self.spectrum(np.array([middle]))[0]) ** 2 >= half
            low, high = (middle, high) if above else (low, middle)
        return float(low / np.pi)

    def spectral_reach(self, share: float) -> float:
        """|u| outside of which less than `share` of the energy lies, both sides together."""
        return _reach(self._spectral_tail, share)

    def field_reach(self, share: float) -> float:
        """|x| outside of which less than `share` of the energy lies, both sides together."""
        return _reach(self._field_tail, share)

    @cached_property
    def _spectral_tail(self) -> tuple[Real, Real]:
        u = np.linspace(0, self.spectral_end, 20001)
        return u, _tail(u, self.spectrum(u) ** 2)

    @cached_property
    def _field_tail(self) -> tuple[Real, Real]:
        x = np.concatenate(([0.0], np.geomspace(1e-3, 1e12, 20000)))
        return x, _tail(x, self.field(x) ** 2)


def _tail(axis: Real, power: Real) -> Real:
    """Share of the energy beyond each point, from the small end so that tiny shares keep their digits."""
    pieces = 0.5 * (power[1:] + power[:-1]) * np.diff(axis)
    beyond = np.concatenate((np.cumsum(pieces[::-1])[::-1], [0.0]))
    return np.asarray(beyond / beyond[0])


def _reach(tail: tuple[Real, Real], share: float) -> float:
    axis, beyond = tail
    return float(axis[int(np.argmax(beyond <= share))])


def _supergaussian(order: int) -> Shape:
    if order != int(order) or not 1 <= order <= LARGEST_ORDER:
        raise InputError(
            "the order of a supergaussian must be a whole number",
            value=order,
            allowed=f"1 to {LARGEST_ORDER}",
            remedy="Between whole orders the field is not smooth and its spectrum falls too slowly",
        )
    transform = _supergaussian_transform(int(order))
    return Shape(
        name="supergaussian" if order == 2 else f"supergaussian of order {int(order)}",
        field=partial(supergaussian_field, order=int(order)),
        spectrum=partial(supergaussian_spectrum, order=int(order)),
        energy=gamma(1 + 0.5 / order) / LN2 ** (0.5 / order),
        spectral_end=transform.nyquist,
        changes_sign=order > 1,
    )


def _finite() -> Shape:
    x, step = np.linspace(-0.5, 0.5, 8193, retstep=True)
    return Shape(
        name="finite",
        field=finite_field,
        spectrum=finite_spectrum,
        energy=float(np.sum(finite_field(x / FINITE_FWHM) ** 2) * step / FINITE_FWHM),
        spectral_end=_finite_transform().nyquist,
        changes_sign=True,
    )


def _gaussian() -> Shape:
    return Shape(
        name="gaussian",
        field=gaussian_field,
        spectrum=gaussian_spectrum,
        energy=float(np.sqrt(np.pi / (4 * LN2))),
        spectral_end=float(np.sqrt(8 * LN2 * 46.1)),
    )


def _sech2() -> Shape:
    return Shape(
        name="sech2",
        field=sech2_field,
        spectrum=sech2_spectrum,
        energy=2 / SECH_RATE,
        spectral_end=46.8 * 2 * SECH_RATE / np.pi,
    )


def _lorentzian() -> Shape:
    return Shape(
        name="lorentzian",
        field=lorentzian_field,
        spectrum=lorentzian_spectrum,
        energy=LORENTZIAN_SCALE * np.pi / 2,
        spectral_end=46.1 / LORENTZIAN_SCALE,
    )


_BUILDERS: dict[str, Callable[[], Shape]] = {
    "gaussian": _gaussian,
    "sech2": _sech2,
    "lorentzian": _lorentzian,
    "finite": _finite,
}

SHAPES = ("gaussian", "sech2", "lorentzian", "supergaussian", "finite")
"""Names that `shape_named` knows."""


@lru_cache(maxsize=32)
def shape_named(name: str, order: int | None = None) -> Shape:
    """The shape of that name; order (default 2) belongs to the supergaussian alone. Raises InputError."""
    if name == "supergaussian":
        return _supergaussian(2 if order is None else order)
    if name not in _BUILDERS:
        raise InputError("no pulse shape has this name", value=name, allowed=", ".join(SHAPES))
    if order is not None:
        raise InputError(
            f"a {name} pulse has no order", value=order, remedy='Leave it out, or take "supergaussian"'
        )
    return _BUILDERS[name]()
