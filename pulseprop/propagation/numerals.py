"""Numbers for people: as many digits as the data carry, and units of a size that reads easily."""

from __future__ import annotations

import math
from collections.abc import Iterable

from pulseprop.constants import SPEED_OF_LIGHT

__all__ = [
    "LONG_NM",
    "NOTHING",
    "fixed",
    "last_place",
    "percent",
    "prefix_for",
    "quantity",
    "scaled",
    "significant",
    "span",
    "terahertz",
]

NOTHING = "–"
"""Stands where there is no answer."""

PREFIXES = (
    (1e12, "T"),
    (1e9, "G"),
    (1e6, "M"),
    (1e3, "k"),
    (1.0, ""),
    (1e-3, "m"),
    (1e-6, "u"),
    (1e-9, "n"),
    (1e-12, "p"),
    (1e-15, "f"),
)

LONGEST = 1e6
"""From here on numbers have an exponent."""

TIMES = ((1e9, "us", 1e-9), (1e6, "ns", 1e-6), (1e3, "ps", 1e-3), (0.0, "fs", 1.0))
"""From how many femtoseconds on a unit is used, its symbol, and its value of one femtosecond."""

FINEST = -2
"""Power of ten of the last decimal of a percentage near the whole: 5e-5 less than all is all."""

LONG_NM = 2e4
"""Wavelength from which on people speak of the frequency, and of micrometres."""

NEARLY = 0.9
"""Of a unit: from here on it is used for what lies about that size."""


def significant(value: float | None, digits: int) -> str:
    """A number with that many significant digits; trailing zeros count and are kept."""
    if value is None or not math.isfinite(value):
        return NOTHING
    if value == 0:
        return "0"
    rounded = float(f"{value:.{digits - 1}e}")
    size = math.floor(math.log10(abs(rounded)))
    if 1e-4 <= abs(rounded) < LONGEST:
        return fixed(value, size - digits + 1)
    mantissa, exponent = f"{rounded:.{digits - 1}e}".split("e")
    return f"{mantissa}e{int(exponent)}"


def last_place(value: float | None, digits: int) -> int | None:
    """The power of ten of the last of that many significant digits; None where nothing is known from it."""
    if value is None or not math.isfinite(value) or value == 0:
        return None
    return math.floor(math.log10(abs(value))) - digits + 1


def fixed(value: float | None, place: int) -> str:
    """A number rounded at a power of ten: place -1 keeps one decimal, place 2 whole hundreds."""
    if value is None or not math.isfinite(value):
        return NOTHING
    rounded = round(value, -place) + 0.0
    if abs(rounded) >= LONGEST:
        return significant(value, max(math.floor(math.log10(abs(rounded))) - place + 1, 1))
    return f"{rounded:.{max(-place, 0)}f}"


def percent(share: float | None, digits: int = 3) -> str:
    """A share as per cent. Near the whole the digits count from what is missing, to two decimals at most:
    99.24 %, not 99.2 %, and 100 %, not 100.0 %.
    """
    if share is None or not math.isfinite(share):
        return NOTHING
    missing = 100 * (1.0 - share)
    if abs(missing) < 0.5 * 10.0**FINEST:
        return "100 %"
    place = last_place(missing, max(digits - 1, 1))
    if 0 < missing < 10 and place is not None:
        return f"{fixed(100 * share, max(place, FINEST))} %"
    return f"{significant(100 * share, digits)} %"


def scaled(femtoseconds: Iterable[float | None]) -> tuple[str, float]:
    """Unit for durations that stand together, by their geometric mean, and what takes femtoseconds to it."""
    sizes = [math.log(abs(value)) for value in femtoseconds if value]
    return _time_unit(math.exp(sum(sizes) / len(sizes)) / NEARLY if sizes else 0.0)


def _time_unit(femtoseconds: float) -> tuple[str, float]:
    return next((unit, factor) for least, unit, factor in TIMES if femtoseconds >= least)


def span(femtoseconds: float | None, digits: int) -> str:
    """A duration with its unit."""
    if femtoseconds is None or not math.isfinite(femtoseconds):
        return NOTHING
    unit, factor = _time_unit(abs(femtoseconds) * 1.0005)
    return f"{significant(femtoseconds * factor, digits)} {unit}"


def quantity(value: float | None, unit: str, digits: int = 3) -> str:
    """A value in a basic unit, with the prefix that keeps the number between 1 and 1000."""
    if value is None or not math.isfinite(value):
        return NOTHING
    size, prefix = prefix_for(value)
    return f"{significant(value / size, digits)} {prefix}{unit}"


def terahertz(wavelength_nm: float) -> float:
    """Frequency in THz of a vacuum wavelength in nm."""
    return SPEED_OF_LIGHT * 1e-3 / wavelength_nm


def prefix_for(value: float) -> tuple[float, str]:
    """The decimal prefix that puts a number between 1 and 1000: its size and its letter."""
    return next((known for known in PREFIXES if abs(value) >= 0.9995 * known[0]), (1.0, ""))
