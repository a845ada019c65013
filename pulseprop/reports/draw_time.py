"""Figures over time: the pulse before and after, ten decades of it, its spectrogram, its autocorrelations."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from pulseprop.grid import Grid
from pulseprop.measures.autocorrelation import (
    autocorrelation_fwhm,
    intensity_autocorrelation,
    interferometric_autocorrelation,
)
from pulseprop.measures.spectrogram import spectrogram
from pulseprop.propagation.numerals import percent, scaled, span
from pulseprop.propagation.result import AutocorrelationFit, Run
from pulseprop.reports.curves import PulseCurve, bounds_of, pulse_curve, thin_pairs
from pulseprop.reports.drawing import Drawing, source_line
from pulseprop.reports.figure_style import COLOURS, canvas, night_map, styled

if TYPE_CHECKING:
    from matplotlib.axes import Axes

__all__ = [
    "draw_autocorrelation",
    "draw_contrast",
    "draw_measured_autocorrelation",
    "draw_pulse",
    "draw_spectrogram",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

MOST_CYCLES = 45
"""Cycles of the carrier in the window up to which the field itself is drawn."""

FAINT_PEAK = 0.03
"""Below this share of the entering peak, each pulse is drawn over its own peak."""

FLOOR = 1e-10
"""Ten decades below the peak."""

RINGS = 1e-4
"""Share of the energy after three widths from which on the logarithmic panel stands below the linear one."""


@styled
def draw_pulse(run: Run) -> Drawing:
    """Power before and after, from their peaks; below it the field, or ten decades of a pulse that rings."""
    before, after = _curves(run)
    unit, factor = scaled([1e15 * float(np.ptp(after.time))])
    cycles = float(np.ptp(after.time)) * run.fields.grid_out.carrier
    rings = bool(run.pulse_out.split) or (run.pulse_out.energy_after or 0.0) > RINGS
    heights = (3.0, *((2.0,) if cycles <= MOST_CYCLES else ()), *((2.0,) if rings else ()))
    figure, panels = canvas(heights, source=source_line(run))
    _linear(panels[0], before, after, 1e15 * factor)
    panels[0].set_title(f"{span(run.pulse_in.fwhm_fs, 3)} enters, {span(run.pulse_out.fwhm_fs, 3)} leaves")
    if cycles <= MOST_CYCLES:
        panels[0].tick_params(labelbottom=False)
        _fields(panels[1], before, after, 1e15 * factor)
        panels[1].set_xlim(panels[0].get_xlim())
    panels[-2 if rings else -1].set_xlabel(f"time from the peak of each pulse, {unit}")
    if rings:
        panels[-1].set_xlabel(f"the same, {_decades(panels[-1], run)[0]}")
    figure.align_ylabels(panels)
    delay = span(run.path.centroid_delay_fs, 4)
    caption = (
        f"Power before and after the path, each from its peak; the centroid leaves {delay} after that of the "
        "same pulse through vacuum."
    )
    columns = {
        "time_in_fs": before.time * 1e15,
        "power_in_W": before.power,
        "field_in_sqrtW": before.field,
        "time_out_fs": after.time * 1e15,
        "power_out_W": after.power,
        "field_out_sqrtW": after.field,
    }
    return Drawing(name="pulse", caption=caption, figure=figure, columns=columns)


def _curves(run: Run) -> tuple[PulseCurve, PulseCurve]:
    """Both pulses over one stretch of time, a tenth wider than what is visible of either."""
    fields = run.fields
    reach = [
        bounds_of(envelope, fields.grid_out.step)[1:]
        for envelope in (fields.envelope_in, fields.envelope_out)
    ]
    half = 0.45 * fields.grid_out.span
    early, late = (min(1.1 * max(side), half) for side in zip(*reach, strict=True))
    return (
        pulse_curve(fields.grid_in, fields.envelope_in, early, late),
        pulse_curve(fields.grid_out, fields.envelope_out, early, late),
    )


def _linear(panel: Axes, before: PulseCurve, after: PulseCurve, scale: float) -> None:
    top, leaving = float(before.power.max()), float(after.power.max())
    own = leaving < FAINT_PEAK * top
    panel.fill_between(
        before.time * scale, before.power / top, color=COLOURS["before"], alpha=0.25, linewidth=0
    )
    panel.plot(
        before.time * scale, before.power / top, color=COLOURS["before"], label="enters", linestyle="--"
    )
    panel.plot(
        after.time * scale,
        after.power / (leaving if own else top),
        color=COLOURS["after"],
        label=f"leaves (peak {percent(leaving / top, 2)} of the entering)" if own else "leaves",
    )
    panel.set_ylabel("relative power")
    panel.set_ylim(0, None)
    panel.margins(x=0)
    panel.legend(loc="upper right")


def _fields(panel: Axes, before: PulseCurve, after: PulseCurve, scale: float) -> None:
    top = float(np.sqrt(before.power.max()))
    panel.plot(before.time * scale, before.field / top, color=COLOURS["before"], linewidth=1.6)
    panel.plot(after.time * scale, after.field / top, color=COLOURS["after"], linewidth=2.0)
    for sign in (1, -1):
        envelope = sign * np.sqrt(after.power) / top
        panel.plot(after.time * scale, envelope, color=COLOURS["after"], linewidth=1.0, alpha=0.6)
    panel.set_ylabel("field")


def _decades(panel: Axes, run: Run) -> tuple[str, PulseCurve, PulseCurve]:
    """Both pulses over ten decades, each from its own peak; returns the unit of time and what is drawn."""
    fields = run.fields
    curves = [
        _deep_curve(fields.grid_in, fields.envelope_in),
        _deep_curve(fields.grid_out, fields.envelope_out),
    ]
    unit, factor = scaled([1e15 * max(float(np.ptp(curve.time)) for curve in curves)])
    for curve, name, label, style in zip(
        curves, ("before", "after"), ("enters", "leaves"), ("--", "-"), strict=True
    ):
        time, ratio = curve.time * 1e15 * factor, _above_floor(curve)
        panel.semilogy(time, ratio, color=COLOURS[name], linestyle=style, label=label, linewidth=2.0)
    panel.set_ylim(FLOOR, 3)
    panel.margins(x=0.02)
    panel.set_ylabel("log power")
    panel.grid(axis="y", color=COLOURS["faint"], linewidth=0.8)
    return unit, curves[0], curves[1]


def _deep_curve(grid: Grid, envelope: Complex) -> PulseCurve:
    """The stretch of a pulse that stands above ten decades below its peak."""
    _, early, late = bounds_of(envelope, grid.step, FLOOR)
    return pulse_curve(grid, envelope, max(early, 2 * grid.step), max(late, 2 * grid.step))


def _above_floor(curve: PulseCurve) -> Real:
    """Power over the peak; a line breaks where it falls below the last decade: no floor is made up."""
    ratio = curve.power / curve.power.max()
    return np.where(ratio >= FLOOR, ratio, np.nan)


@styled
def draw_contrast(run: Run) -> Drawing:
    """Power over ten decades, as long as it lasts."""
    figure, (panel,) = canvas(source=source_line(run))
    unit, before, after = _decades(panel, run)
    panel.set_xlabel(f"time from the peak of each pulse, {unit}")
    panel.set_title("Ten decades of power")
    panel.legend(loc="upper right")
    share = percent(run.pulse_out.energy_after, 2)
    caption = (
        f"Power on a logarithmic axis; {share} of the energy that leaves comes later than three FWHM after "
        "the peak."
    )
    columns = {
        "time_in_fs": before.time * 1e15,
        "power_in_over_peak": _above_floor(before),
        "time_out_fs": after.time * 1e15,
        "power_out_over_peak": _above_floor(after),
    }
    return Drawing(name="contrast", caption=caption, figure=figure, columns=columns)


@styled
def draw_spectrogram(run: Run) -> Drawing:
    """Which frequencies arrive when."""
    seen = spectrogram(run.fields.grid_out, run.fields.spectrum_out)
    unit, factor = scaled([1e15 * float(np.ptp(seen.time))])
    figure, (panel,) = canvas(source=source_line(run))
    origin = run.fields.grid_out.start + bounds_of(run.fields.envelope_out, run.fields.grid_out.step)[0]
    level = np.log10(np.maximum(seen.density / seen.density.max(), 1e-6))
    image = panel.imshow(
        level,
        extent=(
            *((seen.time[[0, -1]] - origin) * 1e15 * factor),
            *(seen.frequency[[0, -1]] * 1e-12),
        ),
        origin="lower",
        aspect="auto",
        cmap=night_map(),
        vmin=-5,
        vmax=0,
        interpolation="bilinear",
    )
    bar = figure.colorbar(image, ax=panel, label="decades below the peak", pad=0.02)
    bar.outline.set_visible(False)
    panel.set_xlabel(f"time from the peak, {unit}")
    panel.set_ylabel("frequency, THz")
    gate = span(seen.gate * 1e15, 2)
    panel.set_title(f"Which frequencies arrive when (gate {gate})")
    caption = f"Spectrogram of the pulse that leaves, Gaussian gate of {gate} FWHM, five decades."
    columns = {
        "time_fs": np.repeat((seen.time - origin)[::4] * 1e15, seen.frequency[::4].size),
        "frequency_THz": np.tile(seen.frequency[::4] * 1e-12, seen.time[::4].size),
        "density_over_peak": (seen.density / seen.density.max())[::4, ::4].T.ravel(),
    }
    return Drawing(name="spectrogram", caption=caption, figure=figure, columns=columns)


@styled
def draw_autocorrelation(run: Run) -> Drawing:
    """What an autocorrelator behind the path would show, intensity and fringe-resolved."""
    grid, envelope = run.fields.grid_out, run.fields.envelope_out
    fringes = interferometric_autocorrelation(envelope, grid.step, grid.carrier)
    trace = intensity_autocorrelation(envelope, grid.step)
    near = np.abs(trace.delay) <= fringes.delay[-1]
    delay, signal = thin_pairs(trace.delay[near], trace.signal[near], 2000)
    fringe_delay, fringe = thin_pairs(fringes.delay, fringes.signal, 4000)
    width = autocorrelation_fwhm(envelope, grid.step) * 1e15
    unit, factor = scaled([width])
    figure, panels = canvas((1.0, 1.0), source=source_line(run))
    panels[0].plot(delay * 1e15 * factor, signal, color=COLOURS["after"])
    panels[0].set_ylabel("intensity trace")
    panels[0].set_ylim(0, 1.05)
    panels[0].tick_params(labelbottom=False)
    panels[0].set_title(
        f"Predicted autocorrelation: {span(width, 4)} wide, "
        f"{run.pulse_out.autocorrelation_factor:.3g} times the pulse"
    )
    panels[1].plot(fringe_delay * 1e15 * factor, fringe, color=COLOURS["warm"], linewidth=0.7)
    panels[1].set_ylabel("interferometric")
    panels[1].set_ylim(0, 8.2)
    panels[1].set_yticks([0, 1, 8])
    panels[1].set_xlabel(f"delay, {unit}")
    for panel in panels:
        panel.set_xlim(fringe_delay[0] * 1e15 * factor, fringe_delay[-1] * 1e15 * factor)
    caption = "Autocorrelations of the pulse behind the path: of the intensity, and fringe-resolved (8 to 1)."
    columns = {
        "delay_fs": delay * 1e15,
        "intensity": signal,
        "fringe_delay_fs": fringe_delay * 1e15,
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
    panel.set_xlabel(f"delay, {unit}")
    panel.set_ylabel("autocorrelation")
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
