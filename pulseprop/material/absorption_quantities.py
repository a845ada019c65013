"""What instruments and tables call absorption, turned into the absorption index k = alpha c / (2 omega).

    absorbance             log10(1/T)            alpha = ln(10) A / length napierian              ln(1/T)
    alpha = B / length alpha                  1/m, Napierian k                      k molar
    m^2/mol, decadic      alpha = ln(10) epsilon concentration (mol/m^3) internal_transmittance a = exp(-alpha
    length) transmittance          of a plate through both faces, T = (1 - R)^2 a / (1 - R^2 a^2), with R of
    the index itself

Names after ISO 80000-7:2019, items 7-30 to 7-36 (numbers from memory); the plate is the incoherent sum of all
echoes.
"""

from __future__ import annotations

from typing import Literal, get_args

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.errors import InputError

__all__ = ["Quantity", "absorption_index", "beyond_ceiling", "face_reflectance", "internal_transmittance"]

Real = NDArray[np.float64]
Complex = NDArray[np.complex128]


Quantity = Literal[
    "absorbance", "napierian", "alpha", "k", "molar", "internal_transmittance", "transmittance"
]

NEEDS_LENGTH = ("absorbance", "napierian", "internal_transmittance", "transmittance")
TRANSMITTANCES = ("internal_transmittance", "transmittance")


def absorption_index(
    omega: Real,
    values: Real,
    quantity: Quantity,
    *,
    path_length: float | None = None,
    concentration: float | None = None,
) -> Real:
    """k at omega (rad/s) from the measured values, SI; "transmittance" must have lost its faces before.

    path_length in m, concentration in mol/m^3. Raises InputError for an unknown quantity or a missing length
    or concentration.
    """
    if quantity not in get_args(Quantity):
        raise InputError("unknown kind of absorption", value=quantity, allowed=", ".join(get_args(Quantity)))
    if quantity == "k":
        return values
    with np.errstate(over="ignore"):
        alpha = _alpha(values, quantity, path_length, concentration)
        return np.asarray(alpha * SPEED_OF_LIGHT / (2 * omega))


def _alpha(values: Real, quantity: Quantity, path_length: float | None, concentration: float | None) -> Real:
    if quantity == "alpha":
        return values
    if quantity == "molar":
        return np.asarray(np.log(10) * values * _positive(concentration, "concentration", quantity))
    length = _positive(path_length, "path_length", quantity)
    if quantity in TRANSMITTANCES:
        return np.asarray(-np.log(values) / length)
    return np.asarray((np.log(10) if quantity == "absorbance" else 1.0) * values / length)


def _positive(value: float | None, name: str, quantity: str) -> float:
    if value is None or not value > 0:
        raise InputError(f"{quantity} needs a {name}", value=value, allowed=f"{name} above 0", place=name)
    return value


def beyond_ceiling(values: Real, quantity: Quantity, ceiling: float | None) -> NDArray[np.bool_]:
    """Rows that are lower limits only: above the ceiling, for transmittances below 10^-ceiling."""
    if ceiling is None:
        return np.zeros(values.shape, dtype=bool)
    return np.asarray(values < 10.0**-ceiling if quantity in TRANSMITTANCES else values > ceiling)


def face_reflectance(index: Complex) -> Real:
    """R = |(n - 1)/(n + 1)|^2 at normal incidence from vacuum (A. J. Fresnel)."""
    return np.asarray(np.abs((index - 1) / (index + 1)) ** 2)


def internal_transmittance(transmittance: Real, reflectance: Real) -> Real:
    """a from T = (1 - R)^2 a / (1 - R^2 a^2): a = 2 T / (b + sqrt(b^2 + 4 T^2 R^2)), b = (1 - R)^2."""
    once = (1 - reflectance) ** 2
    return np.asarray(2 * transmittance / (once + np.sqrt(once**2 + 4 * (transmittance * reflectance) ** 2)))
