"""The figures of a run: to a directory for slides, or into a page."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Sequence
from pathlib import Path

from pulseprop.errors import InputError
from pulseprop.material.medium import Medium
from pulseprop.propagation.result import Run
from pulseprop.reports.document import make_directory, write_text
from pulseprop.reports.draw_autocorrelation import draw_autocorrelation, draw_measured_autocorrelation
from pulseprop.reports.draw_band import draw_budget, draw_spectrum
from pulseprop.reports.draw_media import draw_media, draw_susceptibility
from pulseprop.reports.draw_spectrogram import draw_spectrogram
from pulseprop.reports.draw_time import draw_contrast, draw_pulse
from pulseprop.reports.drawing import Drawing, csv_text, source_line
from pulseprop.reports.figure_style import save_png, svg_document
from pulseprop.reports.media_curves import chi_curves, index_curves, strongest_line

__all__ = ["drawings", "write_figure", "write_figures"]

ALWAYS: tuple[Callable[[Run], Drawing], ...] = (
    draw_pulse,
    draw_spectrum,
    draw_contrast,
    draw_spectrogram,
    draw_autocorrelation,
)


def drawings(run: Run, media: Sequence[Medium] = ()) -> Iterator[Drawing]:
    """Every figure that has something to show, one at a time; media: those of the path."""
    for draw in ALWAYS:
        yield draw(run)
    if run.autocorrelation is not None:
        yield draw_measured_autocorrelation(run, run.autocorrelation)
    if run.elements:
        yield draw_budget(run)
    ends = run.hazards.wavelengths_at_1e_4_nm
    if curves := index_curves(media, *ends):
        yield draw_media(curves, source_line(run))
    if chi := chi_curves(media, *ends):
        yield draw_susceptibility(run, chi, strongest_line(media, *ends))


def write_figures(drawn: Iterable[Drawing], directory: str | Path) -> list[Path]:
    """PNG, SVG and CSV of figures into a directory, which is made where its parent exists.

    Raises InputError where it cannot be written.
    """
    directory = make_directory(directory)
    written: list[Path] = []
    for drawing in drawn:
        written.append(save_png(drawing.figure, directory / f"{drawing.name}.png"))
        for ending, text in ((".svg", svg_document(drawing.svg)), (".csv", csv_text(drawing))):
            written.append(directory / f"{drawing.name}{ending}")
            write_text(written[-1], text)
    return written


def write_figure(drawing: Drawing, path: str | Path) -> Path:
    """One figure, as PNG or SVG by the ending of the name. Raises InputError for others."""
    path = Path(path)
    if path.suffix.lower() == ".png":
        return save_png(drawing.figure, path)
    if path.suffix.lower() == ".svg":
        write_text(path, svg_document(drawing.svg))
        return path
    raise InputError(
        "a figure's file name must say its format",
        value=path.name,
        allowed="names that end in .png or .svg",
        remedy="Change the ending",
    )
