"""Whether a pulse stays where the records of the path's media hold, and where its devices work."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.elements.device import Banded
from pulseprop.errors import RangeError
from pulseprop.grid import Grid
from pulseprop.material.response import Band
from pulseprop.propagation.experiment import Experiment
from pulseprop.propagation.numerals import percent

__all__ = ["RANGE_SHARE", "check_range", "energy_without_data", "range_warnings"]

Complex = NDArray[np.complex128]

RANGE_SHARE = 1e-6
"""Share of the pulse's energy that may lie outside the range of a record."""

MOSTLY = 0.5
"""From this share outside on, going on beyond the range is no advice to give."""


def _energy_outside(grid: Grid, spectrum: Complex, low: float, high: float) -> float:
    """Share of the energy outside low to high, rad/s."""
    power = spectrum.real**2 + spectrum.imag**2
    inside = slice(*np.searchsorted(grid.frequency, np.array([low, high]) / (2 * np.pi)))
    total = float(power.sum())
    return max(total - float(power[inside].sum()), 0.0) / total if total else 0.0


def check_range(experiment: Experiment, grid: Grid, spectrum: Complex) -> None:
    """Refuse a pulse, A(omega) on the grid, that leaves the range of a medium or the band of a device:
    RangeError names it.

    A medium lets it through where the scenario asks for the causal continuation and it has one.
    """
    for element in experiment.path:
        if isinstance(element, Banded):
            _check_band(experiment, grid, spectrum, element)
    for medium in experiment.path.media:
        low, high = medium.band.low, medium.band.high
        outside = _energy_outside(grid, spectrum, low, high)
        if outside <= RANGE_SHARE or (experiment.beyond_range == "causal" and medium.extendable):
            continue
        covered = f"{_nanometres(high)} to {_nanometres(low)}"
        raise RangeError(
            f"the pulse leaves the range of medium {medium.name!r}",
            value=f"{percent(outside, 2)} of the pulse's energy lies outside {covered}",
            allowed=f"at most {RANGE_SHARE:g} of the energy outside the range of a record",
            remedy=_remedy(outside, medium.extendable),
            file=experiment.file,
            place=f"medium {medium.name}",
        )


def _check_band(experiment: Experiment, grid: Grid, spectrum: Complex, element: Banded) -> None:
    outside = _energy_outside(grid, spectrum, element.band.low, element.band.high)
    if outside <= RANGE_SHARE:
        return
    raise RangeError(
        f"the pulse leaves the band of the {element.kind} {element.name!r}",
        value=f"{percent(outside, 2)} of the pulse's energy lies {_beyond(element.band)}",
        allowed=f"at most {RANGE_SHARE:g} of the energy outside",
        remedy=element.remedy_beyond(*_filled(grid, spectrum)),
        file=experiment.file,
        place=element.name,
    )


def _beyond(band: Band) -> str:
    """The outside of a band, in wavelengths."""
    if not np.isfinite(band.high):
        return f"above {_nanometres(band.low)}"
    if band.low <= 0:
        return f"below {_nanometres(band.high)}"
    return f"outside {_nanometres(band.high)} to {_nanometres(band.low)}"


def _filled(grid: Grid, spectrum: Complex) -> tuple[float, float]:
    """Where all but twice RANGE_SHARE of the energy lies, rad/s."""
    power = spectrum.real**2 + spectrum.imag**2
    total = np.cumsum(power)
    ends = np.searchsorted(total, np.array([RANGE_SHARE, 1 - RANGE_SHARE]) * total[-1])
    low, high = 2 * np.pi * grid.frequency[ends]
    return float(low), float(high)


def _remedy(outside: float, extendable: bool) -> str:
    if not extendable:
        return "Relaxation terms may not be used above their range: add what absorbs there"
    if outside > MOSTLY:
        return "This record knows nothing of this pulse: take one that covers it, or state what absorbs there"
    return 'Take a record that covers the spectrum, a narrower pulse, or [grid] beyond_range = "causal"'


def _nanometres(omega: float) -> str:
    if omega == 0:
        return "any longer wavelength"
    if not np.isfinite(omega):
        return "any shorter wavelength"
    return f"{TWO_PI_C / omega * 1e9:.6g} nm"


def energy_without_data(experiment: Experiment, grid: Grid, spectrum: Complex) -> float:
    """The largest share of the pulse's energy that lies outside the range of a medium of the path."""
    shares = [
        _energy_outside(grid, spectrum, medium.band.low, medium.band.high) for medium in experiment.path.media
    ]
    return max(shares, default=0.0)


def range_warnings(experiment: Experiment, grid: Grid, spectrum: Complex) -> tuple[str, ...]:
    """A sentence for each medium whose range a pulse that was let through leaves."""
    said = []
    for medium in experiment.path.media:
        outside = _energy_outside(grid, spectrum, medium.band.low, medium.band.high)
        if outside > RANGE_SHARE:
            said.append(
                f"{percent(outside, 2)} of the pulse's energy lies outside the range of {medium.name}, "
                "which was continued causally"
            )
    return tuple(said)
