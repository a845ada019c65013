"""One self-contained HTML page: works offline, on a phone and on paper, in light and in dark."""

from __future__ import annotations

import re
from collections.abc import Iterable
from pathlib import Path
from typing import TYPE_CHECKING

from pulseprop.propagation.result import Run
from pulseprop.reports.blocks import Table, padded_rows
from pulseprop.reports.content import sections
from pulseprop.reports.document import write_text
from pulseprop.reports.drawing import Drawing
from pulseprop.reports.figure_style import inline_svg
from pulseprop.reports.section_hazards import hazard_section

if TYPE_CHECKING:
    from markupsafe import Markup

__all__ = ["page_html", "write_page"]

FIGURES_IN = {
    "budget": ("pulse", "budget"),
    "pulse": ("contrast", "spectrogram", "autocorrelation"),
    "autocorrelation": ("autocorrelation-measured",),
    "delays": ("spectrum",),
    "media": ("media", "susceptibility"),
}
"""Which figures stand below which section."""

FIGURE_SPACE = "\u2007"
"""A space as wide as a digit."""

ELSEWHERE = ("cautions",)
"""Sections of the text report that the page shows in full, in a place of their own."""


def page_html(run: Run, drawn: Iterable[Drawing]) -> str:
    """The page, with the figures `drawn`; what comes from the scenario is escaped, and nothing is fetched."""
    from jinja2 import Environment, PackageLoader, StrictUndefined

    environment = Environment(
        loader=PackageLoader("pulseprop.reports", "templates"),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
    )
    environment.filters["powers"] = _powers
    environment.globals["lined_up"] = _lined_up
    figures = {
        drawing.name: (drawing.caption, _trusted(inline_svg(drawing.svg, drawing.name))) for drawing in drawn
    }
    shown = [section for section in sections(run) if section.key not in ELSEWHERE]
    return environment.get_template("page.html").render(
        run=run,
        sections=shown,
        hazards=hazard_section(run),
        figures={
            key: [(name, *figures[name]) for name in names if name in figures]
            for key, names in FIGURES_IN.items()
        },
    )


def write_page(run: Run, path: str | Path, drawn: Iterable[Drawing]) -> None:
    """The page to a file, whole or not at all. Raises InputError where it cannot be written."""
    write_text(path, page_html(run, drawn))


def _lined_up(table: Table) -> tuple[list[tuple[str, ...]], list[tuple[str, ...]]]:
    """Rows and footer of a table, numbers padded with spaces as wide as a digit."""
    rows = padded_rows(table, FIGURE_SPACE)
    return rows[: len(table.rows)], rows[len(table.rows) :]


def _trusted(markup: str) -> Markup:
    """Markup of our own making, in which the drawing library has escaped all text."""
    from markupsafe import Markup

    return Markup(markup)


def _powers(text: str) -> Markup:
    """Escaped text with fs^2 set as a power, and no line broken between a number and its per cent."""
    from markupsafe import Markup, escape

    text = str(escape(text)).replace(" %", "\u00a0%")
    return Markup(re.sub(r"\^(-?[0-9]+|\(-?[0-9/]+\))", r"<sup>\1</sup>", text))
