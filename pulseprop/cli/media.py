"""`pulseprop media`."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

import rich_click as click

from pulseprop.cli.outputs import DONE, JSON_HELP

if TYPE_CHECKING:
    from pulseprop.api import MediumReport

__all__ = ["media"]


@click.command()
@click.argument("names", metavar="[NAME | SCENARIO.toml:NAME]...", nargs=-1)
@click.option(
    "--at", "places", metavar="WAVELENGTH", multiple=True, help='Where to give orders, such as "800 nm".'
)
@click.option("--json", "json_path", metavar="PATH|-", help=JSON_HELP)
@click.option("--figure", "figure_path", metavar="FILE", help="Draw index, GVD and absorption; .png or .svg.")
def media(
    names: tuple[str, ...], places: tuple[str, ...], json_path: str | None, figure_path: str | None
) -> int:
    """Show media: source, range, and orders at wavelengths. Without a name, list the catalogue.

    With --json one name gives an object, several names a list of such objects in their order, no name the
    list of the catalogue; humid air, which is nothing without its state, is left out of that list.
    """
    from pulseprop import api
    from pulseprop.reports.document import check_target, write_json
    from pulseprop.reports.media_text import catalogue_text, media_text

    if json_path is not None:
        check_target(json_path)
    if not names and (places or figure_path):
        raise click.UsageError("--at and --figure need the name of a medium")
    found, stateless = (api.media(names, places), ()) if names else _catalogue()
    if figure_path:
        _draw_media(names, found, figure_path)
    if json_path is not None:
        documents = [medium.as_json() for medium in found]
        write_json(json_path, documents[0] if len(names) == 1 else documents)
    else:
        click.echo(media_text(found) if names else catalogue_text(found, stateless), nl=False)
    return DONE


def _catalogue() -> tuple[tuple[MediumReport, ...], tuple[str, ...]]:
    """Every record that stands by itself, and the names of those that need a state (humid air)."""
    from pulseprop import api
    from pulseprop.errors import InputError

    found: list[MediumReport] = []
    stateless: list[str] = []
    for name in api.catalogue():
        try:
            found += api.media([name])
        except InputError:
            stateless.append(name)
    return tuple(found), tuple(stateless)


def _draw_media(names: tuple[str, ...], found: Sequence[MediumReport], path: str) -> None:
    """Curves over the wavelengths asked for, or over the range that all the media share in part."""
    from pulseprop import api
    from pulseprop.errors import InputError
    from pulseprop.reports.document import check_target
    from pulseprop.reports.draw_media import draw_media
    from pulseprop.reports.figures import write_figure
    from pulseprop.reports.media_curves import index_curves

    check_target(path)
    places = [row.wavelength_nm for row in found[0].at]
    ranges = [medium.valid_nm for medium in found if medium.valid_nm is not None]
    edges = places if len(set(places)) > 1 else [edge for valid in ranges for edge in valid]
    if not edges:
        raise InputError(
            "the range to draw is not known",
            value=", ".join(names),
            allowed="two wavelengths or more",
            remedy="Give the ends of the range with --at, twice",
        )
    curves = index_curves([api.medium(name) for name in names], min(edges), max(edges))
    source = "; ".join(f"{medium.name}: {medium.source}" for medium in found)[:150]
    write_figure(draw_media(curves, source), path)
