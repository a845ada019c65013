"""The dispersion budget: what each element adds, and what the pulse is after it."""

from __future__ import annotations

from pulseprop.propagation.numerals import NOTHING, fixed, last_place, percent, scaled, significant, span
from pulseprop.propagation.result import ElementMeasures, PathMeasures, Run, smallest
from pulseprop.reports.blocks import Column, Paragraph, Section, Table

__all__ = ["budget_section", "digits_of", "on_a_line"]

MOST_DIGITS = 4
"""Digits of a width or a share, however many the data behind it carry."""


REPEATED = "repeat"

PART = "- "
"""Stands before what the element above is made of."""

SAME = 1e-9
"""Loads that differ by a smaller share are one."""

FAINTEST_ECHO = 1e-8
"""Share of the energy that leaves below which an echo is counted, not listed: 80 dB."""


def digits_of(run: Run) -> int:
    """Significant digits that an answer about the whole path may have: those of its coarsest element."""
    return min([MOST_DIGITS, *(max(element.digits, 1) for element in run.elements)])


def on_a_line(path: PathMeasures) -> bool:
    """Whether a line stands in the pulse's spectrum, so that no estimate could be made from a known GDD."""
    return path.gdd_only_fwhm_fs is None and path.gdd_fs2 is not None


def budget_section(run: Run) -> Section:
    """A row an element in the order of the path, the total, and the estimate from GDD alone beside it."""
    if not run.elements:
        text = "The path is empty: what leaves is what enters."
        return Section("budget", "Dispersion budget", (Paragraph(text),))
    blocks: list[Table | Paragraph] = [_table(run), Paragraph(_estimate(run))]
    blocks += [Paragraph(text) for text in (_loads(run), *_notes(run), *_echoes(run)) if text]
    return Section("budget", "Dispersion budget", tuple(blocks))


def _table(run: Run) -> Table:
    unit, factor = scaled([run.pulse_in.fwhm_fs, *(element.fwhm_after_fs for element in run.elements)])
    columns = (
        Column("element", words=True),
        Column("GDD", "fs^2"),
        Column("TOD", "fs^3"),
        Column("FOD", "fs^4"),
        Column("sum GDD", "fs^2"),
        Column("sum TOD", "fs^3"),
        Column("FWHM after", unit),
        Column("transmission"),
    )
    rows: list[tuple[str, ...]] = []
    for number, element in enumerate(run.elements):
        so_far = run.elements[: number + 1]
        rows += [_row(element, so_far, factor), *_parts(element, so_far[:-1], factor)]
    return Table(columns, tuple(rows), (_total(run, factor),))


def _parts(
    element: ElementMeasures, before: tuple[ElementMeasures, ...], factor: float
) -> list[tuple[str, ...]]:
    """A row each for what an element is made of; the parts of a repeat mingle, and stand in its row alone."""
    if element.kind == REPEATED:
        return []
    return [
        (PART + (part.detail or part.name), *_row(part, (*before, *element.parts[:number]), factor)[1:])
        for number, part in enumerate(element.parts, start=1)
    ]


def _row(element: ElementMeasures, so_far: tuple[ElementMeasures, ...], factor: float) -> tuple[str, ...]:
    digits = element.digits
    width_digits = min([MOST_DIGITS, *(known.digits for known in so_far)])
    return (
        _name(element),
        significant(element.gdd_fs2, digits),
        significant(element.tod_fs3, digits),
        significant(element.fod_fs4, digits),
        _sum(element.gdd_sum_fs2, [known.gdd_fs2 for known in so_far], so_far),
        _sum(element.tod_sum_fs3, [known.tod_fs3 for known in so_far], so_far),
        significant(element.fwhm_after_fs * factor, width_digits),
        percent(element.transmission, min(digits, 3)),
    )


def _total(run: Run, factor: float) -> tuple[str, ...]:
    path = run.path
    return (
        "whole path",
        _sum(path.gdd_fs2, [element.gdd_fs2 for element in run.elements], run.elements),
        _sum(path.tod_fs3, [element.tod_fs3 for element in run.elements], run.elements),
        _sum(path.fod_fs4, [element.fod_fs4 for element in run.elements], run.elements),
        "",
        "",
        significant(run.pulse_out.fwhm_fs * factor, digits_of(run)),
        percent(path.transmission, min(digits_of(run), 3)),
    )


def _name(element: ElementMeasures) -> str:
    if not element.detail or element.detail == element.name or (element.parts and element.kind != REPEATED):
        return element.name
    return f"{element.name}: {element.detail}"


def _sum(total: float | None, terms: list[float | None], elements: tuple[ElementMeasures, ...]) -> str:
    """A sum is known no finer than its coarsest term."""
    places = [last_place(term, element.digits) for term, element in zip(terms, elements, strict=True)]
    known = [place for place in places if place is not None]
    if total is None:
        return NOTHING
    return fixed(total, max(known)) if known else "0"


def _estimate(run: Run) -> str:
    width = run.path.gdd_only_fwhm_fs
    full = span(run.pulse_out.fwhm_fs, digits_of(run))
    if width is None:
        why = (
            "A line stands in the pulse's spectrum, and orders at a line centre say little: look at the "
            "delays and curves."
            if on_a_line(run.path)
            else "An order of an element is not known."
        )
        return f"Textbook estimate from GDD alone: none. {why}"
    return (
        f"Textbook estimate from GDD alone, Gaussian: FWHM sqrt(1 + (4 ln2 GDD / FWHM^2)^2) = "
        f"{span(width, digits_of(run))}; with everything counted: {full}."
    )


def _loads(run: Run) -> str:
    """Where fluence and intensity are highest, and the B-integral of all."""
    names = [element.name for element in run.elements]
    told = [
        _highest("fluence", "J/cm^2", names, [row.peak_fluence_J_per_cm2 for row in run.elements]),
        _highest("intensity", "W/cm^2", names, [row.peak_intensity_W_per_cm2 for row in run.elements]),
    ]
    if run.path.b_integral_rad is not None:
        told.append(f"B-integral of the path: {significant(run.path.b_integral_rad, 2)} rad.")
    return " ".join(text for text in told if text)


def _highest(what: str, unit: str, names: list[str], values: list[float | None]) -> str:
    """The largest, and the first element where it stands; rounding alone makes no difference of elements."""
    top = max((value for value in values if value is not None), default=None)
    if top is None:
        return ""
    there = [value is not None and value >= (1 - SAME) * top for value in values]
    place = "everywhere" if all(there) and len(there) > 1 else f"in {names[there.index(True)]}"
    return f"Highest peak {what}: {significant(top, 2)} {unit}, {place}."


def _notes(run: Run) -> list[str]:
    """What elements tell beside their orders, those in a repeat too."""
    return [f"{text}." for element in run.elements for text in _told(element)]


def _told(element: ElementMeasures) -> list[str]:
    return [*element.notes, *(text for part in element.parts for text in _told(part))]


def _echoes(run: Run) -> list[str]:
    return [
        f"Echoes of {element.name}, after the direct passage, with their share of what leaves: "
        f"{_listed(element.echoes)}."
        for element in smallest(run.elements)
        if element.echoes
    ]


def _listed(echoes: tuple[tuple[float, float], ...]) -> str:
    """The first echo and those that can be seen, and how many are left out."""
    told = [echo for number, echo in enumerate(echoes) if number == 0 or echo[1] >= FAINTEST_ECHO]
    text = ", ".join(f"{span(delay, 4)} ({percent(share, 2)})" for delay, share in told)
    left = len(echoes) - len(told)
    return text + (f", and {left} fainter" if left else "")
