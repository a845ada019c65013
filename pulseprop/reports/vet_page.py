"""The page of a delivery: what a buyer sends to a supplier, one part a table."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from pathlib import Path

from pulseprop.reports.document import write_text
from pulseprop.reports.drawing import Drawing
from pulseprop.reports.section_vet import vet_sections
from pulseprop.reports.templating import placed, rendered
from pulseprop.reports.vet_numbers import file_name
from pulseprop.reports.vet_opening import delivery, delivery_headline, headlines
from pulseprop.vetting.result import Vetted

__all__ = ["vet_page_html", "write_vet_page"]

FIGURE_BELOW = ("conflict", "factor", "requirements", "findings", "bounds")
"""Below the first of these sections that is there stands the figure."""


def vet_page_html(answers: Sequence[Vetted], drawn: Mapping[int, Drawing]) -> str:
    """The page. drawn: number of a table among the answers to its figure."""
    several = len(answers) > 1
    return rendered(
        "vet.html",
        headline=delivery_headline(answers) if several else "",
        delivery=delivery(answers) if several else None,
        parts=[_part(number, one, drawn.get(number)) for number, one in enumerate(answers)],
    )


def _part(number: int, vetted: Vetted, figure: Drawing | None) -> dict[str, object]:
    name = f"part-{number + 1}"
    sections = {
        section.key: replace(section, key=f"{name}-{section.key}") for section in vet_sections(vetted)
    }
    place = next((key for key in FIGURE_BELOW if key in sections), "origin")
    return {
        "name": name,
        "file": file_name(vetted),
        "vetted": vetted,
        "headlines": headlines(vetted),
        "sentence": vetted.sentence,
        "sections": tuple(sections.values()),
        "figures": {} if figure is None else placed([figure], {sections[place].key: (figure.name,)}),
    }


def write_vet_page(answers: Sequence[Vetted], drawn: Mapping[int, Drawing], path: str | Path) -> None:
    """The page to a file, whole or not at all. Raises InputError where it cannot be written."""
    write_text(path, vet_page_html(answers, drawn))
