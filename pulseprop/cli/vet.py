"""`pulseprop vet`."""

from __future__ import annotations

import sys
from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

import rich_click as click

from pulseprop.cli.outputs import JSON_HELP, check_outputs

if TYPE_CHECKING:
    from pulseprop.vetting.result import Vetted

__all__ = ["vet"]

DRAWING = 0.95
"""Share of the work behind when figures are drawn."""


@click.command()
@click.argument("tables", metavar="TABLE...", nargs=-1, required=True)
@click.option(
    "--columns",
    metavar="NAMES",
    help='The columns in their order: "wavelength,n,k"; "-" leaves one out, "alpha/cm^-1" has a unit.',
)
@click.option("--unit", metavar="UNIT", help="Unit of the spectral axis: nm, um, cm^-1, THz, eV.")
@click.option(
    "--uncertainty", metavar="LIST", help='Stated uncertainties: "n=1e-4,k=2%". Verdicts are against them.'
)
@click.option(
    "--relative-to", type=click.Choice(["air", "vacuum"]), help="What the printed index is against."
)
@click.option(
    "--wavelength-in", type=click.Choice(["air", "vacuum"]), help="What printed wavelengths are measured in."
)
@click.option("--thickness", metavar="LENGTH", help="Of the sample, for absorbance and transmittance.")
@click.option("--at", metavar="WAVELENGTH", multiple=True, help="Where to guarantee index, group index, GVD.")
@click.option(
    "--require",
    metavar="TEXT",
    multiple=True,
    help='A requirement: "gvd at 800 nm = 36.2 +- 0.5 fs^2/mm".',
)
@click.option("--medium", metavar="NAME", help="A medium of the catalogue that the table claims to be.")
@click.option(
    "--anchor",
    metavar="TEXT",
    multiple=True,
    help='A known index: "1.5230 +- 0.0002 at 589.3 nm".',
)
@click.option("--transparent", metavar="RANGE", help='No absorption there: "300 nm to 2.5 um".')
@click.option("--composition", metavar="FORMULA", help='With --density: limits all absorption, "SiO2".')
@click.option("--density", metavar="DENSITY", help='With --composition: "2.2 g/cm^3".')
@click.option("--ceiling", metavar="NUMBER", type=float, help="Absorbance above which rows are lower limits.")
@click.option("--resolution", metavar="WIDTH", help='Of the instrument: "2 nm", "1 cm^-1".')
@click.option("--angle", metavar="ANGLE", help="Of incidence, for a mirror.")
@click.option("--polarisation", type=click.Choice(["p", "s"]), help="For a mirror.")
@click.option("--strict", is_flag=True, help='Exit code 1 also for "doubtful".')
@click.option("--json", "json_path", metavar="PATH|-", help=JSON_HELP)
@click.option("--page", "page_path", metavar="FILE", help="Write one self-contained page for the supplier.")
@click.option(
    "--figures", "figures_path", metavar="DIR", help="Write figures (PNG, SVG) with their numbers (CSV)."
)
def vet(
    tables: tuple[str, ...],
    json_path: str | None,
    page_path: str | None,
    figures_path: str | None,
    strict: bool,
    **options: Any,
) -> int:
    """Vet vendor data: can the numbers be true, what do they guarantee, do they meet requirements?

    TABLE: text, xlsx or JCAMP-DX with a spectrum of n, k, absorption or of a mirror; or TOML with a formula
    or the numbers of a certificate. What is not stated is found out, and told first.

    With --json one table gives an object, several an object with the list "tables" and the worst "verdict".
    """
    from pulseprop import api
    from pulseprop.reports.document import write_json
    from pulseprop.reports.progress import Progress

    check_outputs(tables, json_path, (page_path,), figures_path)
    with Progress(sys.stderr) as progress:
        answers = api.vet(tables, progress=progress, strict=strict, **options)
        if page_path or figures_path:
            progress("drawing figures", DRAWING)
            _draw(answers, page_path, figures_path)
    if json_path is not None:
        write_json(json_path, api.vet_document(answers))
    else:
        from pulseprop.reports.vet_text import vet_text

        click.echo(vet_text(answers), nl=False)
    return max(answer.exit_code(strict) for answer in answers)


def _draw(answers: Sequence[Vetted], page: str | None, figures: str | None) -> None:
    from pulseprop.reports.draw_vet import vet_drawings

    drawn = vet_drawings(answers)
    if page:
        from pulseprop.reports.vet_page import write_vet_page

        write_vet_page(answers, drawn, page)
    if figures:
        from pulseprop.reports.figures import write_figures

        write_figures(drawn.values(), figures)
