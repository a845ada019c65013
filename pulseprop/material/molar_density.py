"""Density of a gas from pressure, temperature and, where published, the second virial coefficient."""

from __future__ import annotations

import numpy as np

from pulseprop.constants import GAS_CONSTANT

__all__ = ["molar_density"]


def molar_density(pressure: float, temperature: float, virial: float = 0.0) -> float:
    """mol/m^3 from p = rho R T (1 + B rho); pressure in Pa (>= 0), temperature in K (> 0), B in m^3/mol.

    The root that goes to the ideal gas at low pressure; where B is so negative that there is none (the gas
    would have condensed) the result is not finite.
    """
    ideal = pressure / (GAS_CONSTANT * temperature)
    discriminant = 1 + 4 * virial * ideal
    if discriminant < 0:
        return float("nan")
    return float(2 * ideal / (1 + np.sqrt(discriminant)))
