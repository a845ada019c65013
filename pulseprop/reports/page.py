"""One self-contained HTML page: works offline, on a phone and on paper, in light and in dark."""

from __future__ import annotations

from collections.abc import Iterable
from pathlib import Path

from pulseprop.propagation.result import Run
from pulseprop.reports.content import sections
from pulseprop.reports.document import write_text
from pulseprop.reports.drawing import Drawing
from pulseprop.reports.section_hazards import hazard_section
from pulseprop.reports.templating import placed, rendered

__all__ = ["page_html", "write_page"]

FIGURES_IN = {
    "budget": ("pulse", "budget"),
    "pulse": ("contrast", "spectrogram", "autocorrelation"),
    "autocorrelation": ("autocorrelation-measured",),
    "delays": ("spectrum",),
    "media": ("media", "susceptibility"),
}
"""Which figures stand below which section."""

ELSEWHERE = ("cautions",)
"""Sections of the text report that the page shows in full, in a place of their own."""


def page_html(run: Run, drawn: Iterable[Drawing]) -> str:
    """The page, with the figures `drawn`; what comes from the scenario is escaped, and nothing is fetched."""
    shown = [section for section in sections(run) if section.key not in ELSEWHERE]
    return rendered(
        "page.html",
        run=run,
        sections=shown,
        hazards=hazard_section(run),
        figures=placed(drawn, FIGURES_IN),
    )


def write_page(run: Run, path: str | Path, drawn: Iterable[Drawing]) -> None:
    """The page to a file, whole or not at all. Raises InputError where it cannot be written."""
    write_text(path, page_html(run, drawn))
