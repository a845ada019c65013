"""Facts that a hazard assessment asks for. Never a verdict: no class, no limit, no eyewear."""

from __future__ import annotations

from pulseprop.propagation.numerals import LONG_NM, NOTHING, quantity, significant, span, terahertz
from pulseprop.propagation.result import HazardFacts, Run
from pulseprop.reports.blocks import Column, Paragraph, Section, Table
from pulseprop.reports.section_sources import range_text

__all__ = ["hazard_section"]

DEFERENCE = (
    "Assess the hazard under the local laser safety officer, to IEC 60825-1 and, where it applies, ANSI "
    "Z136.1. This page gives no laser class, no exposure limit and no eyewear figure, and is no "
    "replacement for local codes and licensed practice. It states what the scenario says and what "
    "follows from it; measure before relying on it."
)


def hazard_section(run: Run) -> Section:
    """The facts, the stray beams, and whom to ask."""
    rows = tuple((name, value) for name, value in _facts(run.hazards))
    table = Table((Column("of the pulse that enters", words=True), Column("value", words=True)), rows)
    stray = [Paragraph(text, label="stray light") for text in run.hazards.stray_beams]
    return Section("hazards", "For the hazard assessment", (Paragraph(DEFERENCE), table, *stray))


def _facts(facts: HazardFacts) -> list[tuple[str, str]]:
    fluence, intensity = facts.peak_fluence_J_per_cm2, facts.peak_intensity_W_per_cm2
    return [
        (
            "wavelengths down to 1 % of the peak of the spectrum",
            _wavelengths(facts.wavelengths_at_1_percent_nm, 5),
        ),
        ("wavelengths down to 1e-4 of the peak", _wavelengths(facts.wavelengths_at_1e_4_nm, 4)),
        ("pulse energy", _or_unstated(quantity(facts.pulse_energy_J, "J"))),
        ("repetition rate", _or_unstated(quantity(facts.repetition_rate_Hz, "Hz"))),
        ("average power", _or_unstated(quantity(facts.average_power_W, "W"))),
        ("shortest possible duration (flat phase, FWHM)", span(facts.shortest_possible_fwhm_fs, 3)),
        ("peak power at that duration", _or_unstated(quantity(facts.peak_power_at_limit_W, "W"))),
        ("beam radius (1/e^2 of intensity)", _or_unstated(quantity(facts.beam_radius_m, "m"))),
        ("highest peak fluence in the path", _with_unit(fluence, "J/cm^2")),
        ("highest peak intensity in the path", _with_unit(intensity, "W/cm^2")),
    ]


def _wavelengths(ends_nm: tuple[float, float], digits: int) -> str:
    """Long waves with their frequencies."""
    text = range_text(ends_nm, digits)
    if ends_nm[1] < LONG_NM:
        return text
    low, high = (significant(terahertz(end), 3) for end in reversed(ends_nm))
    return f"{text} ({low} THz to {high} THz)"


def _or_unstated(text: str) -> str:
    return "not stated in the scenario" if text == NOTHING else text


def _with_unit(value: float | None, unit: str) -> str:
    if value is None:
        return "not known: the scenario states no energy or no beam radius"
    return f"{significant(value, 2)} {unit}"
