"""How a printed number may have come about that does not agree with the others: other units, signs, columns.

A reading is named only where the number agrees with the reference within its printed digits after it.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from pulseprop.constants import TWO_PI_C
from pulseprop.units import unit_from
from pulseprop.vetting.certificate_values import PrintedValue

__all__ = ["TELLING", "agrees", "readings", "usual_places"]

TELLING = 0.02
"""Largest relative error of a printed number at which agreement with another tells anything."""

LENGTHS = ("mm", "cm", "m", "km")
FACTORIAL = {"gvd": 2.0, "tod": 6.0, "fod": 24.0}
"""What stands below an order in the Taylor series of the phase."""
USUAL_NM = (400, 515, 532, 589.3, 632.8, 780, 800, 1030, 1053, 1064, 1300, 1310, 1500, 1550, 2000)
"""Wavelengths for which dispersion is often printed (common practice, no source)."""


def agrees(value: float, reference: float, error: float) -> bool:
    """Within the error, rounding of the arithmetic aside."""
    return abs(value - reference) <= error * (1 + 1e-9)


def readings(value: PrintedValue) -> Iterator[tuple[str, float]]:
    """What may be meant, in words that follow "take it as", and the factor on the number."""
    if value.quantity not in FACTORIAL:
        return
    yield "one with the other sign", -1.0
    yield from _other_lengths(value.unit)
    factorial = FACTORIAL[value.quantity]
    yield f"the coefficient of the phase's Taylor series, {factorial:g} times smaller", factorial
    yield f"{factorial:g} times too large, a coefficient of the phase multiplied twice", 1 / factorial
    if value.quantity == "gvd":
        yield "D in ps/(nm km) and not a GVD", -_gvd_of_dispersion(value)


def usual_places(values: Sequence[PrintedValue], own: PrintedValue) -> Iterator[float]:
    """Other places (rad/s) from which a number may have been copied: those of the file, then usual ones."""
    seen = {round(own.omega / 1e9)}
    for omega in (*(value.omega for value in values), *(TWO_PI_C / (nm * 1e-9) for nm in USUAL_NM)):
        if round(omega / 1e9) not in seen:
            seen.add(round(omega / 1e9))
            yield omega


def _other_lengths(unit: str) -> Iterator[tuple[str, float]]:
    """Another length below the line of a unit such as fs^2/cm."""
    above, _, own = unit.partition("/")
    for length in LENGTHS if own in LENGTHS else ():
        if length != own:
            yield (
                f"per {length} and not per {own}",
                unit_from(f"{above}/{length}").factor / unit_from(unit).factor,
            )


def _gvd_of_dispersion(value: PrintedValue) -> float:
    """Factor from the printed number, taken as fs^2/mm, to the GVD of as many ps/(nm km), sign apart."""
    number = value.value / 1e-27
    return number * 1e-6 * TWO_PI_C / value.omega**2 / value.value if value.value else 1.0
