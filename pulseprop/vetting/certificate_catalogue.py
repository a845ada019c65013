"""Printed numbers against the catalogue medium that the certificate names."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

import numpy as np

from pulseprop.constants import SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.material.catalogue import near_names, record
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.medium import Medium
from pulseprop.vetting.certificate_copies import TELLING, agrees, readings, usual_places
from pulseprop.vetting.certificate_values import PrintedValue
from pulseprop.vetting.requirement_quantities import LINE_C, LINE_D, LINE_F
from pulseprop.vetting.result import Finding

__all__ = ["against_catalogue", "catalogue_number"]

ROUNDED_C = (2.9979e8, 2.998e8, 3e8)
"""Speeds of light that tables were made with, m/s."""
POWER_OF_C = {"gvd": 2, "tod": 3, "fod": 4}
"""An order is a derivative by wavelength over this power of c."""

INDEX_LIKE = ("index", "n_d", "n_F", "n_C")
MELTS = dict.fromkeys((*INDEX_LIKE, "group index"), 1e-3)
OTHER_MELTS = 0.01
"""Relative differences that melts, temperatures and other records explain (common practice, no source)."""
SEARCH = 400


def catalogue_number(medium: Medium, quantity: str, omega: float) -> float | None:
    """The same quantity of a medium, SI; None outside its range. Of a zero-dispersion wavelength the root
    nearest to 2 pi c / omega."""
    if quantity == "V_d":
        d, f, c = (catalogue_number(medium, "index", line) for line in (LINE_D, LINE_F, LINE_C))
        return None if d is None or f is None or c is None or f == c else (d - 1) / (f - c)
    if quantity == "zero dispersion wavelength":
        return _nearest_where(medium, "gvd", 0.0, omega)
    if not medium.band.contains(np.array([omega]))[0]:
        return None
    orders = medium.orders(omega)
    plain = {"gvd": orders.gvd, "tod": orders.tod, "fod": orders.fod, "group index": orders.group_index}
    return plain.get(quantity, orders.index)


def against_catalogue(values: Sequence[PrintedValue], media: Sequence[Medium]) -> Iterator[Finding]:
    """Each value against the media (several where the axis of a crystal is open)."""
    fitting = []
    for value in values:
        known = [
            (medium, number)
            for medium in media
            if (number := catalogue_number(medium, value.quantity, value.omega)) is not None
        ]
        if not known:
            continue
        medium, number = min(known, key=lambda entry: abs(entry[1] - value.value))
        if agrees(value.value, number, value.error):
            fitting.append(f"{value.words} ({medium.name})" if len(media) > 1 else value.words)
        else:
            yield _rounded_c(value, medium, number) or _differs(values, value, medium, number)
    if fitting:
        names = " or ".join(medium.name for medium in media)
        yield Finding(
            code="agrees-with-catalogue",
            severity="note",
            text=f"Agrees with the catalogue formula of {names} in all printed digits: {', '.join(fitting)}.",
        )


def _rounded_c(value: PrintedValue, medium: Medium, number: float) -> Finding | None:
    """Agreement once the printed number is taken as made with a rounded speed of light."""
    power = POWER_OF_C.get(value.quantity)
    if power is None:
        return None
    for c in ROUNDED_C:
        if agrees(value.value, number * (SPEED_OF_LIGHT / c) ** power, value.error):
            return Finding(
                code="rounded-speed-of-light",
                severity="note",
                text=f"{value.words} is printed as {value.text}; {medium.name} has {_shown(value, number)}. "
                f"All printed digits agree if it was computed with c = {c:.5g} m/s.",
                rows=_rows(value),
            )
    return None


def _differs(values: Sequence[PrintedValue], value: PrintedValue, medium: Medium, number: float) -> Finding:
    apart = abs(value.value - number) / abs(number) if number else np.inf
    grave = apart > MELTS.get(value.quantity, OTHER_MELTS)
    copies = tuple(_copies(values, value, medium, number, grave))
    repair = f"take it as {', or as '.join(copies)}" if copies else None
    text = (
        f"{value.words} is printed as {value.text}; {medium.name} has {_shown(value, number)}. By its "
        f"catalogue formula ({medium.source}) that is {_apart(apart)} away and outside the printed digits"
    )
    text += ": it does not follow from it." if grave else "; another melt or record may differ by as much."
    if repair:
        text += f" It agrees if you {repair}."
    elif met := _met_near(value, medium):
        text += f" {medium.name} has the printed value near {met}."
    return Finding(
        code="differs-from-catalogue",
        severity="error" if grave else "warning",
        text=text,
        rows=_rows(value),
        repair=repair,
    )


def _copies(
    values: Sequence[PrintedValue], value: PrintedValue, medium: Medium, number: float, grave: bool
) -> Iterator[str]:
    """Where the number may come from, in words that follow "take it as". Small differences come about in too
    many ways for wavelengths and siblings to be evidence."""
    if value.error > TELLING * abs(value.value):
        return
    for words, factor in readings(value):
        if agrees(value.value * factor, number, value.error * abs(factor)):
            yield words
    yield from _other_index(value, medium, number)
    if not grave:
        return
    if value.quantity not in ("V_d", "zero dispersion wavelength"):
        for omega in usual_places(values, value):
            other = catalogue_number(medium, value.quantity, omega)
            if other is not None and agrees(value.value, other, value.error):
                yield f"that of another wavelength, {TWO_PI_C / omega * 1e9:.6g} nm"
    for sibling in _siblings(medium.name):
        if _is(sibling, value.quantity, value):
            yield f"that of {sibling.name}"


def _other_index(value: PrintedValue, medium: Medium, number: float) -> Iterator[str]:
    """The group index for the index, air for vacuum, and the other way round."""
    if value.quantity == "index" and _is(medium, "group index", value):
        yield "the group index"
    if value.quantity == "group index" and _is(medium, "index", value):
        yield "the index and not the group index"
    air = catalogue_number(catalogue_medium("air"), "index", value.omega)
    if value.quantity not in INDEX_LIKE or air is None:
        return
    if medium.relative_to == "air" and agrees(value.value, number * air, value.error):
        yield "against vacuum and not against air"
    if medium.relative_to == "vacuum" and agrees(value.value, number / air, value.error):
        yield "against air and not against vacuum"


def _is(medium: Medium, quantity: str, value: PrintedValue) -> bool:
    number = catalogue_number(medium, quantity, value.omega)
    return number is not None and agrees(value.value, number, value.error)


def _siblings(name: str) -> Iterator[Medium]:
    for other in near_names(name):
        if other != name and record(other).kind != "humid air":
            yield catalogue_medium(other)


def _met_near(value: PrintedValue, medium: Medium) -> str:
    """The wavelength at which the medium has the printed value, empty where there is none near."""
    if value.quantity in ("V_d", "zero dispersion wavelength"):
        return ""
    found = _nearest_where(medium, value.quantity, value.value, value.omega)
    return "" if found is None else f"{found * 1e9:.4g} nm"


def _nearest_where(medium: Medium, quantity: str, wanted: float, omega: float) -> float | None:
    """The wavelength nearest to 2 pi c / omega, m, within a factor of two, where a quantity has a value."""
    low, high = max(medium.band.low, omega / 2), min(medium.band.high, omega * 2)
    if not low < high:
        return None
    grid = np.linspace(low, high, SEARCH)
    rest = np.array([(catalogue_number(medium, quantity, float(place)) or np.nan) - wanted for place in grid])
    cross = np.flatnonzero(rest[:-1] * rest[1:] <= 0)
    if not len(cross):
        return None
    at = cross[np.argmin(np.abs(grid[cross] - omega))]
    return float(TWO_PI_C / _bisected(medium, quantity, wanted, float(grid[at]), float(grid[at + 1])))


def _bisected(medium: Medium, quantity: str, wanted: float, low: float, high: float) -> float:
    from scipy.optimize import brentq

    return float(
        brentq(lambda omega: (catalogue_number(medium, quantity, omega) or 0.0) - wanted, low, high, xtol=1e3)
    )


def _shown(value: PrintedValue, number: float) -> str:
    """A number of the same quantity in the printed unit."""
    return f"{value.in_unit(number):.7g}{' ' + value.unit if value.unit else ''}"


def _apart(share: float) -> str:
    return f"{100 * share:.2g} %" if share >= 1e-3 else f"{share:.1e} of it"


def _rows(value: PrintedValue) -> tuple[int, ...]:
    return (value.line,) if value.line else ()
