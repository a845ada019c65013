"""The build sheet: the best design element by element, as somebody sets it up on a bench."""

from __future__ import annotations

from collections.abc import Iterator

from pulseprop.compensation.result import Design
from pulseprop.propagation.numerals import percent, significant, span
from pulseprop.propagation.result import ElementMeasures, Run
from pulseprop.reports.blocks import Column, Paragraph, Section, Table
from pulseprop.reports.compensate_words import setting_text

__all__ = ["build_section"]

UNITS = {
    "mm": "mm", "um": "um", "nm": "nm", "deg": "deg", "fs": "fs", "ps": "ps", "THz": "THz", "waves": "waves",
    "fs2": "fs^2", "fs3": "fs^3", "fs4": "fs^4",
}  # fmt: skip
"""Units in the keys of an element's figures."""

SPELT = {"gdd": "GDD", "tod": "TOD", "fod": "FOD", "littrow": "Littrow"}

ALIGNING = (
    "Align with the least power that can be seen, with eyewear that the local laser safety officer has "
    "chosen for this laser: compressors send beams past their optics and out of the plane of the table, and "
    "the invisible ends of the spectrum go farthest. Block every stray beam listed here before the power is "
    "raised; local rules and licensed practice come first."
)
COMPRESSED = (
    "The pulse is shortest here, so its peak power is highest: compare with the maker's damage threshold at "
    "this wavelength, duration and beam diameter (ISO 21254)."
)


def build_section(design: Design, run: Run) -> Section:
    """Elements in the order of the beam with what they are set up by, and the pulse to expect; run: of that
    design."""
    blocks: tuple[Table | Paragraph, ...] = (
        Paragraph("In the order of the beam; angles from the normal, positive GDD means red first."),
        *(_element(number, row, design) for number, row in enumerate(run.elements, 1)),
        _along_the_beam(run),
        *_at_the_end(design, run),
        *_cautions(design, run),
    )
    return Section("build", "Build sheet of design 1", blocks)


def _element(number: int, row: ElementMeasures, design: Design) -> Paragraph:
    """What stands there, what is set on it, and what it is set up by."""
    parts = [f"{row.kind}: {row.detail}"]
    own = [setting_text(one, design) for one in design.settings if one.element == row.name]
    if own:
        parts.append(f"SET {', '.join(own)}")
    parts += [f"{name}{'; '.join(figures)}" for name, figures in _figures(row)]
    return Paragraph(f"{'. '.join(parts)}.", label=f"{number} {row.name}")


def _figures(row: ElementMeasures, name: str = "") -> Iterator[tuple[str, list[str]]]:
    """The figures of an element and of its parts, those that are known."""
    told = [_figure(key, value) for key, value in row.figures.items() if value is not None]
    if told:
        yield name, told
    for part in row.parts:
        yield from _figures(part, f"{part.name}: ")


def _figure(key: str, value: float) -> str:
    """The key in words, with its value: "littrow_angle_deg" becomes "Littrow angle 28.69 deg"."""
    parts = key.split("_")
    unit = next((part for part in parts if part in UNITS), "")
    words = " ".join(SPELT.get(part, part) for part in parts if part != unit)
    return f"{words} {significant(value, 4)} {UNITS.get(unit, '')}".rstrip()


def _along_the_beam(run: Run) -> Table:
    columns = (
        Column("element", words=True),
        Column("transmission"),
        Column("GDD so far", "fs^2"),
        Column("TOD so far", "fs^3"),
        Column("FWHM after"),
        Column("peak fluence", "J/cm^2"),
    )
    rows = tuple(
        (
            f"{number} {row.name}",
            percent(row.transmission),
            significant(row.gdd_sum_fs2, 4),
            significant(row.tod_sum_fs3, 4),
            span(row.fwhm_after_fs, 3),
            significant(row.peak_fluence_J_per_cm2, 2),
        )
        for number, row in enumerate(run.elements, 1)
    )
    return Table(columns, rows)


def _at_the_end(design: Design, run: Run) -> Iterator[Paragraph]:
    out = run.pulse_out
    yield Paragraph(
        f"an autocorrelation of {span(out.autocorrelation_fwhm_fs, 3)} (FWHM), which is this pulse of "
        f"{span(out.fwhm_fs, 3)}.",
        label="To be seen at the end",
    )
    if design.size_m:
        text = f"{significant(design.size_m, 3)} m along the beam for what is set or added."
        yield Paragraph(text, label="Room on the bench")


def _cautions(design: Design, run: Run) -> Iterator[Paragraph]:
    yield Paragraph(ALIGNING, label="While aligning")
    if run.elements and (fluence := run.elements[-1].peak_fluence_J_per_cm2) is not None:
        told = f"{significant(fluence, 2)} J/cm^2 on axis at {run.elements[-1].name}. {COMPRESSED}"
        yield Paragraph(told, label="Peak fluence on the last optic")
    for text in design.cautions:
        yield Paragraph(f"{text}.", label="Caution")
    for text in run.hazards.stray_beams:
        yield Paragraph(f"{text}.", label="Stray light")
