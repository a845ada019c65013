"""The figure of which frequencies arrive when."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from pulseprop.measures.spectrogram import Spectrogram, spectrogram
from pulseprop.propagation.numerals import scaled, span
from pulseprop.propagation.result import Run
from pulseprop.reports.curves import UNITS, bounds_of
from pulseprop.reports.drawing import Drawing, source_line
from pulseprop.reports.figure_style import Frame, canvas, label_x, label_y, night_map, styled

if TYPE_CHECKING:
    from matplotlib.axes import Axes

__all__ = ["draw_spectrogram"]

Real = NDArray[np.float64]

FAINT_ENERGY, ENOUGH_MOMENTS = (1e-6, 1e-4), 64
"""Shares of the energy that may lie outside a spectrogram, and the columns with light that suffice."""

SHOWN_DECADES = 5
"""Of a spectrogram."""


@styled
def draw_spectrogram(run: Run) -> Drawing:
    """Which frequencies arrive when."""
    seen, rows, columns_of_time = _lit_spectrogram(run)
    origin = run.fields.grid_out.start + bounds_of(run.fields.envelope_out, run.fields.grid_out.step, 0.5)[0]
    density = seen.density[rows, columns_of_time] / seen.density.max()
    time, frequency = (seen.time[columns_of_time] - origin) * UNITS, seen.frequency[rows] * 1e-12
    unit, factor = scaled([float(np.ptp(time))])
    figure, panels = canvas(
        source=source_line(run), frame=Frame(right=0.89, beside=0.05), widths=(1.0, 0.025)
    )
    _map(panels[0], density, (time[0] * factor, time[-1] * factor, frequency[0], frequency[-1]))
    _scale_of_map(panels[1])
    label_x(panels[0], f"time from the peak, {unit}")
    label_y(panels[0], "frequency, THz")
    gate = span(seen.gate * UNITS, 2)
    panels[0].set_title(f"Which frequencies arrive when (gate {gate})")
    caption = f"Spectrogram of the pulse that leaves, Gaussian gate of {gate} FWHM, five decades."
    columns = {
        "time_fs": np.repeat(time[::4], frequency[::4].size),
        "frequency_THz": np.tile(frequency[::4], time[::4].size),
        "density_over_peak": density[::4, ::4].T.ravel(),
    }
    return Drawing(name="spectrogram", caption=caption, figure=figure, columns=columns)


def _lit_spectrogram(run: Run) -> tuple[Spectrogram, slice, slice]:
    """The spectrogram, and where in it there is light: looked at more closely where a faint pedestal takes
    most of the time."""
    for share in FAINT_ENERGY:
        seen = spectrogram(run.fields.grid_out, run.fields.spectrum_out, share=share)
        bright = seen.density > 10.0**-SHOWN_DECADES * seen.density.max()
        rows, moments = (_stretch(bright.any(axis=axis)) for axis in (1, 0))
        if moments.stop - moments.start >= ENOUGH_MOMENTS:
            break
    return seen, rows, moments


def _stretch(bright: NDArray[np.bool_]) -> slice:
    """From the first to the last place where there is light, and one more on each side."""
    lit = np.flatnonzero(bright)
    return slice(max(int(lit[0]) - 1, 0), int(lit[-1]) + 2)


def _map(panel: Axes, density: Real, extent: tuple[float, float, float, float]) -> None:
    level = np.log10(np.maximum(density, 10.0 ** (-SHOWN_DECADES - 1)))
    colours = night_map()(level / SHOWN_DECADES + 1, bytes=True)
    panel.imshow(colours, extent=extent, origin="lower", aspect="auto", interpolation="bilinear")


def _scale_of_map(panel: Axes) -> None:
    ramp = np.linspace(-SHOWN_DECADES, 0, 64)[:, None]
    _map(panel, 10.0**ramp, (0.0, 1.0, -SHOWN_DECADES, 0.0))
    panel.set_xticks([])
    panel.yaxis.tick_right()
    panel.yaxis.set_label_position("right")
    label_y(panel, "decades from the peak", right=True)
    for spine in panel.spines.values():
        spine.set_visible(False)
