"""Lenses, waveplates, wedge pairs, gas cells and repeated elements."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

import numpy as np

from pulseprop.elements.element import Element
from pulseprop.elements.gas_cell import GasCell
from pulseprop.elements.group import Group
from pulseprop.elements.lens import Lens
from pulseprop.elements.slab import Slab
from pulseprop.elements.waveplate import Waveplate
from pulseprop.elements.wedge_pair import WedgePair, glass_at
from pulseprop.elements.words import in_unit
from pulseprop.errors import InputError, PulsepropError
from pulseprop.material.crystal_axes import both_axes
from pulseprop.material.gases import gas_at
from pulseprop.material.medium import Medium
from pulseprop.scenario.build_site import Site, length_words
from pulseprop.scenario.schema_optics import (
    FacedTable,
    GasCellTable,
    LensTable,
    PlateTable,
    StackTable,
    WaveplateTable,
    WedgePairTable,
)

__all__ = ["gas_cell", "lens", "repeated", "waveplate", "wedge_pair"]


def lens(table: LensTable, site: Site) -> Lens:
    """A lens of one or more glasses."""
    name = site.name_of(table, "lens")
    media = [site.medium(glass.medium, "glasses", i, "medium") for i, glass in enumerate(table.glasses)]
    thicknesses = [glass.centre_thickness for glass in table.glasses]
    return Lens(
        name=name,
        kind=table.kind,
        parts=_stack(table, name, media, thicknesses),
        detail=_listed(media, thicknesses),
        beam_radius=table.beam_radius,
        centre=site.centre,
        focal_length=table.focal_length,
        focal_lengths=tuple(glass.focal_length for glass in table.glasses),
        marginal_radius=table.beam_radius or site.beam_radius,
    )


def waveplate(table: WaveplateTable, site: Site) -> Waveplate:
    """A waveplate: its plates as the pulse sees them, and as light of the other polarisation does."""
    name = site.name_of(table, "waveplate")
    pairs = [_both_media(plate, site, i) for i, plate in enumerate(table.plates)]
    thicknesses = [plate.thickness for plate in table.plates]
    seen = [plate.crossed != (table.axis == "extraordinary") for plate in table.plates]
    media = [pair[extraordinary] for pair, extraordinary in zip(pairs, seen, strict=True)]
    others = [pair[not extraordinary] for pair, extraordinary in zip(pairs, seen, strict=True)]
    other = Group(name=name, kind=table.kind, parts=_stack(table, name, others, thicknesses))
    return Waveplate(
        name=name,
        kind=table.kind,
        parts=_stack(table, name, media, thicknesses),
        detail=_listed(media, thicknesses),
        beam_radius=table.beam_radius,
        centre=site.centre,
        axis=table.axis,
        other=other,
    )


def _both_media(plate: PlateTable, site: Site, index: int) -> tuple[Medium, Medium]:
    """The media along the ordinary and the extraordinary axis."""
    at = ("plates", index)
    if plate.medium is None:
        found = [site.medium(plate.model_dump()[key], *at, key) for key in ("ordinary", "extraordinary")]
        return found[0], found[1]
    try:
        ordinary, extraordinary = both_axes(plate.medium)
    except InputError as error:
        raise site.blamed(error, *at, "medium") from None
    return site.medium(ordinary, *at, "medium"), site.medium(extraordinary, *at, "medium")


def _stack(
    table: StackTable, name: str, media: Sequence[Medium], thicknesses: Sequence[float]
) -> tuple[Slab, ...]:
    """A slab for each medium; where they are cemented, the first carries what both outer faces reflect."""
    return tuple(
        _slab(table, label, medium, thickness, faced=table.air_spaced or index == 0)
        for index, (label, medium, thickness) in enumerate(
            zip(_labels(name, media), media, thicknesses, strict=True)
        )
    )


def _labels(name: str, media: Sequence[Medium]) -> list[str]:
    """A name of its own for each part: that of the element and the medium, numbered where they repeat."""
    labels: list[str] = []
    for medium in media:
        plain = f"{name}: {medium.name}"
        before = sum(label == plain or label.startswith(f"{plain} (") for label in labels)
        labels.append(f"{plain} ({before + 1})" if before else plain)
    return labels


def _slab(table: FacedTable, name: str, medium: Medium, thickness: float, *, faced: bool) -> Slab:
    stated = table.reflectance is not None
    return Slab(
        name=name,
        medium=medium,
        thickness=thickness,
        faces=("reflectance" if stated else table.faces) if faced else "ideal",
        reflectance=(table.reflectance or 0.0) if faced else 0.0,
        beam_radius=table.beam_radius,
        temperature_K=table.temperature,
        detail=f"{length_words(thickness)} {medium.name}",
    )


def _listed(media: Sequence[Medium], thicknesses: Sequence[float]) -> str:
    return ", ".join(
        f"{length_words(thickness)} {medium.name}"
        for medium, thickness in zip(media, thicknesses, strict=True)
    )


def wedge_pair(table: WedgePairTable, site: Site) -> WedgePair:
    """Two wedges at a setting."""
    medium = site.medium(table.medium)
    angle = table.angle
    if isinstance(angle, str):
        angle = float(np.arctan(np.real(medium.index(np.array(site.centre)))))
    stated = table.reflectance is not None
    glass = _glass(table)
    return WedgePair(
        name=site.name_of(table, table.kind),
        medium=medium,
        glass=glass,
        centre=site.centre,
        angle=angle,
        polarisation=table.polarisation,
        faces="reflectance" if stated else table.faces,
        reflectance=table.reflectance or 0.0,
        apex_angle=table.apex_angle,
        beam_radius=table.beam_radius or site.beam_radius,
        temperature_K=table.temperature,
        detail=f"{in_unit(glass, 'mm')} {medium.name}",
    )


def _glass(table: WedgePairTable) -> float:
    if table.insertion is None or table.apex_angle is None:
        return table.glass or 0.0
    return glass_at(table.base, table.insertion, table.apex_angle, table.moved)


def gas_cell(table: GasCellTable, site: Site) -> GasCell:
    """Gas between two windows."""
    assert table.temperature is not None
    name = site.name_of(table, table.kind)
    try:
        gas = gas_at(table.gas, table.pressure, table.temperature, table.humidity)
    except InputError as error:
        raise site.blamed(error, "gas") from None
    windows = [site.medium(one.medium, "windows", i, "medium") for i, one in enumerate(table.windows)]
    media = [*windows[:1], gas, *windows[1:]]
    thicknesses = [*(one.thickness for one in table.windows[:1]), table.length]
    thicknesses += [one.thickness for one in table.windows[1:]]
    labels = _labels(name, media)
    parts = [
        _slab(table, label, medium, thickness, faced=medium is not gas)
        for label, medium, thickness in zip(labels, media, thicknesses, strict=True)
    ]
    return GasCell(
        name=name,
        kind=table.kind,
        parts=tuple(parts),
        detail=_listed(media, thicknesses),
        beam_radius=table.beam_radius,
        gas=table.gas,
        pressure=table.pressure,
        temperature=table.temperature,
    )


def repeated(table: Any, site: Site, build: Callable[[Any, Site], Element]) -> Group:
    """Elements that the beam goes through several times; build: makes one of any kind."""
    parts = []
    for index, inner in enumerate(table.inner):
        place = site.inner(table.inner_key, index)
        try:
            parts.append(build(inner, place))
        except PulsepropError as error:
            raise place.blamed(error) from None
    return Group(
        name=site.name_of(table, table.kind),
        kind=table.kind,
        parts=tuple(parts),
        times=table.times,
        detail=f"{table.times} times {', '.join(part.name for part in parts)}",
        beam_radius=table.beam_radius,
    )
