"""A table as it was sent: what its columns are, as printed and in SI, and how that was found out."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Literal

import numpy as np
from numpy.typing import NDArray

__all__ = ["Column", "Inference", "Quantity", "SentTable"]

Real = NDArray[np.float64]

Quantity = Literal[
    "n",
    "k",
    "alpha",
    "absorbance",
    "napierian",
    "internal_transmittance",
    "transmittance",
    "group_index",
    "gvd",
    "tod",
    "reflectance",
    "group_delay",
    "gdd",
    "phase",
    "mirror_tod",
]
"""gvd and tod are of a material, per length; group_delay, gdd, mirror_tod and phase of one bounce."""


@dataclass(frozen=True, kw_only=True)
class Inference:
    """What was found out and not stated: about what, what was taken, why, and how to overrule it."""

    about: str
    taken: str
    why: str
    overrule: str


@dataclass(frozen=True, kw_only=True, eq=False)
class Column:
    """One column. cells: as printed, (R,). values: (R,) in SI (fractions for percent; k, n plain).

    unit: as printed, empty for plain numbers. header: its heading, empty where there is none. half_unit: (R,)
    half a unit of the last printed place, in SI. uncertainty: (R,) as stated by option or by
    another column, SI; None where not.
    """

    quantity: Quantity
    header: str
    unit: str
    cells: tuple[str, ...]
    values: Real
    half_unit: Real
    uncertainty: Real | None = None


@dataclass(frozen=True, kw_only=True, eq=False)
class SentTable:
    """Rows in the order of the file; nothing is sorted, repaired or left out in silence.

    lines: line (or spreadsheet row) of each row in the file, (R,). axis_*: the spectral axis as printed,
    omega: the same in rad/s, (R,), wavelengths taken as `wavelength_in` says. thickness: m, of the sample.
    axis_half_unit: half a unit of the axis's last printed place, in axis_unit, (R,).
    """

    file: str
    sha256: str
    lines: NDArray[np.int64]
    axis: Literal["wavelength", "frequency", "wavenumber", "photon_energy"]
    axis_unit: str
    axis_cells: tuple[str, ...]
    axis_values: Real
    omega: Real
    columns: tuple[Column, ...]
    relative_to: Literal["air", "vacuum"] | None = None
    wavelength_in: Literal["air", "vacuum"] = "vacuum"
    thickness: float | None = None
    title: str = ""
    comments: tuple[str, ...] = ()
    inferred: tuple[Inference, ...] = field(default=())
    axis_half_unit: Real | None = None

    def column(self, quantity: Quantity) -> Column | None:
        """The column of that quantity, or None."""
        return next((column for column in self.columns if column.quantity == quantity), None)
