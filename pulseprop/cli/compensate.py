"""`pulseprop compensate`."""

from __future__ import annotations

import sys
from typing import TYPE_CHECKING

import rich_click as click

from pulseprop.cli.outputs import JSON_HELP, check_outputs

if TYPE_CHECKING:
    from pulseprop.api import Compensated

__all__ = ["compensate"]


@click.command()
@click.argument("scenario", metavar="SCENARIO.toml")
@click.option("--json", "json_path", metavar="PATH|-", help=JSON_HELP)
@click.option("--page", "page_path", metavar="FILE", help="Write designs, order and build sheet as a page.")
@click.option(
    "--figures", "figures_path", metavar="DIR", help="Write figures (PNG, SVG) and tables (CSV) for all that."
)
@click.option("--best", metavar="N", type=click.IntRange(1, 50), help="How many designs that differ in kind.")
@click.option(
    "--set",
    "overrides",
    metavar="KEY=VALUE",
    multiple=True,
    help='Override a value: compensate.target=0.9, "path.cold window.thickness=0.5 mm".',
)
def compensate(
    scenario: str,
    json_path: str | None,
    page_path: str | None,
    figures_path: str | None,
    best: int | None,
    overrides: tuple[str, ...],
) -> int:
    """Find what to set and what to buy: ranked designs with tolerances, order sheet and build sheet.

    Ranges and lists on elements of the path, and the elements in [[compensate.with]], are what may be set.
    """
    from pulseprop import api
    from pulseprop.reports.progress import Progress

    check_outputs((scenario,), json_path, (page_path,), figures_path)
    read = api.read(scenario, overrides)
    with Progress(sys.stderr) as progress:
        answer = api.compensate(read, best=best, progress=progress)
        if page_path or figures_path:
            progress("drawing figures", 0.97)
            _draw(answer, page_path, figures_path)
    _tell(answer, json_path)
    return answer.exit_code


def _draw(answer: Compensated, page: str | None, figures: str | None) -> None:
    from pulseprop.reports.compensate_files import write_compensate_files
    from pulseprop.reports.compensate_page import write_compensate_page
    from pulseprop.reports.draw_compensate import compensation_drawings

    drawn = list(compensation_drawings(answer.compensation, answer.run))
    if page:
        write_compensate_page(answer.compensation, answer.run, drawn, page)
    if figures:
        write_compensate_files(answer.compensation, answer.run, drawn, figures)


def _tell(answer: Compensated, json_path: str | None) -> None:
    """The report on standard output; warnings and cautions on standard error, unless both are one screen."""
    from pulseprop.cli.asides import tell_asides
    from pulseprop.reports.compensate_text import compensate_text
    from pulseprop.reports.document import write_json

    if json_path is not None:
        write_json(json_path, answer.as_json())
    else:
        click.echo(compensate_text(answer.compensation, answer.run), nl=False)
    tell_asides(answer.run, shown=json_path is None)
