"""What `compensate` prints: the answer first, then designs, order sheet and build sheet."""

from __future__ import annotations

from pulseprop.compensation.result import Compensation
from pulseprop.propagation.result import Run
from pulseprop.reports.blocks import Paragraph, Section
from pulseprop.reports.section_build import build_section
from pulseprop.reports.section_compensate import (
    compensation_headline,
    overview_section,
    remainder_section,
    search_section,
)
from pulseprop.reports.section_design import design_section
from pulseprop.reports.section_order import order_section
from pulseprop.reports.section_sources import caution_section, media_section, warning_section
from pulseprop.reports.text import blocks_text, printable, section_text

__all__ = ["compensate_text", "sheet_sections"]


def compensate_text(answer: Compensation, run: Run) -> str:
    """The report; run: the best design, sent in full."""
    opening = [Paragraph(compensation_headline(answer)), *_about(run)]
    parts = [blocks_text(opening), *(section_text(section) for section in sheet_sections(answer, run))]
    warned = [section for make in (warning_section, caution_section) if (section := make(run))]
    return printable("\n\n".join([*parts, *map(section_text, warned)])) + "\n"


def _about(run: Run) -> list[Paragraph]:
    asked = run.question and f"Asked: {run.question}"
    expected = run.answer and f"Expected: {run.answer}"
    return [Paragraph(text) for text in (run.scenario, asked, expected, run.note) if text]


def sheet_sections(answer: Compensation, run: Run) -> tuple[Section, ...]:
    """Designs, order sheet, build sheet, what stays, and the media all this rests on."""
    order, media = order_section(answer.designs[0], run), media_section(run)
    told = [(number, one) for number, one in enumerate(answer.designs, 1) if one.settings or one.left_out]
    return (
        overview_section(answer),
        *(design_section(number, design) for number, design in told),
        *([order] if order else []),
        build_section(answer.designs[0], run),
        remainder_section(answer),
        search_section(answer),
        *([media] if media else []),
    )
