"""What `vet` prints: the answer first, then what it rests on."""

from __future__ import annotations

from collections.abc import Iterable

from pulseprop.reports.blocks import Paragraph
from pulseprop.reports.section_vet import vet_sections
from pulseprop.reports.text import blocks_text, printable, section_text
from pulseprop.vetting.result import Vetted

__all__ = ["vet_text"]

RULE = "=" * 108


def vet_text(vetted: Iterable[Vetted]) -> str:
    """A report a file, in their order."""
    return printable(f"\n\n{RULE}\n\n".join(_report(one) for one in vetted)) + "\n"


def _report(vetted: Vetted) -> str:
    opening = [Paragraph(f"{vetted.verdict.upper()}: {vetted.headline}"), Paragraph(vetted.what)]
    if vetted.sentence:
        opening.append(Paragraph(vetted.sentence, label="To the supplier"))
    parts = [blocks_text(opening), *(section_text(section) for section in vet_sections(vetted))]
    return "\n\n".join(parts)
