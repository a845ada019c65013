"""The answer of `compensate`: designs side by side, what no compensator can undo, and how it was searched."""

from __future__ import annotations

from collections.abc import Iterator

from pulseprop.compensation.result import Compensation, Design, State, Target
from pulseprop.propagation.numerals import percent, significant, span
from pulseprop.reports.blocks import Column, Paragraph, Section, Table
from pulseprop.reports.compensate_words import used

__all__ = ["compensation_headline", "overview_section", "remainder_section", "search_section"]

RATIO_DIGITS = 4
REFUSALS_SHOWN = 6


def compensation_headline(answer: Compensation) -> str:
    """The answer in a sentence or two."""
    best, before = answer.designs[0], answer.before
    told = (
        f"{span(best.fwhm_fs, 3)} with {percent(best.peak_ratio)} of the peak power of the limit, against "
        f"{span(before.fwhm_fs, 3)} and {percent(before.peak_ratio)} today: {used(best)}."
    )
    return told if answer.target.wanted is None else f"{told} {_target(answer.target)}"


def _target(target: Target) -> str:
    unit = f" {target.unit}" if target.unit else ""
    wanted = f"{significant(target.wanted, 4)}{unit}"
    if target.reached:
        return f"The target, {target.goal} {wanted}, is reached."
    told = (
        f"The target, {target.goal} {wanted}, is not reached: the nearest design has "
        f"{significant(target.nearest, 4)}{unit}, and misses it by {significant(abs(target.short_by), 2)}"
        f"{unit}"
    )
    return told + (f" ({'; '.join(target.limits)})." if target.limits else ".")


def overview_section(answer: Compensation) -> Section:
    """A row of figures for each design, and below them what each is."""
    columns = (
        Column("", words=True),
        Column("FWHM", "fs"),
        Column("peak ratio"),
        Column("two-photon"),
        Column("transmission"),
        Column("GDD left", "fs^2"),
        Column("TOD left", "fs^3"),
        Column("bench", "m"),
    )
    designs = list(enumerate(answer.designs, 1))
    rows = (
        _row("today", answer.before, ""),
        *(_row(f"design {number}", design, significant(design.size_m, 2)) for number, design in designs),
    )
    said = (Paragraph(f"{used(design)}.", label=f"Design {number}") for number, design in designs)
    today = Paragraph(f"{_today(answer.before)}.", label="Today")
    blocks: tuple[Table | Paragraph, ...] = (
        Table(columns, rows),
        today,
        *said,
        *map(Paragraph, _sentences(answer.notes)),
    )
    return Section("designs", "Designs", blocks)


def _today(before: State) -> str:
    if not before.in_place:
        return "the path without anything that is at hand"
    return f"with {', '.join(before.in_place)} as set now"


def _row(name: str, state: State | Design, size: str) -> tuple[str, ...]:
    return (
        name,
        significant(state.fwhm_fs, 4),
        significant(state.peak_ratio, RATIO_DIGITS),
        significant(state.two_photon_ratio, RATIO_DIGITS),
        percent(state.transmission),
        significant(state.residual_gdd_fs2, 3),
        significant(state.residual_tod_fs3, 3),
        size,
    )


def remainder_section(answer: Compensation) -> Section:
    """Lines, gaps and losses that stay whatever is set."""
    rest = answer.remainder
    text = (
        f"The spectrum that is left behind what cannot be set has a limit of {span(rest.limit_out_fs, 3)} "
        f"({span(rest.limit_in_fs, 3)} before it), and {percent(rest.transmission)} of the energy: whatever "
        f"the phase, the peak power stays below {percent(rest.peak_limit)} of the limit of the pulse that "
        f"enters. With every smooth phase taken off, {percent(rest.smooth_peak_ratio)} of the peak are left"
    )
    text += "; the rest is structure of absorption lines." if rest.smooth_peak_ratio < 0.995 else "."
    if rest.dark_nm:
        dark = ", ".join(f"{low:.1f} to {high:.1f} nm" for low, high in rest.dark_nm)
        text += f" Dark stretches of the spectrum: {dark}."
    return Section("remainder", "What no compensator can undo", (Paragraph(text),))


def search_section(answer: Compensation) -> Section:
    """What was tried, and what could not be built."""
    found = answer.search
    left_out = f", {found.by_phase} left out by their fitted phase" if found.by_phase else ""
    text = (
        f"{_counted(found.choices, 'discrete choice')}; {found.refined} refined, {found.proved} excluded by "
        f"a bound{left_out}; {_counted(found.evaluations, 'evaluation')} of the field on {found.points} "
        f"points; seed {answer.seed}."
    )
    refused = [Paragraph(one, "Not possible") for one in _sentences(found.refusals[:REFUSALS_SHOWN])]
    return Section("search", "Search", (Paragraph(text), *refused))


def _counted(number: int, thing: str) -> str:
    return f"{number} {thing}" if number == 1 else f"{number} {thing}s"


def _sentences(texts: tuple[str, ...]) -> Iterator[str]:
    for text in texts:
        yield text[:1].upper() + text[1:].rstrip(".") + "."
