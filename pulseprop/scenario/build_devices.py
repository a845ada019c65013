"""What builders say of every device alike."""

from __future__ import annotations

from typing import TypedDict

from pulseprop.scenario.build_site import Site
from pulseprop.scenario.schema_element import ElementTable

__all__ = ["Shared", "shared"]


class Shared(TypedDict):
    """Fields of `elements.device.Device`."""

    name: str
    centre: float
    beam_radius: float | None
    temperature_K: float | None


def shared(table: ElementTable, site: Site) -> Shared:
    """Name, centre, beam and temperature; the beam is the pulse's where the element has none of its own."""
    return Shared(
        name=site.name_of(table, table.kind),
        centre=site.centre,
        beam_radius=table.beam_radius or site.beam_radius,
        temperature_K=table.temperature,
    )
