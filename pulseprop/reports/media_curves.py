"""The numbers behind the figures of media: index, GVD, and susceptibility, denser where lines stand."""

from __future__ import annotations

from collections.abc import Iterable
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.material.medium import Medium, Resonance
from pulseprop.material.response import View
from pulseprop.numerics.series import product, variable

__all__ = ["ChiCurve", "IndexCurve", "chi_curves", "index_curves", "strongest_line"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

LINE_PLACES = np.sinh(np.linspace(-4.0, 4.0, 81)) / 4
"""Where a line is looked at, in its widths: out to seven of them, closest in the middle."""

MOST_LINES = 20
"""Lines of one medium that are resolved; of a long list the others are seen at the even places."""


MOST_LOOKED_AT = 200
"""Lines of one medium among which the strongest is sought."""


class IndexCurve(NamedTuple):
    """n - 1 and k of a medium over vacuum wavelength in nm, and its GVD in fs^2/mm; all (K,)."""

    name: str
    wavelength_nm: Real
    excess: Real
    k: Real
    gvd: Real


def index_curves(
    media: Iterable[Medium], low_nm: float, high_nm: float, points: int = 161
) -> list[IndexCurve]:
    """Curves of media between two vacuum wavelengths, cut to the range where the data behind each hold."""
    curves = [_index_curve(medium, low_nm, high_nm, points) for medium in media]
    return [curve for curve in curves if curve.wavelength_nm.size]


def _index_curve(medium: Medium, low_nm: float, high_nm: float, points: int) -> IndexCurve:
    omega = _places(medium, *_reach(medium, low_nm, high_nm), points)
    excess = medium.refraction(omega)[0] if omega.size else np.empty(0, dtype=complex)
    return IndexCurve(medium.name, TWO_PI_C / omega * 1e9, excess.real, excess.imag, _gvd(medium, omega))


def _gvd(medium: Medium, omega: Real) -> Real:
    """The second derivative of omega n / c in fs^2/mm, all places at once."""
    if not omega.size:
        return omega
    series = product(variable(omega, 3), medium.refraction(omega, 3, View.PRINTED))
    return np.asarray(2e27 * series[2].real / SPEED_OF_LIGHT)


class ChiCurve(NamedTuple):
    """Susceptibility of a medium, complex, over frequency in THz, ascending; both (K,)."""

    name: str
    frequency: Real
    chi: Complex


def chi_curves(media: Iterable[Medium], low_nm: float, high_nm: float, points: int = 161) -> list[ChiCurve]:
    """chi of media between two vacuum wavelengths, cut to the range where the data behind each hold."""
    curves = [_chi_curve(medium, *_reach(medium, low_nm, high_nm), points) for medium in media]
    return [curve for curve in curves if curve.frequency.size]


def strongest_line(media: Iterable[Medium], low_nm: float, high_nm: float) -> ChiCurve | None:
    """chi about the line that absorbs most between two wavelengths, out to seven of its widths, or None."""
    found: list[tuple[float, Medium, Resonance]] = []
    for medium in media:
        low, high = _reach(medium, low_nm, high_nm)
        for line in medium.resonances[:MOST_LOOKED_AT]:
            if low < line.centre < high:
                found.append((float(medium.susceptibility(np.array(line.centre)).imag), medium, line))
    if not found:
        return None
    _, medium, line = max(found, key=lambda entry: entry[0])
    omega = np.unique(line.centre + line.width * LINE_PLACES)
    return ChiCurve(medium.name, omega * 1e-12 / (2 * np.pi), medium.susceptibility(omega))


def _chi_curve(medium: Medium, low: float, high: float, points: int) -> ChiCurve:
    omega = _places(medium, low, high, points)[::-1]
    chi = medium.susceptibility(omega) if omega.size else np.empty(0, dtype=complex)
    return ChiCurve(medium.name, omega * 1e-12 / (2 * np.pi), chi)


def _reach(medium: Medium, low_nm: float, high_nm: float) -> tuple[float, float]:
    """Angular frequencies between two wavelengths where the data behind a medium hold."""
    high, low = (TWO_PI_C / (edge * 1e-9) for edge in (low_nm, high_nm))
    return max(low, medium.band.low), min(high, medium.band.high)


def _places(medium: Medium, low: float, high: float, points: int) -> Real:
    """Angular frequencies from high to low, evenly in their logarithm, denser where lines stand."""
    if not low < high:
        return np.empty(0)
    places = [np.geomspace(low, high, points)]
    narrow = sorted(medium.resonances, key=lambda line: line.width)[:MOST_LINES]
    places += [line.centre + line.width * LINE_PLACES for line in narrow]
    omega = np.unique(np.concatenate(places))[::-1]
    return omega[(omega >= low) & (omega <= high)]
