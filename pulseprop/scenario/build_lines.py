"""Lines and terms of a medium from what the scenario states of them.

Strengths are turned into the plasma frequency squared S of chi = S / (W0^2 - w^2 - i g w):

    peak absorption alpha, Napierian, of the broadened line alone at its centre: Im chi = n_b alpha c / W0
    integrated absorption over ordinary frequency:    S = 4 n_b c int alpha d nu   (int w Im chi dw = pi S/2)
    oscillator strength f, number density N:          S = N f e^2 / (eps0 m_e)      (CODATA 2022)
    static susceptibility:                            chi(0) of the line
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from pulseprop.constants import ELECTRON_CHARGE, ELECTRON_MASS, SPEED_OF_LIGHT, VACUUM_PERMITTIVITY
from pulseprop.material.lines import Carriers, LorentzLine, Relaxation, VoigtLine, line
from pulseprop.material.medium import Resonance
from pulseprop.material.response import EVERYWHERE, Band
from pulseprop.scenario.schema_lines import CarriersTable, LineTable, RelaxationTable

__all__ = ["built_carriers", "built_line", "built_relaxation", "resonance_of"]


def built_line(
    table: LineTable, background_index: Callable[[float], float], vacuum_omega: Callable[[float], float]
) -> LorentzLine | VoigtLine:
    """The line; background_index(omega) is the index it stands in, vacuum_omega turns a place stated in
    air into one in vacuum."""
    centre = vacuum_omega(table.centre.omega) if table.wavelength_in == "air" else table.centre.omega
    unit = line(
        centre=centre, width=2 * np.pi * table.full_width, doppler_width=2 * np.pi * table.gaussian_width
    )
    return unit.with_strength(_strength(table, unit, background_index(centre)))


def _strength(table: LineTable, unit: LorentzLine | VoigtLine, index: float) -> float:
    kind = table.strength_kind
    value = float(getattr(table, kind))
    if kind == "plasma_frequency":
        return value**2
    if kind == "oscillator_strength":
        per_electron = ELECTRON_CHARGE**2 / (VACUUM_PERMITTIVITY * ELECTRON_MASS)
        return value * (table.number_density or 0.0) * per_electron
    if kind == "integrated_absorption":
        return 4 * index * SPEED_OF_LIGHT * value
    if kind == "static_susceptibility":
        return value / float(np.real(unit.series(np.array(0.0), 1)[0]))
    peak = float(np.imag(unit.series(np.array(unit.centre), 1)[0]))
    return index * value * SPEED_OF_LIGHT / (unit.centre * peak)


def resonance_of(built: LorentzLine | VoigtLine) -> Resonance:
    """How a line rings."""
    width = built.width + (built.doppler_width if isinstance(built, VoigtLine) else 0.0)
    return Resonance(centre=built.centre, width=width, memory=built.memory)


def built_relaxation(table: RelaxationTable) -> Relaxation:
    """The Debye term with the band in which it may be used."""
    band = Band(*table.valid) if table.valid else EVERYWHERE
    return Relaxation(static=table.static_susceptibility, time=table.time, band=band)


def built_carriers(table: CarriersTable) -> Carriers:
    """The Drude term."""
    return Carriers(plasma_frequency=table.plasma_frequency, rate=1 / table.scattering_time)
