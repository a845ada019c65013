"""Constants of nature, SI.

Exact by the definition of the units (2019) but for the mass of the electron and the permittivity of the
vacuum, which are CODATA 2022.
"""

from __future__ import annotations

import math

__all__ = [
    "ELECTRON_CHARGE",
    "ELECTRON_MASS",
    "FEMTO",
    "GAS_CONSTANT",
    "PLANCK",
    "SPEED_OF_LIGHT",
    "TWO_PI_C",
    "VACUUM_PERMITTIVITY",
]

SPEED_OF_LIGHT = 299792458.0
"""m/s."""
TWO_PI_C = 2 * math.pi * SPEED_OF_LIGHT
"""Angular frequency times vacuum wavelength, m rad/s."""
PLANCK = 6.62607015e-34
"""J s."""
ELECTRON_CHARGE = 1.602176634e-19
"""C."""
GAS_CONSTANT = 8.31446261815324
"""J/(mol K)."""
ELECTRON_MASS = 9.1093837139e-31
"""kg."""
FEMTO = 1e15
"""Femtoseconds in a second."""
VACUUM_PERMITTIVITY = 8.8541878188e-12
"""F/m."""
