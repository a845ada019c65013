"""Mirrors and coatings."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from numpy import asarray

from pulseprop.elements.chirped_mirror import ChirpedMirror
from pulseprop.elements.coating import Coating, Film
from pulseprop.elements.gires_tournois import GiresTournois
from pulseprop.elements.mirror_curves import Bounce, OrdersOfBounce, Ripple, TableOfBounce
from pulseprop.errors import InputError
from pulseprop.material.wavelength_in_air import omegas_of_air_wavelengths
from pulseprop.scenario.build_devices import shared
from pulseprop.scenario.build_site import Site
from pulseprop.scenario.columns import spectral_columns
from pulseprop.scenario.schema_mirrors import (
    KINDS_OF_Y,
    BounceTable,
    ChirpedMirrorTable,
    CoatingTable,
    FilmTable,
    GiresTournoisTable,
    MirrorFile,
    RippleTable,
)
from pulseprop.units import to_si

__all__ = ["chirped_mirror", "coating", "gires_tournois"]


def chirped_mirror(table: ChirpedMirrorTable, site: Site) -> ChirpedMirror:
    """A chirped mirror, or a pair of them in turn."""
    described: Sequence[BounceTable | ChirpedMirrorTable] = [table] if table.pair is None else table.pair
    return ChirpedMirror(
        **shared(table, site),
        mirrors=tuple(_bounce(one, site) for one in described),
        bounces=table.bounces,
        reflectance=table.reflectance,
    )


def _bounce(table: BounceTable | ChirpedMirrorTable, site: Site) -> Bounce:
    if table.table is not None:
        return _tabulated(table.table, site)
    return OrdersOfBounce(
        centre=site.centre, gdd=table.gdd, tod=table.tod, fod=table.fod, ripple=_ripple(table.ripple)
    )


def _ripple(table: RippleTable | None) -> Ripple | None:
    if table is None:
        return None
    # A period of P in Hz is one turn in 2 pi P of angular frequency: P rad/s for each radian of the swing.
    return Ripple(amplitude=table.amplitude, period=table.period, phase=table.phase)


def _tabulated(spec: MirrorFile, site: Site) -> TableOfBounce:
    columns = spectral_columns(site.scenario.path_of(spec.file), spec)
    omega = omegas_of_air_wavelengths(columns.x) if spec.wavelength_in == "air" else columns.x
    values = spec.phase_sign * asarray(to_si(columns.y, spec.unit_of_y, KINDS_OF_Y[spec.y]), dtype=float)
    try:
        return TableOfBounce(omega=omega, values=values, quantity=spec.y)
    except InputError as error:
        raise error.located(file=columns.table.file) from None


def coating(table: CoatingTable, site: Site) -> Coating:
    """Films on a substrate."""
    return Coating(
        **shared(table, site),
        films=tuple(_films(table.films, site)),
        substrate=None if table.substrate is None else site.medium(table.substrate, "substrate"),
        incidence=table.incidence,
        polarisation=table.polarisation or "s",
        side=table.side,
        bounces=table.bounces,
    )


def _films(tables: Sequence[FilmTable], site: Site) -> Iterator[Film]:
    """One by one, those that repeat written out."""
    for table in tables:
        if table.films is not None:
            yield from list(_films(table.films, site)) * (table.times or 1)
        elif table.medium is not None:
            yield Film(site.medium(table.medium, "films"), table.thickness or 0.0)


def gires_tournois(table: GiresTournoisTable, site: Site) -> GiresTournois:
    """A Gires-Tournois mirror."""
    return GiresTournois(
        **shared(table, site),
        medium=site.medium(table.medium),
        thickness=table.thickness,
        front=table.front,
        back=table.back,
        incidence=table.incidence,
        bounces=table.bounces,
    )
