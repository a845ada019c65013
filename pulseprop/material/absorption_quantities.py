"""What instruments and tables call absorption, turned into the absorption index k = alpha c / (2 omega).

    absorbance              A = log10(1/T)          alpha = ln(10) A / length
    napierian               B = ln(1/T)             alpha = B / length
    alpha                   1/m, Napierian
    k                       the absorption index itself
    molar                   epsilon, m^2/mol, decadic   alpha = ln(10) epsilon concentration (mol/m^3)
    internal_transmittance  a = exp(-alpha length)
    transmittance           of a plate through both faces: T = (1 - R)^2 a / (1 - R^2 a^2), R of the index

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

    omega, values and the result: (R,), omega above 0, transmittances above 0. path_length in m, concentration
    in mol/m^3, both above 0 where the quantity needs them. Values too large for a double give k = inf.

    Raises InputError for an unknown quantity or a missing length or concentration.
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
    """Rows that are lower limits only: above the ceiling, for transmittances below 10^-ceiling.

    values: (R,), as `quantity` says. ceiling: an absorbance for transmittances, else in the values' own unit;
    None where there is none. True, (R,), where a row is to be left out.
    """
    if ceiling is None:
        return np.zeros(values.shape, dtype=bool)
    return np.asarray(values < 10.0**-ceiling if quantity in TRANSMITTANCES else values > ceiling)


def face_reflectance(index: Complex) -> Real:
    """R = |(n - 1)/(n + 1)|^2 at normal incidence from vacuum (A. J. Fresnel); index n + i k, shape kept."""
    return np.asarray(np.abs((index - 1) / (index + 1)) ** 2)


def internal_transmittance(transmittance: Real, reflectance: Real) -> Real:
    """a from T = (1 - R)^2 a / (1 - R^2 a^2): a = 2 T / (b + sqrt(b^2 + 4 T^2 R^2)), b = (1 - R)^2.

    T above 0, R from 0 to below 1, same shape. More than a lossless plate lets through gives a above 1.
    """
    once = (1 - reflectance) ** 2
    return np.asarray(2 * transmittance / (once + np.sqrt(once**2 + 4 * (transmittance * reflectance) ** 2)))
