"""One design of a compensation: what to set, how tightly to hold it, and what the data may hide."""

from __future__ import annotations

from collections.abc import Iterator

from pulseprop.compensation.result import DataCase, Design, Drift, Setting
from pulseprop.propagation.numerals import NOTHING, percent, significant, span
from pulseprop.reports.blocks import Column, Paragraph, Section, Table
from pulseprop.reports.compensate_words import move_text, parameter_words, value_text

__all__ = ["design_section"]

RATIO_DIGITS = 4


def design_section(number: int, design: Design) -> Section:
    """Settings with their tolerances, all errors together, angles, and the worst cases of the data."""
    return Section(f"design-{number}", f"Design {number}", tuple(_blocks(design)))


def _blocks(design: Design) -> Iterator[Table | Paragraph]:
    if design.settings or design.tolerance:
        yield Paragraph(
            "less and more: how far each may be off alone before 5 % of the peak power are lost; held to: "
            "one standard deviation of an ordinary workshop, unless the scenario states it."
        )
        yield _held(design)
    for one in design.settings:
        if one.at_limit:
            what = f"{one.element}: {parameter_words(one.parameter)} stands at its {one.at_limit} limit."
            yield Paragraph(what, label="At its limit")
    for text in design.cautions:
        yield Paragraph(f"{text}.", label="Caution")
    if design.left_out:
        yield Paragraph(f"{', '.join(design.left_out)}.", label="Taken out of the beam")
    yield Paragraph(
        f"{span(design.pulse_out.autocorrelation_fwhm_fs, 3)} (FWHM of the trace; "
        f"{significant(design.pulse_out.autocorrelation_factor, 4)} times that of this pulse).",
        label="Expected autocorrelation",
    )
    yield from _together(design)
    if design.angles:
        yield _angles(design)
    yield from _data(design.data)


def _held(design: Design) -> Table:
    """Settings first, then what is not set but may be off."""
    columns = (
        Column("element", words=True),
        Column("quantity", words=True),
        Column("set to", words=True),
        Column("from today", words=True),
        Column("less", words=True),
        Column("more", words=True),
        Column("held to", words=True),
    )
    drifts = {(one.element, one.parameter): one for one in design.tolerance}
    rows = [_set(one, design, drifts.pop((one.element, one.parameter), None)) for one in design.settings]
    rows += [(*_named(one), "", "", *_limits(one)) for one in drifts.values()]
    return Table(columns, tuple(rows))


def _set(one: Setting, design: Design, drift: Drift | None) -> tuple[str, ...]:
    limits = ("", "", "") if drift is None else _limits(drift)
    return (*_named(one), value_text(one, design), move_text(one, design), *limits)


def _named(one: Setting | Drift) -> tuple[str, str]:
    return one.element, parameter_words(one.parameter)


def _limits(drift: Drift) -> tuple[str, str, str]:
    """Distances that were not met as far as the element can be built are open."""
    below, above = (_distance(value, drift.unit, "any") for value in (drift.below, drift.above))
    return below, above, _distance(drift.sigma, drift.unit, NOTHING)


def _distance(value: float | None, unit: str, nothing: str) -> str:
    return nothing if value is None else f"{significant(value, 2)} {unit}".rstrip()


def _together(design: Design) -> Iterator[Paragraph]:
    found = design.together
    if found.workshop_peak_median is not None:
        yield Paragraph(
            f"with every quantity held as in the last column, half of {found.draws} builds keep "
            f"{percent(found.workshop_peak_median)} of the design's peak power, nine in ten keep "
            f"{percent(found.workshop_peak_tenth)}; {percent(found.workshop_share_kept)} of them keep 95 % "
            f"(seed {found.seed}).",
            label="All together",
        )
    if found.share_of_lone is not None:
        yield Paragraph(
            "nine builds in ten keep 95 % of the peak when everything stays within "
            f"{percent(found.share_of_lone, 2)} of what it may be off alone.",
            label="To hold 5 % in all",
        )


def _angles(design: Design) -> Table:
    columns = (
        Column("element", words=True),
        Column("angle", words=True),
        Column("off by", "deg"),
        Column("GDD error", "fs^2"),
        Column("TOD error", "fs^3"),
        Column("FOD error", "fs^4"),
    )
    rows = tuple(
        (
            one.element,
            parameter_words(one.parameter),
            significant(one.angle_deg, 1),
            significant(one.gdd_error_fs2, 3),
            significant(one.tod_error_fs3, 3),
            significant(one.fod_error_fs4, 3),
        )
        for one in design.angles
    )
    return Table(columns, rows)


def _data(cases: tuple[DataCase, ...]) -> Iterator[Table | Paragraph]:
    if not cases:
        return
    yield Paragraph(
        "peak ratio under the extreme materials that the vendor's numbers still allow: with the design as it "
        "is set, and set anew by the pulse on the bench.",
        label="If the data are off",
    )
    columns = (Column("worst case of the data", words=True), Column("as set"), Column("set anew"))
    rows = tuple(
        (
            case.name,
            significant(case.peak_ratio, RATIO_DIGITS),
            significant(case.peak_ratio_reset, RATIO_DIGITS),
        )
        for case in cases
    )
    yield Table(columns, rows)
