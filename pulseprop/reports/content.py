"""The report of a run, in the order in which a person reads it."""

from __future__ import annotations

from pulseprop.propagation.result import Run
from pulseprop.reports.blocks import Section
from pulseprop.reports.section_budget import budget_section
from pulseprop.reports.section_causality import causality_section
from pulseprop.reports.section_pulse import (
    autocorrelation_section,
    delay_section,
    pulse_section,
    sign_section,
)
from pulseprop.reports.section_sources import (
    caution_section,
    media_section,
    numerics_section,
    warning_section,
)

__all__ = ["sections"]

SECTIONS = (
    budget_section,
    pulse_section,
    sign_section,
    autocorrelation_section,
    delay_section,
    causality_section,
    media_section,
    numerics_section,
    warning_section,
    caution_section,
)


def sections(run: Run) -> tuple[Section, ...]:
    """All sections that have something to say."""
    return tuple(section for make in SECTIONS if (section := make(run)) is not None)
