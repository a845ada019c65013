"""Where the numbers come from: records of the media, the numerics, and what the run warns of."""

from __future__ import annotations

from pulseprop.propagation.numerals import LONG_NM, significant, span
from pulseprop.propagation.result import MediumUsed, Run
from pulseprop.reports.blocks import Paragraph, Section

__all__ = [
    "caution_section",
    "media_section",
    "medium_facts",
    "numerics_section",
    "range_text",
    "warning_section",
]


def media_section(run: Run) -> Section | None:
    """Source, temperature, range and the spread of other records, a paragraph a medium."""
    if not run.media:
        return None
    return Section("media", "Media and their sources", tuple(_medium(medium) for medium in run.media))


def _medium(medium: MediumUsed) -> Paragraph:
    parts = [medium_facts(medium.source, medium.temperature, medium.relative_to, medium.valid_nm)]
    if medium.index is not None:
        parts.append(f"At the pulse's centre: index {significant(medium.index, 6)}, ")
        parts[-1] += f"GVD {significant(medium.gvd_fs2_per_mm, 4)} fs^2/mm."
    if medium.spread:
        others = "; ".join(f"{name} {significant(gvd, 4)}" for name, gvd in medium.spread)
        parts.append(f"GVD by other records, fs^2/mm: {others}.")
    parts += [note[:1].upper() + note[1:].rstrip(".") + "." for note in medium.notes]
    return Paragraph(" ".join(parts), label=medium.name)


def medium_facts(
    source: str, temperature: str, relative_to: str, valid_nm: tuple[float, float] | None
) -> str:
    """Source, temperature, range and reference of a record, in one line."""
    facts = [source.rstrip(".") or "no source stated"]
    facts.append(f"temperature: {temperature}" if temperature else "temperature not stated")
    facts.append(f"valid {range_text(valid_nm)}")
    facts.append(f"index against {relative_to}" if relative_to else "reference of the index not stated")
    return "; ".join(facts) + "."


def range_text(valid_nm: tuple[float, float] | None, digits: int = 5) -> str:
    """A range of wavelengths in a unit that reads easily."""
    if valid_nm is None:
        return "wherever it was defined"
    low, high = valid_nm
    if high >= LONG_NM:
        return f"{low / 1e3:.{digits}g} um to {high / 1e3:.{digits}g} um"
    return f"{low:.{digits}g} nm to {high:.{digits}g} nm"


def numerics_section(run: Run) -> Section:
    """Grid, solver, and how well the window held the answer."""
    grid, solver = run.grid, run.solver
    text = (
        f"{grid.points} points of {span(grid.step_fs, 4)}, a window of {span(grid.span_fs, 4)}"
        f"{_enlarged(solver.enlargements)}; method {solver.method}, "
        f"{_counted(solver.transforms, 'transform')}"
    )
    if solver.steps:
        text += f", {_counted(solver.steps, 'step')}"
    text += f"; energy that reached the edges of the window: {significant(solver.wrapped_energy, 2)}."
    origin = (
        f"pulseprop {run.version}; scenario {run.file}, SHA-256 {run.scenario_sha256[:16]}…; "
        f"catalogue SHA-256 {run.catalogue_sha256[:16]}…"
    )
    return Section("numerics", "Numerics", (Paragraph(text), Paragraph(origin)))


def _enlarged(times: int) -> str:
    if not times:
        return ""
    return f" (enlarged {_counted(times, 'time')} after the check for wrap-around)"


def _counted(number: int, thing: str) -> str:
    return f"{number} {thing}" if number == 1 else f"{number} {thing}s"


def warning_section(run: Run) -> Section | None:
    """Warnings, or nothing."""
    if not run.warnings:
        return None
    return Section("warnings", "Warnings", tuple(Paragraph(text) for text in run.warnings))


def caution_section(run: Run) -> Section | None:
    """Cautions, one line each."""
    if not run.cautions:
        return None
    lines = tuple(Paragraph(caution.line, label=f"[{caution.code}]") for caution in run.cautions)
    return Section("cautions", "Cautions (in full on the page)", lines)
