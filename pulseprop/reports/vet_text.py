"""What `vet` prints: the answer first, then what it rests on."""

from __future__ import annotations

from collections.abc import Sequence

from pulseprop.reports.blocks import Paragraph
from pulseprop.reports.section_vet import vet_sections
from pulseprop.reports.text import WIDTH, blocks_text, printable, section_text
from pulseprop.reports.vet_opening import delivery, delivery_headline, opening
from pulseprop.vetting.result import Vetted

__all__ = ["vet_text"]

RULE = "=" * WIDTH


def vet_text(answers: Sequence[Vetted]) -> str:
    """A report a table, in their order; of several, first the answer on all of them."""
    parts = [_report(one) for one in answers]
    if len(answers) > 1:
        first = blocks_text([Paragraph(delivery_headline(answers))])
        parts.insert(0, f"{first}\n\n{section_text(delivery(answers))}")
    return printable(f"\n\n{RULE}\n\n".join(parts)) + "\n"


def _report(vetted: Vetted) -> str:
    return "\n\n".join([blocks_text(opening(vetted)), *map(section_text, vet_sections(vetted))])
