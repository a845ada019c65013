"""The page of a delivery: what a buyer sends to a supplier, one part a file."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from pathlib import Path

from pulseprop.reports.document import write_text
from pulseprop.reports.drawing import Drawing
from pulseprop.reports.section_vet import vet_sections
from pulseprop.reports.templating import placed, rendered
from pulseprop.vetting.result import Vetted

__all__ = ["vet_page_html", "write_vet_page"]

ORDER = ("factor", "findings", "bounds")
"""Below the first of these sections that is there stands the figure."""


def vet_page_html(vetted: Sequence[Vetted], drawn: Mapping[int, Drawing]) -> str:
    """The page. drawn: number of a file among `vetted` to its figure."""
    parts = []
    for number, one in enumerate(vetted):
        sections = vet_sections(one)
        keys = [section.key for section in sections]
        place = next((key for key in ORDER if key in keys), keys[-1])
        figure = drawn.get(number)
        figures = {} if figure is None else placed([figure], {place: (figure.name,)})
        parts.append((one, sections, figures))
    return rendered("vet.html", parts=parts)


def write_vet_page(vetted: Sequence[Vetted], drawn: Mapping[int, Drawing], path: str | Path) -> None:
    """The page to a file, whole or not at all. Raises InputError where it cannot be written."""
    write_text(path, vet_page_html(vetted, drawn))
