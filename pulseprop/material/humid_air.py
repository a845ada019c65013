"""Moist air: P. E. Ciddor, Appl. Opt. 35, 1566-1573 (1996).

    n - 1 = (rho_a/rho_axs)(n_axs - 1) + (rho_v/rho_ws)(n_ws - 1),

dry air (a) against standard dry air (axs: 15 degC, 101325 Pa), water vapour (v) against standard vapour (ws:
20 degC, 1333 Pa); densities after R. S. Davis, Metrologia 29, 67 (1992). The two resonances of dry air are
those of the catalogue's "air"; the other coefficients are from memory, and the tests hold them to printed
values.
"""

from __future__ import annotations

import math

from pulseprop.constants import GAS_CONSTANT
from pulseprop.errors import InputError
from pulseprop.material.formulas import MICROMETRE_OMEGA, Formula, Power, gas_term
from pulseprop.material.response import Band

__all__ = ["humid_air_response", "vapour_fraction"]

RANGE_UM = (0.3, 1.69)
CELSIUS = (-40.0, 100.0)
LARGEST_PRESSURE = 140e3
ZERO_CELSIUS = 273.15

DRY_TERMS = ((0.05792105, 238.0185), (0.00167917, 57.362))
"""Strength and resonance, um^-2, of n - 1 at 15 degC, 101325 Pa, 450 ppm of carbon dioxide."""
VAPOUR_POWERS = (295.235, 2.6422, -0.032380, 0.004028)
"""1e8 (n - 1)/1.022 in powers of the squared wave number, um^-2, at 20 degC and 1333 Pa."""
STANDARD_AIR = (101325.0, 288.15)
STANDARD_VAPOUR = (1333.0, 293.15)


def humid_air_response(
    pressure: float, temperature: float, humidity: float, carbon_dioxide_ppm: float = 450.0
) -> Formula:
    """Moist air at pressure (Pa), temperature (K) and relative humidity (0 to 1), 0.3 to 1.69 um.

    Raises InputError outside -40 to 100 degC, 0 to 140 kPa and 0 to 1.
    """
    _check_state(pressure, temperature, humidity)
    fraction = vapour_fraction(pressure, temperature, humidity)
    return _mixture(pressure, temperature, fraction, carbon_dioxide_ppm)


def vapour_fraction(pressure: float, temperature: float, humidity: float) -> float:
    """Molar fraction of water vapour at pressure (Pa), temperature (K), humidity (0 to 1, over water).

    Raises InputError where the vapour pressure would exceed the pressure.
    """
    if pressure == 0 or humidity == 0:
        return 0.0
    saturation = math.exp(
        1.2378847e-5 * temperature**2 - 1.9121316e-2 * temperature + 33.93711047 - 6.3431645e3 / temperature
    )
    enhancement = 1.00062 + 3.14e-8 * pressure + 5.6e-7 * (temperature - ZERO_CELSIUS) ** 2
    fraction = humidity * enhancement * saturation / pressure
    if fraction > 1:
        raise InputError(
            "air cannot hold this much water vapour at its pressure",
            value=f"{100 * humidity:.4g} % of {saturation:.4g} Pa at {pressure:.4g} Pa",
            allowed="a vapour pressure below the total pressure",
        )
    return fraction


def _mixture(pressure: float, temperature: float, fraction: float, carbon_dioxide_ppm: float) -> Formula:
    density = _density(pressure, temperature, fraction)
    dry = (
        (1 - fraction) * density / _density(*STANDARD_AIR, 0.0) * (1 + 0.534e-6 * (carbon_dioxide_ppm - 450))
    )
    vapour = 1.022e-8 * fraction * density / _density(*STANDARD_VAPOUR, 1.0)
    constant, *rising = VAPOUR_POWERS
    return Formula(
        band=Band(MICROMETRE_OMEGA / RANGE_UM[1], MICROMETRE_OMEGA / RANGE_UM[0]),
        of="refraction",
        offset=vapour * constant,
        poles=tuple(gas_term(dry * strength, resonance) for strength, resonance in DRY_TERMS),
        powers=tuple(Power(vapour * w, exponent) for exponent, w in enumerate(rising, start=1))
        if vapour
        else (),
    )


def _density(pressure: float, temperature: float, fraction: float) -> float:
    """mol/m^3 of moist air; ratios of densities need no molar masses, for they cancel."""
    return pressure / (_compressibility(pressure, temperature, fraction) * GAS_CONSTANT * temperature)


def _compressibility(pressure: float, temperature: float, fraction: float) -> float:
    celsius = temperature - ZERO_CELSIUS
    ratio = pressure / temperature
    first = (
        1.58123e-6
        - 2.9331e-8 * celsius
        + 1.1043e-10 * celsius**2
        + (5.707e-6 - 2.051e-8 * celsius) * fraction
        + (1.9898e-4 - 2.376e-6 * celsius) * fraction**2
    )
    return 1 - ratio * first + ratio**2 * (1.83e-11 - 0.765e-8 * fraction**2)


def _check_state(pressure: float, temperature: float, humidity: float) -> None:
    if not 0 <= pressure <= LARGEST_PRESSURE:
        raise InputError(
            "humid air: pressure out of range", value=f"{pressure:.6g} Pa", allowed="0 to 140 kPa"
        )
    if not CELSIUS[0] <= round(temperature - ZERO_CELSIUS, 9) <= CELSIUS[1]:
        raise InputError(
            "humid air: temperature out of range", value=f"{temperature:.6g} K", allowed="233.15 to 373.15 K"
        )
    if not 0 <= humidity <= 1:
        raise InputError("humid air: humidity out of range", value=humidity, allowed="0 to 1 (0 % to 100 %)")
