"""From a spectral width to the duration at the transform limit."""

from __future__ import annotations

import math

from pulseprop.constants import PLANCK, SPEED_OF_LIGHT
from pulseprop.errors import InputError
from pulseprop.pulse.shapes import Shape

__all__ = ["BANDWIDTH_KINDS", "duration_from_bandwidth", "frequency_width"]


BANDWIDTH_KINDS = ("frequency", "wavelength", "wavenumber", "photon_energy")
"""What a bandwidth may be a width of; in Hz, m, 1/m and J."""


def frequency_width(width: float, kind: str, centre: float) -> float:
    """FWHM per ordinary frequency in Hz of a spectrum symmetric about `centre` (angular, rad/s).

    width: between the half-maximum points of the spectrum per frequency, in the unit of `kind`. In vacuum
    wavelength the two points c/(f - D/2) and c/(f + D/2) lie `width` apart, a quadratic in D solved exactly.
    Raises InputError for an unknown kind or a width that is not positive.
    """
    if not (math.isfinite(width) and width > 0):
        raise InputError("a bandwidth must be positive", value=width, allowed="above 0")
    if kind == "wavelength":
        frequency = centre / (2 * math.pi)
        reach = width * frequency
        return 2 * reach * frequency / (SPEED_OF_LIGHT + math.hypot(SPEED_OF_LIGHT, reach))
    factors = {"frequency": 1.0, "wavenumber": SPEED_OF_LIGHT, "photon_energy": 1 / PLANCK}
    if kind not in factors:
        raise InputError(
            "a bandwidth is a width of something else", value=kind, allowed=", ".join(BANDWIDTH_KINDS)
        )
    return width * factors[kind]


def duration_from_bandwidth(shape: Shape, centre: float, width: float, kind: str) -> float:
    """Intensity FWHM in s at the transform limit of a pulse of this shape, centre (rad/s) and bandwidth."""
    return shape.time_bandwidth / frequency_width(width, kind, centre)
