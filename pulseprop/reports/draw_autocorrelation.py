"""Figures of autocorrelations: what is to be expected behind the path, and what was measured before it."""

from __future__ import annotations

import numpy as np

from pulseprop.measures.autocorrelation import (
    autocorrelation_fwhm,
    intensity_autocorrelation,
    interferometric_autocorrelation,
)
from pulseprop.propagation.numerals import scaled, span
from pulseprop.propagation.result import AutocorrelationFit, Run
from pulseprop.reports.curves import UNITS, thin_pairs
from pulseprop.reports.drawing import Drawing, source_line
from pulseprop.reports.figure_style import COLOURS, canvas, label_x, label_y, styled

__all__ = ["draw_autocorrelation", "draw_measured_autocorrelation"]


@styled
def draw_autocorrelation(run: Run) -> Drawing:
    """What an autocorrelator behind the path would show, intensity and fringe-resolved."""
    grid, envelope = run.fields.grid_out, run.fields.envelope_out
    fringes = interferometric_autocorrelation(envelope, grid.step, grid.carrier)
    trace = intensity_autocorrelation(envelope, grid.step)
    near = np.abs(trace.delay) <= fringes.delay[-1]
    delay, signal = thin_pairs(trace.delay[near], trace.signal[near], 2000)
    fringe_delay, fringe = thin_pairs(fringes.delay, fringes.signal, 4000)
    width = autocorrelation_fwhm(envelope, grid.step) * UNITS
    unit, factor = scaled([width])
    figure, panels = canvas((1.0, 1.0), source=source_line(run))
    panels[0].plot(delay * UNITS * factor, signal, color=COLOURS["after"])
    label_y(panels[0], "intensity trace")
    panels[0].set_ylim(0, 1.05)
    panels[0].tick_params(labelbottom=False)
    panels[0].set_title(
        f"Predicted autocorrelation: {span(width, 4)} wide, "
        f"{run.pulse_out.autocorrelation_factor:.2f} times the pulse"
    )
    panels[1].plot(fringe_delay * UNITS * factor, fringe, color=COLOURS["warm"], linewidth=0.7)
    label_y(panels[1], "with fringes")
    panels[1].set_ylim(0, 8.2)
    panels[1].set_yticks([0, 1, 8])
    label_x(panels[1], f"delay, {unit}")
    for panel in panels:
        panel.set_xlim(fringe_delay[0] * UNITS * factor, fringe_delay[-1] * UNITS * factor)
    caption = "Autocorrelations of the pulse behind the path: of the intensity, and fringe-resolved (8 to 1)."
    columns = {
        "delay_fs": delay * UNITS,
        "intensity": signal,
        "fringe_delay_fs": fringe_delay * UNITS,
        "interferometric": fringe,
    }
    return Drawing(name="autocorrelation", caption=caption, figure=figure, columns=columns)


@styled
def draw_measured_autocorrelation(run: Run, fit: AutocorrelationFit) -> Drawing:
    """A measured trace with the prediction and the fit over it."""
    unit, factor = scaled([float(np.ptp(fit.delay_fs))])
    figure, (panel,) = canvas(source=source_line(run))
    delay = fit.delay_fs * factor
    panel.plot(
        delay,
        fit.measured,
        color=COLOURS["before"],
        linestyle="none",
        marker="o",
        markersize=5,
        label="measured",
    )
    panel.plot(delay, fit.fitted, color=COLOURS["after"], label=f"fit, |GDD| = {abs(fit.gdd_fs2):.3g} fs²")
    panel.plot(
        delay, fit.predicted, color=COLOURS["warm"], linestyle="--", label="predicted from the scenario"
    )
    label_x(panel, f"delay, {unit}")
    label_y(panel, "autocorrelation")
    panel.set_title("Measured against predicted, before the path")
    panel.margins(x=0)
    panel.legend(loc="upper right")
    columns = {
        "delay_fs": fit.delay_fs,
        "measured": fit.measured,
        "fitted": fit.fitted,
        "predicted": fit.predicted,
    }
    caption = "The measured intensity autocorrelation, the chirp that fits it, and the pulse as stated."
    return Drawing(name="autocorrelation-measured", caption=caption, figure=figure, columns=columns)
