"""What kinds of quantity there are, and which dimensions may stand for each.

A place on the spectrum may be said as a vacuum wavelength, an ordinary frequency, a wavenumber, a photon
energy or an angular frequency; all become rad/s. A width of a line or a spectrum becomes an ordinary
frequency in Hz. A bare 1/s is neither ordinary nor angular and is refused for both.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from pulseprop.constants import PLANCK, SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.errors import InputError

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Values = float | NDArray[np.float64]
    Conversion = Callable[[Values], Values]

__all__ = ["KINDS", "Form", "Kind", "kind_named"]


ENERGY, POWER = "kg m^2 s^-2", "kg m^2 s^-3"


@dataclass(frozen=True)
class Form:
    """How a kind may be given: `inward` turns the SI value of the unit into the value kept, `outward`
    turns it back."""

    inward: Conversion
    outward: Conversion


def scaled(factor: float) -> Form:
    """value kept = factor * SI value of the unit."""
    return Form(lambda value: value * factor, lambda value: value / factor)


def inverse(numerator: float) -> Form:
    """value kept = numerator / SI value of the unit."""
    return Form(lambda value: numerator / value, lambda value: numerator / value)


SAME = Form(lambda value: value, lambda value: value)

FREQUENCY_HINT = "Write Hz for an ordinary frequency or rad/s for an angular one"


@dataclass(frozen=True)
class Kind:
    """A kind of quantity: its words, the SI unit it is kept in, examples, and a `Form` for each dimension
    it may have."""

    words: str
    si: str
    examples: tuple[str, ...]
    forms: Mapping[str, Form]
    hints: Mapping[str, str] = field(default_factory=dict)

    @property
    def allowed(self) -> str:
        """What may be written, for a message."""
        return f"{self.words} such as " + " or ".join(f'"{example}"' for example in self.examples)


def plain(words: str, dimension: str, si: str, *examples: str) -> Kind:
    """A kind with one dimension, kept as its SI value."""
    return Kind(words, si, examples, {dimension: SAME})


SPECTRAL = {
    "m": inverse(TWO_PI_C),
    "Hz": scaled(2 * math.pi),
    "m^-1": scaled(TWO_PI_C),
    ENERGY: scaled(2 * math.pi / PLANCK),
    "rad s^-1": SAME,
}

WIDTHS = {
    "Hz": SAME,
    "m^-1": scaled(SPEED_OF_LIGHT),
    ENERGY: scaled(1 / PLANCK),
    "rad s^-1": scaled(1 / (2 * math.pi)),
}

BARE_RATE = {"s^-1": FREQUENCY_HINT}

KINDS: dict[str, Kind] = {
    "length": plain("a length", "m", "m", "3 mm", "1.5e-3 m"),
    "area": plain("an area", "m^2", "m^2", "0.006 um^2", "1 mm^2"),
    "time": plain("a time", "s", "s", "30 fs", "1.2 ps"),
    "spectral": Kind(
        "a wavelength, frequency, wavenumber or photon energy",
        "rad/s",
        ("800 nm", "375 THz", "12500 cm^-1", "1.55 eV", "2.35 rad/fs"),
        SPECTRAL,
        BARE_RATE,
    ),
    "angular_frequency": Kind(
        "a frequency, wavenumber or photon energy",
        "rad/s",
        ("9 rad/fs", "1400 THz", "6 eV"),
        {dimension: form for dimension, form in SPECTRAL.items() if dimension != "m"},
        BARE_RATE,
    ),
    "width": Kind(
        "a width in frequency, wavenumber or photon energy",
        "Hz",
        ("1 GHz", "0.03 cm^-1", "2 meV"),
        WIDTHS,
        BARE_RATE,
    ),
    "gdd": plain("a group delay dispersion", "s^2", "s^2", "-40 fs^2", "0.01 ps^2"),
    "tod": plain("a third-order dispersion", "s^3", "s^3", "120 fs^3"),
    "fod": plain("a fourth-order dispersion", "s^4", "s^4", "-30 fs^4"),
    "gvd": plain("a group velocity dispersion", "m^-1 s^2", "s^2/m", "36 fs^2/mm", "-22 ps^2/km"),
    "tod_per_length": plain("a third-order dispersion per length", "m^-1 s^3", "s^3/m", "90 fs^3/mm"),
    "fod_per_length": plain("a fourth-order dispersion per length", "m^-1 s^4", "s^4/m", "-11 fs^4/mm"),
    "dispersion": plain("a fibre dispersion parameter", "m^-2 s", "s/m^2", "17 ps/(nm km)"),
    "dispersion_slope": plain("a fibre dispersion slope", "m^-3 s", "s/m^3", "0.06 ps/(nm^2 km)"),
    "energy": plain("an energy", ENERGY, "J", "2 uJ", "1 mJ"),
    "power": plain("a power", POWER, "W", "1 GW", "50 kW"),
    "repetition_rate": Kind("a repetition rate", "Hz", ("1 kHz", "80 MHz"), {"Hz": SAME}, BARE_RATE),
    "angle": plain("an angle", "rad", "rad", "56 deg", "2 mrad"),
    "phase": plain("a phase", "rad", "rad", "1.57 rad", "90 deg"),
    "temperature": plain("a temperature", "K", "K", "22 degC", "293 K"),
    "pressure": plain("a pressure", "kg m^-1 s^-2", "Pa", "0.4 bar", "1013 hPa", "1 atm"),
    "mass_density": plain("a density", "kg m^-3", "kg/m^3", "2.2 g/cm^3", "2200 kg/m^3"),
    "number_density": plain("a number density", "m^-3", "m^-3", "2.5e19 cm^-3"),
    "inverse_length": plain("an inverse length", "m^-1", "1/m", "12 cm^-1", "0.3 mm^-1", "0.2 dB/km"),
    "groove_density": plain("a number of grooves per length", "m^-1", "1/m", "600 /mm", "1200 mm^-1"),
    "inverse_area": plain("an inverse area", "m^-2", "m^-2", "57.362 um^-2"),
    "fraction": plain("a share", "", "1", "0.5 %", "120 ppm"),
    "nonlinear_index": plain("a nonlinear index", "kg^-1 s^3", "m^2/W", "2.6e-20 m^2/W", "2.6e-16 cm^2/W"),
    "two_photon": plain("a two-photon absorption coefficient", "kg^-1 m^-1 s^3", "m/W", "0.5 cm/GW"),
    "integrated_absorption": Kind(
        "an absorption integrated over frequency or wavenumber",
        "Hz/m",
        ("25 GHz/cm", "0.8 cm^-2"),
        {"Hz m^-1": SAME, "m^-2": scaled(SPEED_OF_LIGHT)},
        {"m^-1 s^-1": FREQUENCY_HINT},
    ),
    "concentration": plain("a concentration", "m^-3 mol", "mol/m^3", "200 umol/L", "1 mmol/L"),
    "molar_absorption": plain(
        "a decadic molar absorption coefficient", "m^2 mol^-1", "m^2/mol", "85000 L/(mol cm)"
    ),
    "fluence": plain("a fluence", "kg s^-2", "J/m^2", "0.5 J/cm^2"),
    "intensity": plain("an intensity", "kg s^-3", "W/m^2", "1e13 W/cm^2"),
    "memory": plain("an amount of memory", "byte", "bytes", "4 GiB", "800 MB"),
}
"""Every kind by its name. Inverse lengths are Napierian; decibels are converted."""


def kind_named(name: str) -> Kind:
    """The kind of that name."""
    return KINDS[name]


NAMED = {
    "": "a plain number",
    "Hz": "a frequency",
    "rad s^-1": "an angular frequency",
    "s^-1": "a bare rate, neither ordinary nor angular",
}


def named_dimension(dimension: str) -> str:
    """What a dimension is, in words where there is a kind for it."""
    for kind in KINDS.values():
        if dimension in kind.forms and len(kind.forms) == 1 and dimension not in NAMED:
            return kind.words
    return NAMED.get(dimension, f"dimension {dimension}")


def form_of(kind: Kind, dimension: str, value: object) -> Form:
    """How to convert; raises InputError where the dimension is not one of the kind."""
    form = kind.forms.get(dimension)
    if form is None:
        raise InputError(
            f"expected {kind.words}, but the unit is that of {named_dimension(dimension)}",
            value=value,
            allowed=kind.allowed,
            remedy=kind.hints.get(dimension, ""),
        )
    return form
