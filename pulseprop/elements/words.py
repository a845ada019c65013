"""Settings of elements in words, for the line that tells what an element is."""

from __future__ import annotations

from pulseprop.constants import TWO_PI_C
from pulseprop.units import from_si

__all__ = ["in_unit", "nanometres", "orders_words", "times"]

KINDS_OF_UNITS = {
    "mm": "length",
    "um": "length",
    "deg": "angle",
    "/mm": "groove_density",
    "fs^2": "gdd",
    "fs^3": "tod",
}
"""The units that elements speak in, and what kind each is of."""
NEGLIGIBLE_TOD = 0.05e-45
"""s^3: below a tenth of a fs^3 there is nothing to tell."""


def in_unit(value: float, unit: str, digits: int = 4) -> str:
    """An SI value in that unit, without zeros behind the last digit that counts: "300 /mm"."""
    number = float(from_si(value, unit, KINDS_OF_UNITS[unit]))
    return f"{float(f'{number:.{digits}g}'):.12g} {unit}"


def nanometres(omega: float, digits: int = 6) -> str:
    """The vacuum wavelength of omega (rad/s)."""
    return f"{TWO_PI_C / omega * 1e9:.{digits}g} nm"


def times(count: int, one: str, many: str) -> str:
    """ "1 pass", "2 passes"."""
    return f"{count} {one if count == 1 else many}"


def orders_words(gdd: float, tod: float) -> str:
    """GDD (s^2), and TOD (s^3) where there is any to speak of: "-39.8 fs^2 and -26.4 fs^3"."""
    said = in_unit(gdd, "fs^2", 3)
    return f"{said} and {in_unit(tod, 'fs^3', 3)}" if abs(tod) > NEGLIGIBLE_TOD else said
