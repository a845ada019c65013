"""Facts for the hazard assessment: what light there is, how short it can get, and where else it goes."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.path import Path
from pulseprop.elements.slab import Slab
from pulseprop.grid import Grid
from pulseprop.measures.limits import TransformLimit
from pulseprop.propagation.result import ElementMeasures, HazardFacts

__all__ = ["hazard_facts"]

Complex = NDArray[np.complex128]

SPEED_OF_LIGHT = 299792458.0


def hazard_facts(
    grid: Grid,
    spectrum: Complex,
    limit: TransformLimit,
    path: Path,
    rows: Sequence[ElementMeasures],
    omega: float,
    radius: float | None,
    repetition_rate: float | None,
) -> HazardFacts:
    """Facts about the pulse that enters (a path without gain only weakens it) and the stray beams of the
    path.
    """
    energy = grid.energy(spectrum)
    fluences = [row.peak_fluence_J_per_cm2 for row in rows if row.peak_fluence_J_per_cm2 is not None]
    intensities = [row.peak_intensity_W_per_cm2 for row in rows if row.peak_intensity_W_per_cm2 is not None]
    return HazardFacts(
        wavelengths_at_1_percent_nm=_wavelengths(grid, spectrum, 1e-2),
        wavelengths_at_1e_4_nm=_wavelengths(grid, spectrum, 1e-4),
        pulse_energy_J=energy,
        repetition_rate_Hz=repetition_rate,
        average_power_W=None if repetition_rate is None else energy * repetition_rate,
        shortest_possible_fwhm_fs=limit.fwhm * 1e15,
        peak_power_at_limit_W=limit.peak_power,
        beam_radius_m=radius,
        peak_fluence_J_per_cm2=max(fluences, default=None),
        peak_intensity_W_per_cm2=max(intensities, default=None),
        stray_beams=tuple(_stray(element, omega) for element in path if isinstance(element, Slab)),
    )


def _wavelengths(grid: Grid, spectrum: Complex, level: float) -> tuple[float, float]:
    """Vacuum wavelengths in nm between which the spectrum per frequency exceeds a share of its peak."""
    power = spectrum.real**2 + spectrum.imag**2
    seen = grid.frequency[power >= level * power.max()]
    return SPEED_OF_LIGHT / float(seen[-1]) * 1e9, SPEED_OF_LIGHT / float(seen[0]) * 1e9


def _stray(slab: Slab, omega: float) -> str:
    if slab.faces == "reflectance":
        return f"{slab.name}: each face reflects {100 * slab.reflectance:.2g} % as stated"
    reflectance = slab.face_reflectance(omega)
    coated = "" if slab.faces in ("fresnel", "echoes") else " if uncoated"
    return f"{slab.name}: each face reflects about {100 * reflectance:.2g} %{coated}"
