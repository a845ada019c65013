"""Pairs of gratings, prisms and grisms."""

from __future__ import annotations

from pulseprop.elements.gratings import GratingPair
from pulseprop.elements.grisms import GrismPair
from pulseprop.elements.prisms import PrismPair
from pulseprop.scenario.build_devices import shared
from pulseprop.scenario.build_site import Site
from pulseprop.scenario.schema_compressors import GrismPairTable, GroovesTable, PrismPairTable

__all__ = ["grating_pair", "grism_pair", "prism_pair"]


def grating_pair(table: GroovesTable, site: Site) -> GratingPair:
    """A grating pair or a stretcher, as its kind says."""
    return GratingPair(
        **shared(table, site),
        grooves=table.grooves,
        incidence=table.incidence,
        separation=table.separation,
        order=table.order,
        passes=table.passes,
        efficiency=table.efficiency,
        width=table.width,
        stretches=table.kind == "stretcher",
    )


def prism_pair(table: PrismPairTable, site: Site) -> PrismPair:
    """A prism pair."""
    return PrismPair(
        **shared(table, site),
        medium=site.medium(table.medium),
        apex_separation=table.apex_separation,
        insertion=table.insertion,
        second_insertion=table.second_insertion,
        apex_angle=table.apex_angle,
        passes=table.passes,
        faces=table.faces,
        polarisation=table.polarisation,
    )


def grism_pair(table: GrismPairTable, site: Site) -> GrismPair:
    """A grism pair."""
    return GrismPair(
        **shared(table, site),
        medium=site.medium(table.medium),
        grooves=table.grooves,
        apex_angle=table.apex_angle,
        incidence=table.incidence,
        separation=table.separation,
        insertion=table.insertion,
        second_insertion=table.second_insertion,
        order=table.order,
        passes=table.passes,
        efficiency=table.efficiency,
        width=table.width,
    )
