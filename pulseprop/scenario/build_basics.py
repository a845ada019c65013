"""Slabs, losses, and devices of which only orders are known."""

from __future__ import annotations

from pulseprop.elements.phase_orders import Loss, PhaseOrders
from pulseprop.elements.slab import Slab
from pulseprop.scenario.build_site import Site, length_words
from pulseprop.scenario.schema_path import KnownOrdersTable, LossTable, SlabTable

__all__ = ["known_orders", "loss", "slab"]


def slab(table: SlabTable, site: Site) -> Slab:
    """A plane slab."""
    medium = site.medium(table.medium)
    stated = table.reflectance is not None
    return Slab(
        name=site.name_of(table, table.medium),
        medium=medium,
        thickness=table.thickness,
        angle=table.angle,
        polarisation=table.polarisation,
        faces="reflectance" if stated else table.faces,
        reflectance=table.reflectance or 0.0,
        beam_radius=table.beam_radius,
        temperature_K=table.temperature,
        detail=f"{length_words(table.thickness)} {medium.name}",
    )


def loss(table: LossTable, site: Site) -> Loss:
    """A loss that is the same at all frequencies."""
    return Loss(
        name=site.name_of(table, "loss"),
        transmittance=table.transmittance,
        beam_radius=table.beam_radius,
        detail=f"{100 * table.transmittance:.4g} % transmitted",
    )


def known_orders(table: KnownOrdersTable, site: Site) -> PhaseOrders:
    """A device of which only orders are known."""
    return PhaseOrders(
        name=site.name_of(table, table.kind),
        centre=site.centre,
        group_delay=table.group_delay,
        gdd=table.gdd,
        tod=table.tod,
        fod=table.fod,
        transmittance=table.transmittance,
        beam_radius=table.beam_radius,
        detail="phase only",
    )
