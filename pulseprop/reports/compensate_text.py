"""What `compensate` prints: the answer first, then designs, order sheet and build sheet."""

from __future__ import annotations

from pulseprop.compensation.result import Compensation
from pulseprop.propagation.result import Run
from pulseprop.reports.blocks import Paragraph, Section
from pulseprop.reports.section_build import build_section
from pulseprop.reports.section_compensate import compensation_headline, compensation_sections
from pulseprop.reports.section_order import order_section
from pulseprop.reports.section_sources import caution_section, media_section, warning_section
from pulseprop.reports.text import blocks_text, printable, section_text

__all__ = ["compensate_text", "sheet_sections"]


def compensate_text(answer: Compensation, run: Run) -> str:
    """The report; run: the best design, sent in full."""
    opening = [Paragraph(compensation_headline(answer)), Paragraph(run.scenario)]
    parts = [blocks_text(opening), *(section_text(section) for section in sheet_sections(answer, run))]
    warned = [section for make in (warning_section, caution_section) if (section := make(run))]
    return printable("\n\n".join([*parts, *map(section_text, warned)])) + "\n"


def sheet_sections(answer: Compensation, run: Run) -> tuple[Section, ...]:
    """Designs, order sheet, build sheet, and the media they rest on."""
    more = (
        order_section(answer.designs[0]),
        build_section(answer.designs[0], run),
        media_section(run),
    )
    return (*compensation_sections(answer), *(section for section in more if section is not None))
