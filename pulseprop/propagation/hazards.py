"""Facts for the hazard assessment: what light there is, how short it can get, and where else it goes."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.elements.device import Straying
from pulseprop.elements.element import Element
from pulseprop.elements.group import every
from pulseprop.elements.slab import Slab
from pulseprop.grid import Grid
from pulseprop.measures.limits import TransformLimit
from pulseprop.propagation.budget import largest
from pulseprop.propagation.experiment import Experiment
from pulseprop.propagation.numerals import percent
from pulseprop.propagation.result import ElementMeasures, HazardFacts

__all__ = ["hazard_facts"]

Complex = NDArray[np.complex128]

FAINT = 1e-6
"""Faces of gases reflect less than this: no beam."""


def hazard_facts(
    experiment: Experiment,
    grid: Grid,
    spectrum: Complex,
    limit: TransformLimit,
    rows: Sequence[ElementMeasures],
) -> HazardFacts:
    """Facts about the pulse that enters, A(omega) on the grid (a path without gain only weakens it), and the
    stray beams of the path.
    """
    pulse, known = experiment.pulse, experiment.energy_stated
    energy, rate = grid.energy(spectrum), pulse.repetition_rate
    stray = [text for element in every(experiment.path) for text in _stray(element, pulse.centre)]
    return HazardFacts(
        wavelengths_at_1_percent_nm=_wavelengths(grid, spectrum, 1e-2),
        wavelengths_at_1e_4_nm=_wavelengths(grid, spectrum, 1e-4),
        pulse_energy_J=energy if known else None,
        repetition_rate_Hz=rate,
        average_power_W=energy * rate if known and rate is not None else None,
        shortest_possible_fwhm_fs=limit.fwhm * 1e15,
        peak_power_at_limit_W=limit.peak_power if known else None,
        beam_radius_m=pulse.beam_radius,
        peak_fluence_J_per_cm2=largest(row.peak_fluence_J_per_cm2 for row in rows),
        peak_intensity_W_per_cm2=largest(row.peak_intensity_W_per_cm2 for row in rows),
        stray_beams=tuple(stray),
    )


def _wavelengths(grid: Grid, spectrum: Complex, level: float) -> tuple[float, float]:
    """Vacuum wavelengths in nm between which the spectrum per frequency exceeds a share of its peak."""
    power = spectrum.real**2 + spectrum.imag**2
    seen = grid.frequency[power >= level * power.max()]
    return SPEED_OF_LIGHT / float(seen[-1]) * 1e9, SPEED_OF_LIGHT / float(seen[0]) * 1e9


def _stray(element: Element, omega: float) -> tuple[str, ...]:
    if isinstance(element, Straying):
        return element.stray_beams
    reflected = _reflected(element, omega) if isinstance(element, Slab) else ""
    return (reflected,) if reflected else ()


def _reflected(slab: Slab, omega: float) -> str:
    if slab.faces == "reflectance":
        return f"{slab.name}: each face reflects {percent(slab.reflectance, 2)} as stated"
    reflectance = slab.face_reflectance(omega)
    if reflectance < FAINT:
        return ""
    coated = "" if slab.faces in ("fresnel", "echoes") else " if uncoated"
    return f"{slab.name}: each face reflects about {percent(reflectance, 2)}{coated}"
