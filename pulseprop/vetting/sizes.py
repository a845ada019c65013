"""What numbers are, by their size and course, where no heading and no option says so.

Two answers that fit are no answer: then the user is asked.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.vetting.heading_words import Axis
from pulseprop.vetting.table import Quantity

__all__ = ["axis_by_size", "is_percent", "quantity_by_size", "unit_by_size"]

Real = NDArray[np.float64]

UNITS: dict[Axis, tuple[tuple[str, float, float], ...]] = {
    "wavelength": (("nm", 100, 1e5), ("um", 0.05, 99)),
    "wavenumber": (("cm^-1", 10, 2e5),),
    "frequency": (("THz", 0.05, 5000), ("Hz", 5e10, 5e15)),
    "photon_energy": (("eV", 0.01, 60),),
}
"""Units that an axis known by name is usually printed in, with lowest and highest numbers."""

SHORT_RANGE = 1200.0
"""Whole tables below 1200 are nanometres: as wavenumbers they would lie beyond 8 um alone."""
HIGHEST_PERCENT = 150.0


def unit_by_size(axis: Axis, values: Real) -> str | None:
    """The usual unit of an axis in which all of its values are believable; None where there is not one."""
    fitting = [unit for unit, low, high in UNITS[axis] if _within(values, low, high)]
    return fitting[0] if len(fitting) == 1 else None


def axis_by_size(values: Real, beside: Real | None) -> tuple[Axis, str] | tuple[None, str]:
    """Axis and unit of a column without any; or None with what it may be.

    values: (R,). beside: the column next to it, (R,), None where it is not like an index. An index falls with
    the wavelength and rises with frequency nearly everywhere, which decides between units of like size.
    """
    course = 0 if beside is None or quantity_by_size(beside) != "n" else _course(values, beside)
    if _within(values, 0.15, 50):
        if course > 0:
            return None, "micrometres or electronvolts"
        return "wavelength", "um"
    if _within(values, 150, 3000):
        if course < 0 or (values.max() <= SHORT_RANGE and course <= 0):
            return "wavelength", "nm"
        return None, "nanometres or reciprocal centimetres"
    if _within(values, 3000, 50000) and values.max() > 20000:
        return "wavenumber", "cm^-1"
    return None, "nanometres, micrometres, reciprocal centimetres, terahertz or electronvolts"


def quantity_by_size(values: Real) -> Quantity | None:
    """An index is known by its size and its small variation; nothing else is."""
    known = values[np.isfinite(values)]
    if len(known) and known.min() >= 1 and known.max() <= 6 and np.ptp(known) < 0.7 * np.mean(known):
        return "n"
    return None


def is_percent(values: Real) -> bool:
    """Whether a transmittance or reflectance goes far above 1, as only percentages do."""
    known = values[np.isfinite(values)]
    return bool(len(known) and 1.5 < known.max() <= HIGHEST_PERCENT)


def _within(values: Real, low: float, high: float) -> bool:
    known = values[np.isfinite(values)]
    return bool(len(known) and known.min() >= low and known.max() <= high)


def _course(x: Real, y: Real) -> int:
    """1 where y rises with x in at least four of five steps, -1 where it falls, else 0."""
    good = np.isfinite(x) & np.isfinite(y)
    steps = np.sign(np.diff(x[good])) * np.sign(np.diff(y[good]))
    moved = steps[steps != 0]
    if not len(moved) or abs(moved.mean()) < 0.6:
        return 0
    return int(np.sign(moved.mean()))
