"""The build sheet: the best design element by element, as somebody sets it up on a bench."""

from __future__ import annotations

from collections.abc import Iterator

from pulseprop.compensation.result import Design
from pulseprop.propagation.numerals import percent, significant, span
from pulseprop.propagation.result import ElementMeasures, Run
from pulseprop.reports.blocks import Column, Paragraph, Section, Table

__all__ = ["build_section"]

UNIT_WORDS = ("mm", "deg", "fs", "um", "nm", "THz", "ps")
"""Units with which the keys of an element's figures end."""


def build_section(design: Design, run: Run) -> Section:
    """Elements in the order of the beam with what they are set up by, and the pulse to expect; run: of that
    design."""
    columns = (
        Column("", words=False),
        Column("element", words=True),
        Column("what it is", words=True),
        Column("set up by", words=True),
        Column("transmission"),
        Column("GDD so far", "fs^2"),
        Column("FWHM after"),
    )
    rows = tuple(
        (
            str(number),
            row.name,
            row.detail,
            "; ".join((*_set(design, row.name), *_figures(row))),
            percent(row.transmission),
            significant(row.gdd_sum_fs2, 4),
            span(row.fwhm_after_fs, 3),
        )
        for number, row in enumerate(run.elements, 1)
    )
    trace = span(run.pulse_out.autocorrelation_fwhm_fs, 3)
    blocks: list[Table | Paragraph] = [
        Paragraph("In the order of the beam; angles from the normal, positive GDD means red first."),
        Table(columns, rows),
        Paragraph(
            f"an autocorrelation of {trace} (FWHM), which is this pulse of {span(run.pulse_out.fwhm_fs, 3)}.",
            label="To be seen at the end",
        ),
    ]
    if run.hazards.peak_fluence_J_per_cm2 is not None:
        fluence = significant(run.hazards.peak_fluence_J_per_cm2, 2)
        blocks.append(Paragraph(f"{fluence} J/cm^2 on axis.", label="Highest peak fluence"))
    blocks += [Paragraph(text, label="stray light") for text in run.hazards.stray_beams]
    return Section("build", "Build sheet of design 1", tuple(blocks))


def _set(design: Design, name: str) -> Iterator[str]:
    for one in design.settings:
        if one.element == name:
            number = one.value if isinstance(one.value, str) else f"{one.value:.5g}"
            move = "" if one.move is None else f" ({one.move:+.4g} from today)"
            yield f"{one.parameter.replace('_', ' ')} {number} {one.unit}".rstrip() + move


def _figures(row: ElementMeasures) -> Iterator[str]:
    """The figures of an element and of its parts; what is not known is left out."""
    for key, value in row.figures.items():
        if value is None:
            continue
        words = key.split("_")
        unit = next((word for word in UNIT_WORDS if word in words), "")
        rest = " ".join(word for word in words if word != unit)
        yield f"{rest} {significant(value, 4)} {unit}".rstrip()
