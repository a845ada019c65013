"""Text with units to SI floats and back: the edge of the program; inside everything is SI.

`kinds` says what quantities there are and what may stand for them, `symbols` turns the text of a unit into a
factor and a dimension, `text` reads and shows values.
"""

from __future__ import annotations

from pulseprop.units.kinds import KINDS, Kind, kind_named
from pulseprop.units.symbols import Unit, unit_from
from pulseprop.units.text import (
    Position,
    Width,
    from_si,
    position,
    quantity,
    show,
    spectral_width,
    to_si,
)

__all__ = [
    "KINDS",
    "Kind",
    "Position",
    "Unit",
    "Width",
    "from_si",
    "kind_named",
    "position",
    "quantity",
    "show",
    "spectral_width",
    "to_si",
    "unit_from",
]
