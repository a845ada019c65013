"""From records of the catalogue to media."""

from __future__ import annotations

import re
from dataclasses import replace
from functools import cache

import numpy as np

from pulseprop.errors import InputError
from pulseprop.material.catalogue import Record, record
from pulseprop.material.formulas import (
    MICROMETRE_OMEGA,
    Formula,
    Pole,
    Power,
    gas_term,
    pole_term,
    sellmeier_term,
)
from pulseprop.material.lines import Relaxation
from pulseprop.material.medium import Medium, NonlinearIndex
from pulseprop.material.molar_density import molar_density
from pulseprop.material.response import Band, Constant, Response, Sum

__all__ = ["VACUUM", "catalogue_medium", "response_of_record"]

VACUUM = Medium(
    name="vacuum",
    response=Constant(0.0),
    source="by definition",
    temperature="any",
    n2=(NonlinearIndex(value=0.0, source="by definition"),),
)

ROOM = 295.0
"""What "room temperature" is taken for, K, when an element states another temperature."""


@cache
def catalogue_medium(name: str) -> Medium:
    """The medium of this exact catalogue name, or vacuum.

    Raises InputError, with the nearest names, where there is none.
    """
    if name == VACUUM.name:
        return VACUUM
    entry = record(name)
    if entry.kind == "humid air":
        raise InputError(
            "humid air needs its state",
            value=name,
            allowed='gas = { medium = "humid air", pressure = "...", temperature = "...", humidity = "0 %" }',
        )
    return Medium(
        name=entry.name,
        response=response_of_record(entry),
        source=entry.source + (" (coefficients from memory)" if entry.from_memory else ""),
        temperature=entry.temperature,
        temperature_K=_kelvin(entry),
        relative_to=entry.relative_to,
        n2=_nonlinear_indices(entry),
        spread=entry.spread,
        notes=_notes(entry),
        health=entry.health,
        extendable=entry.kind != "debye",
    )


def response_of_record(entry: Record) -> Response:
    """The causal response behind a printed formula."""
    band = _band(entry.valid_um)
    if entry.kind == "debye":
        terms = [Relaxation(static=static, time=time, band=band) for static, time in entry.relaxations]
        return Sum((Constant(entry.offset, band), *terms))
    poles, offset = _poles_and_offset(entry)
    return Formula(
        band=band,
        of="chi" if entry.kind == "sellmeier" else "refraction",
        offset=offset,
        poles=poles,
        powers=tuple(Power(strength, -power // 2) for strength, power in entry.power_terms),
    )


def _poles_and_offset(entry: Record) -> tuple[tuple[Pole, ...], float]:
    make = gas_term if entry.kind == "gas" else sellmeier_term
    poles = [make(strength, place) for strength, place in entry.terms]
    offset = entry.offset
    for strength, resonance_squared in entry.pole_terms:
        pole, shift = pole_term(strength, resonance_squared)
        poles.append(pole)
        offset += shift
    return tuple(poles), offset


def _band(valid_um: tuple[float, float]) -> Band:
    shortest, longest = valid_um
    low = MICROMETRE_OMEGA / longest if np.isfinite(longest) else 0.0
    return Band(low, MICROMETRE_OMEGA / shortest if shortest > 0 else np.inf)


def _nonlinear_indices(entry: Record) -> tuple[NonlinearIndex, ...]:
    """n2 as published; that of a gas scaled to the density of the record."""
    found = []
    for printed in entry.n2:
        value = NonlinearIndex(
            value=printed.value,
            wavelength=printed.wavelength_um * 1e-6,
            source=printed.source,
            pulse=printed.pulse,
        )
        if entry.pressure_Pa and entry.temperature_K and printed.pressure_Pa and printed.temperature_K:
            here = molar_density(entry.pressure_Pa, entry.temperature_K)
            value = replace(
                value, value=printed.value * here / molar_density(printed.pressure_Pa, printed.temperature_K)
            )
        found.append(value)
    return tuple(found)


def _kelvin(entry: Record) -> float | None:
    """Temperature of the record in K: as printed, the first of a range, or that of a room."""
    if entry.temperature_K is not None:
        return entry.temperature_K
    found = re.match(r"(-?\d+(?:\.\d+)?)(?: to \S+)? (degC|K)$", entry.temperature)
    if found:
        return float(found.group(1)) + (273.15 if found.group(2) == "degC" else 0.0)
    return ROOM if entry.temperature == "room temperature" else None


def _notes(entry: Record) -> tuple[str, ...]:
    axis = {"o": "ordinary ray", "e": "extraordinary ray"}.get(
        entry.axis, f"axis {entry.axis}" if entry.axis else ""
    )
    assumed = (
        "the source does not say whether the index is against air or vacuum"
        if entry.relative_to_assumed
        else ""
    )
    return tuple(note for note in (axis, assumed, entry.note) if note)
