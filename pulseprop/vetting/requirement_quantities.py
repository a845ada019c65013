"""What a requirement may be about, and the spectral lines that glass is named by.

Lines: helium d 587.5618 nm, hydrogen F 486.1327 nm and C 656.2725 nm, and V_d = (n_d - 1)/(n_F - n_C), as ISO
7944 names them (number and values from memory). They are wavelengths in air, put into formulas as they stand,
as glass makers do.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.units import unit_from

__all__ = ["LINE_C", "LINE_D", "LINE_F", "REQUIRABLE", "Requirable", "named_requirable", "plain_number"]

LINE_D = TWO_PI_C / 587.5618e-9
LINE_F = TWO_PI_C / 486.1327e-9
LINE_C = TWO_PI_C / 656.2725e-9
"""rad/s."""


@dataclass(frozen=True, kw_only=True)
class Requirable:
    """name: as written. words: as said. kind: of the unit, "number" for none. example: of a limit."""

    name: str
    words: str
    kind: str
    example: str
    of_mirror: bool = False
    has_place: bool = True
    has_range: bool = False
    has_length: bool = False

    @property
    def allowed(self) -> str:
        """What a limit looks like."""
        return f'a limit such as "{self.example}"'


def _mirror(name: str, words: str, kind: str, example: str) -> Requirable:
    return Requirable(name=name, words=words, kind=kind, example=example, of_mirror=True, has_range=True)


REQUIRABLE = {
    entry.name: entry
    for entry in (
        Requirable(name="index", words="the index", kind="number", example="1.4533 +- 0.0005"),
        Requirable(name="group index", words="the group index", kind="number", example="1.467 +- 0.001"),
        Requirable(name="gvd", words="the GVD", kind="gvd", example="36.2 +- 0.5 fs^2/mm"),
        Requirable(name="tod", words="the TOD", kind="tod_per_length", example="27.5 +- 1 fs^3/mm"),
        Requirable(name="n_d", words="n_d", kind="number", example="1.5168 +- 0.0005", has_place=False),
        Requirable(name="V_d", words="V_d", kind="number", example="64.17 +- 0.3", has_place=False),
        Requirable(
            name="internal transmittance",
            words="the internal transmittance",
            kind="fraction",
            example="0.999 +- 0.001",
            has_length=True,
        ),
        _mirror("gdd", "the GDD", "gdd", "-40 +- 5 fs^2"),
        _mirror("mirror tod", "the TOD of a bounce", "tod", "0 +- 30 fs^3"),
        _mirror("group delay", "the group delay", "time", "30 +- 2 fs"),
        _mirror("reflectance", "the reflectance", "fraction", "99.8 +- 0.1 %"),
        _mirror("transmittance", "the transmittance", "fraction", "0.1 +- 0.1 %"),
    )
}
"""By name."""

SPELLINGS = {
    "n": "index",
    "refractive index": "index",
    "n_g": "group index",
    "nd": "n_d",
    "vd": "v_d",
    "abbe number": "v_d",
}
"""Other words of the trade for the same."""


def named_requirable(name: str, limit: str) -> Requirable:
    """The quantity of that name; "tod" with a unit of one bounce is that of a mirror. Raises InputError."""
    key = " ".join(name.casefold().split())
    key = SPELLINGS.get(key, key)
    if key == "tod" and _unit_of(limit) == "s^3":
        return REQUIRABLE["mirror tod"]
    for known, entry in REQUIRABLE.items():
        if known.casefold() == key:
            return entry
    raise InputError("nothing of this name can be required", value=name, allowed=", ".join(REQUIRABLE))


def plain_number(number: str, tail: str) -> float:
    """A finite number without a unit, from its text and what follows it. Raises InputError."""
    comma = re.fullmatch(r",([0-9]+)", tail)
    if comma:
        raise InputError(
            "a comma is no decimal point here",
            value=f"{number}{tail}",
            remedy=f'Write "{number}.{comma[1]}" with a point',
        )
    if tail:
        raise InputError("this quantity has no unit", value=f"{number} {tail}", allowed="a plain number")
    value = float(number)
    if not abs(value) < float("inf"):
        raise InputError("the number is not finite", value=number)
    return value


def _unit_of(limit: str) -> str:
    """Dimension of the unit at the end of a limit, "" where there is none that is known."""
    unit = limit.rsplit(maxsplit=1)[-1]
    try:
        return unit_from(unit).dimension
    except InputError:
        return ""
