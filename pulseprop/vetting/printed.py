"""Columns as printed, and where they come from: what every kind of file is turned into before SI."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.vetting.read_options import ReadOptions

__all__ = ["Printed", "Source", "Spread"]

Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True, eq=False)
class Spread:
    """The uncertainties of a column, from another. values: (R,), 0 or more. unit: as printed, "%" for per
    cent of the value (percentage points of a fraction), None for the unit of the column."""

    values: Real
    unit: str | None


@dataclass(frozen=True, kw_only=True, eq=False)
class Printed:
    """A column as printed. values, half: (R,), in its unit; values are NaN for missing cells. unit: "" for a
    plain number, None where none was said. spread: its uncertainties, where another column states them."""

    name: str
    unit: str | None
    heading: str
    cells: tuple[str, ...]
    values: Real
    half: Real
    spread: Spread | None = None


@dataclass(frozen=True, kw_only=True)
class Source:
    """Where a table comes from, and the words around it. place: file and sheet, for messages. thickness: m,
    said not in the words but by `thickness_said_by`."""

    file: str
    place: str
    sha256: str
    options: ReadOptions
    words: tuple[str, ...] = ()
    title: str = ""
    thickness: float | None = None
    thickness_said_by: str = "the heading of the column"
