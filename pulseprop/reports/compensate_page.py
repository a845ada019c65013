"""The page of a compensation: designs, order sheet and build sheet, to be taken to the bench."""

from __future__ import annotations

from collections.abc import Iterable
from pathlib import Path

from pulseprop.compensation.result import Compensation
from pulseprop.propagation.result import Run
from pulseprop.reports.compensate_text import sheet_sections
from pulseprop.reports.document import write_text
from pulseprop.reports.drawing import Drawing
from pulseprop.reports.section_compensate import compensation_headline
from pulseprop.reports.section_hazards import hazard_section
from pulseprop.reports.templating import placed, rendered

__all__ = ["compensate_page_html", "write_compensate_page"]

FIGURES_IN = {
    "designs": ("compensated",),
    "design-1": ("residual-phase",),
    "order": ("mirror-order",),
    "build": ("budget", "autocorrelation"),
}
"""Which figures stand below which section; each further mirror to be ordered has one of its own."""


def compensate_page_html(answer: Compensation, run: Run, drawn: Iterable[Drawing]) -> str:
    """The page; run: the best design, sent in full."""
    return rendered(
        "compensate.html",
        run=run,
        headline=compensation_headline(answer),
        sections=sheet_sections(answer, run),
        hazards=hazard_section(run),
        figures=placed(drawn, FIGURES_IN),
    )


def write_compensate_page(answer: Compensation, run: Run, drawn: Iterable[Drawing], path: str | Path) -> None:
    """The page to a file, whole or not at all. Raises InputError where it cannot be written."""
    write_text(path, compensate_page_html(answer, run, drawn))
