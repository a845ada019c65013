"""`pulseprop send`."""

from __future__ import annotations

import sys
from typing import TYPE_CHECKING

import rich_click as click

from pulseprop.cli.outputs import JSON_HELP, check_outputs

if TYPE_CHECKING:
    from pulseprop.material.medium import Medium
    from pulseprop.propagation.result import Run
    from pulseprop.scenario.read import Scenario

__all__ = ["send"]


@click.command()
@click.argument("scenario", metavar="SCENARIO.toml")
@click.option("--json", "json_path", metavar="PATH|-", help=JSON_HELP)
@click.option("--save", "save_path", metavar="RESULT.nc", help="Write fields and spectra as NetCDF.")
@click.option("--page", "page_path", metavar="REPORT.html", help="Write a self-contained page.")
@click.option(
    "--figures", "figures_path", metavar="DIR", help="Write figures (PNG, SVG) with their numbers (CSV)."
)
@click.option(
    "--set",
    "overrides",
    metavar="KEY=VALUE",
    multiple=True,
    help='Override a value: pulse.duration="20 fs", "path.cold window.thickness=0.5 mm".',
)
def send(
    scenario: str,
    json_path: str | None,
    save_path: str | None,
    page_path: str | None,
    figures_path: str | None,
    overrides: tuple[str, ...],
) -> int:
    """Send the pulse of a scenario through its path, and report what arrives."""
    from pulseprop import api
    from pulseprop.reports.progress import Progress

    check_outputs((scenario,), json_path, (save_path, page_path), figures_path)
    read = api.read(scenario, overrides)
    with Progress(sys.stderr) as progress:
        run = api.send(read, progress=progress)
        if save_path:
            progress("saving fields", 0.96)
            _save(run, save_path)
        if page_path or figures_path:
            progress("drawing figures", 0.97)
            _draw(run, read, page_path, figures_path)
    _answer(run, json_path)
    return run.exit_code


def _save(run: Run, path: str) -> None:
    from pulseprop.reports.dataset import save_dataset

    save_dataset(run, path)


def _draw(run: Run, scenario: Scenario, page: str | None, figures: str | None) -> None:
    from pulseprop.reports.figures import drawings, write_figures

    drawn = list(drawings(run, _media(run, scenario)))
    if page:
        from pulseprop.reports.page import write_page

        write_page(run, page, drawn)
    if figures:
        write_figures(drawn, figures)


def _media(run: Run, scenario: Scenario) -> tuple[Medium, ...]:
    """The media of the path; what else the scenario holds is not built again."""
    from math import pi

    from pulseprop.propagation.numerals import terahertz
    from pulseprop.scenario.build import media_of
    from pulseprop.scenario.build_path import built_path

    centre = 2e12 * pi * terahertz(run.pulse_in.centre_nm)
    return built_path(scenario, media_of(scenario), centre).media


def _answer(run: Run, json_path: str | None) -> None:
    """The report on standard output; warnings and cautions on standard error, unless both are one screen."""
    from pulseprop.cli.asides import tell_asides
    from pulseprop.reports.document import write_json
    from pulseprop.reports.text import text_report

    if json_path is not None:
        write_json(json_path, run.as_json())
    else:
        click.echo(text_report(run), nl=False)
    tell_asides(run, shown=json_path is None)
