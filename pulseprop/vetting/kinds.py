"""Which kind of unit each quantity of a table is given in."""

from __future__ import annotations

from typing import Final

from pulseprop.vetting.table import Quantity

__all__ = ["FRACTIONS", "KIND_OF", "USUAL_UNIT"]

FRACTIONS: Final[tuple[Quantity, ...]] = ("internal_transmittance", "transmittance", "reflectance")

KIND_OF: Final[dict[Quantity, str]] = {
    "alpha": "inverse_length",
    "internal_transmittance": "fraction",
    "transmittance": "fraction",
    "reflectance": "fraction",
    "gvd": "gvd",
    "tod": "tod_per_length",
    "group_delay": "time",
    "gdd": "gdd",
    "mirror_tod": "tod",
    "phase": "phase",
}
"""Kind in `pulseprop.units`; what is missing here is a plain number."""

USUAL_UNIT: Final[dict[Quantity, str]] = {
    "gvd": "fs^2/mm",
    "tod": "fs^3/mm",
    "group_delay": "fs",
    "gdd": "fs^2",
    "mirror_tod": "fs^3",
    "phase": "rad",
}
"""The unit of data sheets for ultrashort pulses (common practice, no source), taken where none is said."""
