"""The path of a scenario, element by element, with places in every complaint."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial

from pulseprop.elements.element import Element
from pulseprop.elements.path import Path
from pulseprop.elements.phase_orders import Loss, PhaseOrders
from pulseprop.elements.slab import Slab
from pulseprop.errors import PulsepropError
from pulseprop.material.medium import Medium
from pulseprop.scenario.build_medium import MediaOfScenario
from pulseprop.scenario.read import Scenario
from pulseprop.scenario.schema_path import Element as ElementTable
from pulseprop.scenario.schema_path import KnownOrdersTable, LossTable, SlabTable

__all__ = ["built_path"]

SCALES = ((1.0, 1.0, "m"), (1e-4, 1e-3, "mm"), (1e-6, 1e-6, "um"), (0.0, 1e-9, "nm"))
"""From which length on, in m, a unit is used, and its size."""


def built_path(scenario: Scenario, media: MediaOfScenario, centre: float) -> Path:
    """Elements in order; centre: of the pulse, rad/s, about which known orders are counted."""
    elements = []
    for number, table in enumerate(scenario.content.path, start=1):
        try:
            elements.append(_built(table, number, partial(_medium, scenario, media, number), centre))
        except PulsepropError as error:
            raise scenario.blamed(error, "path", number - 1) from None
    return Path(tuple(elements))


def _medium(scenario: Scenario, media: MediaOfScenario, number: int, name: str) -> Medium:
    try:
        return media.medium(name)
    except PulsepropError as error:
        raise scenario.blamed(error, "path", number - 1, "medium") from None


def _built(table: ElementTable, number: int, medium: Callable[[str], Medium], centre: float) -> Element:
    if isinstance(table, SlabTable):
        return _slab(table, number, medium(table.medium))
    if isinstance(table, LossTable):
        share = f"{100 * table.transmittance:.4g} % transmitted"
        return Loss(
            name=table.name or f"loss {number}",
            transmittance=table.transmittance,
            beam_radius=table.beam_radius,
            detail=share,
        )
    known = table if isinstance(table, KnownOrdersTable) else None
    return PhaseOrders(
        name=table.name or f"{table.kind} {number}",
        kind=table.kind,
        centre=centre,
        group_delay=known.group_delay if known else 0.0,
        gdd=table.gdd,
        tod=table.tod,
        fod=table.fod,
        transmittance=known.transmittance if known else 1.0,
        beam_radius=table.beam_radius,
        detail="phase only",
    )


def _slab(table: SlabTable, number: int, medium: Medium) -> Slab:
    stated = table.reflectance is not None
    return Slab(
        name=table.name or f"{table.medium} {number}",
        medium=medium,
        thickness=table.thickness,
        angle=table.angle,
        polarisation=table.polarisation,
        faces="reflectance" if stated else table.faces,
        reflectance=table.reflectance or 0.0,
        beam_radius=table.beam_radius,
        temperature_K=table.temperature,
        detail=f"{_length(table.thickness)} {medium.name}",
    )


def _length(metres: float) -> str:
    size, unit = next((size, unit) for least, size, unit in SCALES if metres >= least)
    return f"{metres / size:.4g} {unit}"
