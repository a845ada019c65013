"""Wavelengths that were stated in air."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium

__all__ = ["omega_of_air_wavelength", "omegas_of_air_wavelengths"]

ROUNDS = 4
"""Each round leaves less than 1e-4 of the error, as the index of air hardly changes with frequency."""


def omega_of_air_wavelength(omega: float) -> float:
    """Frequency (rad/s) of light whose wavelength in standard air is 2 pi c / omega (P. E. Ciddor, 1996).

    Raises InputError outside the range of the air formula.
    """
    return float(omegas_of_air_wavelengths(np.array([omega]))[0])


def omegas_of_air_wavelengths(omega: NDArray[np.float64]) -> NDArray[np.float64]:
    """The same for many, shape kept; raises likewise."""
    air = catalogue_medium("air")
    outside = ~air.band.contains(omega)
    if outside.any():
        raise InputError(
            "a wavelength in air outside the range of the air formula",
            value=f"{TWO_PI_C / omega[outside][0] * 1e9:.6g} nm",
            allowed="230 nm to 1690 nm",
            remedy='State vacuum wavelengths (wavelength_in = "vacuum")',
        )
    true = omega
    for _ in range(ROUNDS):
        true = omega / np.real(air.index(true))
    return true
