"""The figures of a run: to a directory for slides, or into a page."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Sequence
from pathlib import Path

from pulseprop.errors import InputError
from pulseprop.propagation.result import Run
from pulseprop.reports.curves import IndexCurve
from pulseprop.reports.document import check_directory, write_text
from pulseprop.reports.draw_band import draw_budget, draw_media, draw_spectrum
from pulseprop.reports.draw_time import (
    draw_autocorrelation,
    draw_contrast,
    draw_measured_autocorrelation,
    draw_pulse,
    draw_spectrogram,
)
from pulseprop.reports.drawing import Drawing, csv_text, source_line
from pulseprop.reports.figure_style import save_png, save_svg

__all__ = ["drawings", "write_figure", "write_figures"]

ALWAYS: tuple[Callable[[Run], Drawing], ...] = (
    draw_pulse,
    draw_spectrum,
    draw_contrast,
    draw_spectrogram,
    draw_autocorrelation,
)


def drawings(run: Run, curves: Sequence[IndexCurve] = ()) -> Iterator[Drawing]:
    """Every figure that has something to show, one at a time. curves: the media, for a figure of them."""
    for draw in ALWAYS:
        yield draw(run)
    if run.autocorrelation is not None:
        yield draw_measured_autocorrelation(run, run.autocorrelation)
    if run.elements:
        yield draw_budget(run)
    if curves:
        yield draw_media(curves, source_line(run))


def write_figures(drawn: Iterable[Drawing], directory: str | Path) -> list[Path]:
    """PNG, SVG and CSV of figures into a directory, which is made where its parent exists.

    Raises InputError where it cannot be written.
    """
    check_directory(directory)
    directory = Path(directory)
    directory.mkdir(exist_ok=True)
    written: list[Path] = []
    for drawing in drawn:
        written.append(save_png(drawing.figure, directory / f"{drawing.name}.png"))
        written.append(save_svg(drawing.figure, directory / f"{drawing.name}.svg"))
        write_text(directory / f"{drawing.name}.csv", csv_text(drawing))
        written.append(directory / f"{drawing.name}.csv")
    return written


def write_figure(drawing: Drawing, path: str | Path) -> Path:
    """One figure, as PNG or SVG by the ending of the name. Raises InputError for others."""
    path = Path(path)
    savers = {".png": save_png, ".svg": save_svg}
    if path.suffix.lower() not in savers:
        raise InputError(
            "a figure's file name must say its format",
            value=path.name,
            allowed="names that end in .png or .svg",
            remedy="Change the ending",
        )
    return savers[path.suffix.lower()](drawing.figure, path)
