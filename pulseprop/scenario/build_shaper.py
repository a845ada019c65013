"""Pulse shapers."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.mirror_curves import OrdersOfBounce, TableOfBounce
from pulseprop.elements.pixels import Pixels
from pulseprop.elements.shaper import Shaper, Transmission
from pulseprop.elements.words import nanometres
from pulseprop.errors import InputError
from pulseprop.material.response import Band
from pulseprop.material.wavelength_in_air import omegas_of_air_wavelengths
from pulseprop.scenario.build_site import Site
from pulseprop.scenario.columns import Columns, spectral_columns
from pulseprop.scenario.schema_shaper import ShaperFile, ShaperTable
from pulseprop.units import to_si

__all__ = ["shaper"]

Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True)
class Curves:
    """What a table asks of the mask, and between which ends, rad/s."""

    band: Band | None = None
    phase: TableOfBounce | None = None
    transmission: Transmission | None = None


def shaper(table: ShaperTable, site: Site) -> Shaper:
    """A pulse shaper: orders, a table, pixels."""
    curves = Curves() if table.table is None else _curves(table.table, site)
    band = curves.band if table.range is None else Band(*table.range)
    return Shaper(
        name=site.name_of(table, table.kind),
        centre=site.centre,
        orders=OrdersOfBounce(centre=site.centre, gdd=table.gdd, tod=table.tod, fod=table.fod),
        table=curves.phase,
        transmission=curves.transmission,
        transmittance=table.transmittance,
        range=band,
        pixels=_pixels(table, band),
        largest_step=np.pi if table.limit is None else table.limit,
        beam_radius=table.beam_radius,
        temperature_K=table.temperature,
        detail=_detail(table, band),
    )


def _pixels(table: ShaperTable, band: Band | None) -> Pixels | None:
    if table.pixels is None or band is None:
        return None
    return Pixels(count=table.pixels, band=band, spacing=table.pixels_in, spot=table.spot)


def _detail(table: ShaperTable, band: Band | None) -> str:
    said = ["phase only"]
    if table.pixels is not None:
        said.append(f"{table.pixels} pixels")
    if band is not None:
        said.append(f"{nanometres(band.high, 4)} to {nanometres(band.low, 4)}")
    return ", ".join(said)


def _curves(spec: ShaperFile, site: Site) -> Curves:
    columns = spectral_columns(site.scenario.path_of(spec.file), spec)
    omega = omegas_of_air_wavelengths(columns.x) if spec.wavelength_in == "air" else columns.x
    phase, transmission = _column(columns, spec, "phase"), _column(columns, spec, "transmission")
    try:
        return Curves(
            band=Band(float(omega[0]), float(omega[-1])),
            phase=None if phase is None else _phase(omega, phase, spec),
            transmission=None if transmission is None else _transmission(omega, transmission, spec),
        )
    except InputError as error:
        raise error.located(file=columns.table.file) from None


def _column(columns: Columns, spec: ShaperFile, quantity: str) -> Real | None:
    """The values as printed; None where the table has none of them."""
    if spec.y == quantity:
        return columns.y
    named = spec.phase if quantity == "phase" else spec.transmission
    return None if named is None else columns.table.column(named)


def _phase(omega: Real, printed: Real, spec: ShaperFile) -> TableOfBounce:
    values = spec.phase_sign * np.asarray(to_si(printed, spec.phase_unit, "phase"), dtype=float)
    return TableOfBounce(omega=omega, values=values, quantity="phase")


def _transmission(omega: Real, printed: Real, spec: ShaperFile) -> Transmission:
    return Transmission(omega=omega, share=printed / 100 if spec.transmission_unit == "%" else printed)
