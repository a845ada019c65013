"""The text of a unit to a factor and a dimension.

Common plain units answer from a table of our own, all others from a units library that is loaded when first
needed. The library is only ever handed text that our own strict grammar has taken apart: given raw text it
evaluates sums, and reads "1,5 mm" as 15 mm. It also takes Hz = 1/s = rad/s; here hertz and radian are
dimensions of their own, so that ordinary and angular frequency never mix.
"""

from __future__ import annotations

import re
from collections import Counter
from dataclasses import dataclass
from functools import cache, lru_cache
from typing import Any

from pulseprop.constants import ELECTRON_CHARGE
from pulseprop.errors import InputError

__all__ = ["PLAIN", "Unit", "resolved", "unit_from"]

TEN_DECIBELS = 2.302585092994046
"""ln 10: a loss of 10 dB is a factor of 10 in power."""


@dataclass(frozen=True)
class Unit:
    """value in SI = value * factor + offset. dimension: base symbols and powers, as "kg m^2 s^-2", sorted;
    "" for none."""

    factor: float
    dimension: str
    offset: float = 0.0


JOULE, WATT, PASCAL = "kg m^2 s^-2", "kg m^2 s^-3", "kg m^-1 s^-2"

PREFIXES = {
    "a": 1e-18, "f": 1e-15, "p": 1e-12, "n": 1e-9, "u": 1e-6, "m": 1e-3, "c": 1e-2, "": 1.0,
    "h": 1e2, "k": 1e3, "M": 1e6, "G": 1e9, "T": 1e12, "P": 1e15,
}  # fmt: skip

FAMILIES = (
    ("m", "m", "p n u m c k"),
    ("s", "s", "a f p n u m"),
    ("Hz", "Hz", "m k M G T P"),
    ("J", JOULE, "f p n u m k"),
    ("W", WATT, "n u m k M G T"),
    ("Pa", PASCAL, "h k M"),
    ("rad", "rad", "u m"),
)
"""SI symbol, dimension, usual prefixes."""

COMPOUND = {
    "fs^2": (1e-30, "s^2"),
    "fs^3": (1e-45, "s^3"),
    "fs^4": (1e-60, "s^4"),
    "ps^2": (1e-24, "s^2"),
    "ps^3": (1e-36, "s^3"),
    "fs^2/mm": (1e-27, "m^-1 s^2"),
    "fs^3/mm": (1e-42, "m^-1 s^3"),
    "fs^4/mm": (1e-57, "m^-1 s^4"),
    "ps^2/km": (1e-27, "m^-1 s^2"),
    "ps/(nm km)": (1e-6, "m^-2 s"),
    "rad/s": (1.0, "rad s^-1"),
    "rad/ps": (1e12, "rad s^-1"),
    "rad/fs": (1e15, "rad s^-1"),
    "m^-1": (1.0, "m^-1"),
    "cm^-1": (1e2, "m^-1"),
    "mm^-1": (1e3, "m^-1"),
    "um^-1": (1e6, "m^-1"),
    "1/m": (1.0, "m^-1"),
    "1/cm": (1e2, "m^-1"),
    "1/mm": (1e3, "m^-1"),
    "/mm": (1e3, "m^-1"),
    "um^2": (1e-12, "m^2"),
    "mm^2": (1e-6, "m^2"),
    "um^-2": (1e12, "m^-2"),
    "cm^-2": (1e4, "m^-2"),
    "cm^-3": (1e6, "m^-3"),
    "m^-3": (1.0, "m^-3"),
    "GHz/cm": (1e11, "Hz m^-1"),
    "THz/cm": (1e14, "Hz m^-1"),
    "m^2/W": (1.0, "kg^-1 s^3"),
    "cm^2/W": (1e-4, "kg^-1 s^3"),
    "cm/GW": (1e-11, "kg^-1 m^-1 s^3"),
    "J/cm^2": (1e4, "kg s^-2"),
    "mJ/cm^2": (10.0, "kg s^-2"),
    "W/cm^2": (1e4, "kg s^-3"),
    "eV": (ELECTRON_CHARGE, JOULE),
    "meV": (1e-3 * ELECTRON_CHARGE, JOULE),
    "bar": (1e5, PASCAL),
    "mbar": (1e2, PASCAL),
    "atm": (101325.0, PASCAL),
    "deg": (0.017453292519943295, "rad"),
    "K": (1.0, "K"),
    "mol/L": (1e3, "m^-3 mol"),
    "mmol/L": (1.0, "m^-3 mol"),
    "umol/L": (1e-3, "m^-3 mol"),
    "L/(mol cm)": (0.1, "m^2 mol^-1"),
    "B": (1.0, "byte"),
    "kB": (1e3, "byte"),
    "MB": (1e6, "byte"),
    "GB": (1e9, "byte"),
    "KiB": (1024.0, "byte"),
    "MiB": (1024.0**2, "byte"),
    "GiB": (1024.0**3, "byte"),
    "TiB": (1024.0**4, "byte"),
}

PLAIN: dict[str, Unit] = {
    prefix + symbol: Unit(PREFIXES[prefix], dimension)
    for symbol, dimension, prefixes in FAMILIES
    for prefix in ("", *prefixes.split())
} | {text: Unit(*entry) for text, entry in COMPOUND.items()}
"""Units that need no library. A test holds every one of them against the library."""

OURS: dict[str, Unit] = {
    "°": PLAIN["deg"],
    "degC": Unit(1.0, "K", 273.15),
    "°C": Unit(1.0, "K", 273.15),
    "%": Unit(1e-2, ""),
    "‰": Unit(1e-3, ""),
    "ppm": Unit(1e-6, ""),
    "ppb": Unit(1e-9, ""),
    "Torr": Unit(101325.0 / 760, PASCAL),
    "dB/m": Unit(TEN_DECIBELS / 10, "m^-1"),
    "dB/cm": Unit(TEN_DECIBELS * 10, "m^-1"),
    "dB/mm": Unit(TEN_DECIBELS * 100, "m^-1"),
    "dB/km": Unit(TEN_DECIBELS / 10000, "m^-1"),
}
"""What the library lacks or reads in another way: temperatures with an offset, and decibels as a
logarithm."""

SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", "0123456789-+")
RAISED = re.compile("[⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺]+")
FACTOR = r"[A-Za-zÅ]+(?:\^[+-]?[0-9]{1,2})?"
PRODUCT = rf"{FACTOR}(?:[ *]{FACTOR})*"
GROUP = rf"(?:{FACTOR}|\({PRODUCT}\))"
GRAMMAR = re.compile(rf"(?:{PRODUCT}|1)?(?:/{GROUP})*")


def unit_from(text: str) -> Unit:
    """The unit that a text such as "fs^2/mm", "ps/(nm km)", "µm" or "cm^-1" names.

    Raises InputError where the text is no unit, or one without a plain factor.
    """
    return _unit_from(_normal(text))


@lru_cache(maxsize=512)
def _unit_from(text: str) -> Unit:
    known = PLAIN.get(text) or OURS.get(text)
    if known is not None:
        return known
    if not text or text == "1" or not GRAMMAR.fullmatch(text):
        raise _no_unit(text)
    return resolved(text)


def _normal(text: str) -> str:
    """One spelling: micro as u, raised digits as ^n, one space or sign between factors."""
    text = (
        text.strip()
        .replace("µ", "u")
        .replace("μ", "u")
        .replace("**", "^")
        .replace("·", "*")
        .replace("⋅", "*")
    )
    text = RAISED.sub(lambda found: "^" + found.group().translate(SUPERSCRIPTS), text)
    text = re.sub(r"\s*([*/^])\s*", r"\1", text)
    return re.sub(r"\s+", " ", text)


def resolved(text: str) -> Unit:
    """What the units library makes of a text in our grammar, with hertz and radian kept as dimensions."""
    registry = _registry()
    powers: Counter[str] = Counter()
    factor = 1.0
    for name, power in _factors(registry, text):
        scale, base = registry.get_base_units(name)
        factor *= float(scale) ** power
        if registry.parse_unit_name(name)[0][1] == "hertz":
            powers["hertz"] += power
            continue
        for symbol, exponent in base._units.items():
            powers[symbol] += exponent * power
            factor *= BITS_IN_A_BYTE ** -(exponent * power) if symbol == "bit" else 1.0
    return Unit(factor, _dimension(powers))


def _factors(registry: Any, text: str) -> list[tuple[str, int]]:
    """The factors of a unit with their powers, by the library's full names."""
    import pint

    product = ("1" + text if text.startswith("/") else text).replace(" ", "*").replace("^", "**")
    try:
        factors = [(str(name), int(power)) for name, power in registry.parse_units(product)._units.items()]
    except (pint.errors.PintError, AttributeError, TypeError, ValueError):
        raise _no_unit(text) from None
    if not factors or not all(_multiplies(registry, name) for name, _ in factors):
        raise _no_unit(text)
    return factors


def _multiplies(registry: Any, name: str) -> bool:
    """False for logarithmic units and those with an offset."""
    return bool(registry._units[registry.parse_unit_name(name)[0][1]].is_multiplicative)


BITS_IN_A_BYTE = 8.0

BASE_SYMBOLS = {
    "meter": "m", "second": "s", "kilogram": "kg", "kelvin": "K", "mole": "mol", "ampere": "A",
    "candela": "cd", "radian": "rad", "hertz": "Hz", "bit": "byte",
}  # fmt: skip


def _dimension(powers: Counter[str]) -> str:
    named = sorted((BASE_SYMBOLS.get(name, name), int(power)) for name, power in powers.items() if power)
    return " ".join(symbol if power == 1 else f"{symbol}^{power}" for symbol, power in named)


@cache
def _registry() -> Any:
    import pint

    return pint.UnitRegistry()


def _no_unit(text: str) -> InputError:
    return InputError(
        "this is not a unit",
        value=text,
        allowed='units such as "mm", "fs^2/mm", "ps/(nm km)", "cm^-1", "rad/fs"',
        remedy="Write powers as fs^2 and put a divisor of several factors in parentheses",
    )
