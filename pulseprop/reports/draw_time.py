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
from pulseprop.measures.spectrogram import Spectrogram, spectrogram
from pulseprop.propagation.numerals import percent, scaled, span, terahertz
from pulseprop.propagation.result import AutocorrelationFit, Run
from pulseprop.propagation.words import durations
from pulseprop.reports.curves import PulseCurve, bounds_of, pulse_curve, thin_pairs
from pulseprop.reports.drawing import Drawing, source_line
from pulseprop.reports.figure_style import (
    COLOURS,
    Frame,
    canvas,
    decades,
    label_x,
    label_y,
    night_map,
    styled,
)

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
"""Cycles of the centre frequency that a panel of the field can show."""

FEW_CYCLES = 12
"""Of a pulse that enters no longer than this, some cycles of the field are always shown."""

FAINT_PEAK = 0.03
"""Below this share of the entering peak, each pulse is drawn over its own peak."""

FAINT_POWER, FAINT_FIELD = 1e-2, 2e-3
"""Power over the peak below which nothing is seen of a power, and of a field, on a linear axis."""

FLOOR = 1e-10
"""Ten decades below the peak."""

RINGS = 1e-4
"""Share of the energy after three widths from which on the logarithmic panel stands below the linear one."""

FAINT_ENERGY, ENOUGH_MOMENTS = (1e-6, 1e-4), 64
"""Shares of the energy that may lie outside a spectrogram, and the columns with light that suffice."""

FEW_MARKS = 4
"""Powers of ten beside a low panel."""

SHOWN_DECADES = 5
"""Of a spectrogram."""

UNITS = 1e15
"""Femtoseconds in a second."""


@styled
def draw_pulse(run: Run) -> Drawing:
    """Power before and after, from their peaks; below it the field, and ten decades of a pulse that rings."""
    before, after = _curves(run)
    unit, factor = scaled([UNITS * float(np.ptp(after.time))])
    reach = _reach_of_field(run, before, after)
    rings = bool(run.pulse_out.split) or (run.pulse_out.energy_after or 0.0) > RINGS
    heights = (2.6, *((2.0,) if reach else ()), *((1.8,) if rings else ()))
    gap = {1: 0.0, 2: 0.36, 3: 0.55}[len(heights)]
    figure, panels = canvas(heights, source=source_line(run), frame=Frame(gap=gap))
    _linear(panels[0], before, after, UNITS * factor)
    enters, leaves = durations(run.pulse_in.fwhm_fs, run.pulse_out.fwhm_fs)
    panels[0].set_title(f"{enters} enters, {leaves} leaves")
    label_x(panels[0], f"time from the peak of each pulse, {unit}")
    if reach:
        label_x(panels[1], f"the same, {_fields(panels[1], run, reach)}")
        if panels[1].get_xlim() == panels[0].get_xlim():
            panels[0].tick_params(labelbottom=False)
            panels[1].set_xlabel(panels[0].get_xlabel())
            panels[0].set_xlabel("")
    if rings:
        label_x(panels[-1], f"the same, {_decades(panels[-1], run, FEW_MARKS)[0]}")
    delay = span(run.path.centroid_delay_fs, 4)
    caption = (
        "Power "
        + ("and field " if reach else "")
        + f"before and after the path, each from its peak; the centroid leaves {delay} after that of the "
        "same pulse through vacuum."
    )
    columns = {
        "time_in_fs": before.time * UNITS,
        "power_in_W": before.power,
        "field_in_sqrtW": before.field,
        "time_out_fs": after.time * UNITS,
        "power_out_W": after.power,
        "field_out_sqrtW": after.field,
    }
    return Drawing(name="pulse", caption=caption, figure=figure, columns=columns)


def _curves(run: Run) -> tuple[PulseCurve, PulseCurve]:
    """Both pulses over one stretch of time."""
    return _both(run, *_visible(run, FAINT_POWER))


def _visible(run: Run, least: float) -> tuple[float, float]:
    """Seconds before and after the peaks, a tenth more than either pulse stands above a share of its peak."""
    fields = run.fields
    reach = [
        bounds_of(envelope, fields.grid_out.step, least)[1:]
        for envelope in (fields.envelope_in, fields.envelope_out)
    ]
    half = 0.45 * fields.grid_out.span
    early, late = (min(1.1 * max(side), half) for side in zip(*reach, strict=True))
    return early, late


def _both(run: Run, early: float, late: float) -> tuple[PulseCurve, PulseCurve]:
    fields = run.fields
    return (
        pulse_curve(fields.grid_in, fields.envelope_in, early, late),
        pulse_curve(fields.grid_out, fields.envelope_out, early, late),
    )


def _reach_of_field(run: Run, before: PulseCurve, after: PulseCurve) -> tuple[float, float] | None:
    """How far before and after the peaks, in s, the field is shown; None where it would be a mere band."""
    frequency = 1e12 * terahertz(run.pulse_in.centre_nm)
    early, late = -float(after.time[0]), float(after.time[-1])
    if run.fields.form == "field":
        early, late = _visible(run, FAINT_FIELD)
    if (early + late) * frequency <= MOST_CYCLES:
        return early, late
    if run.fields.form != "field" and run.pulse_in.fwhm_fs * frequency > FEW_CYCLES * UNITS:
        return None
    return min(early, 0.3 * MOST_CYCLES / frequency), min(late, 0.7 * MOST_CYCLES / frequency)


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
    label_y(panel, "power")
    panel.set_ylim(0, 1.05)
    panel.set_yticks([0, 0.5, 1])
    panel.margins(x=0)
    panel.legend(loc="upper right")


def _fields(panel: Axes, run: Run, reach: tuple[float, float]) -> str:
    """Field and envelope over the peak of the field that enters; returns the unit of time."""
    before, after = _both(run, *reach)
    unit, factor = scaled([UNITS * sum(reach)])
    scale, top = UNITS * factor, float(np.sqrt(before.power.max()))
    panel.plot(before.time * scale, before.field / top, color=COLOURS["before"], linewidth=1.5)
    panel.plot(after.time * scale, after.field / top, color=COLOURS["after"], linewidth=2.2)
    for sign in (1, -1):
        envelope = sign * np.sqrt(after.power) / top
        panel.plot(after.time * scale, envelope, color=COLOURS["after"], linewidth=1.0, alpha=0.6)
    panel.margins(x=0)
    label_y(panel, "field")
    panel.set_yticks([-1, 0, 1])
    return unit


def _decades(panel: Axes, run: Run, marks: int = 7) -> tuple[str, PulseCurve, PulseCurve]:
    """Both pulses over ten decades, each from its own peak; returns the unit of time and what is drawn."""
    fields = run.fields
    curves = [
        _deep_curve(fields.grid_in, fields.envelope_in),
        _deep_curve(fields.grid_out, fields.envelope_out),
    ]
    unit, factor = scaled([UNITS * max(float(np.ptp(curve.time)) for curve in curves)])
    for curve, name, label, style in zip(
        curves, ("before", "after"), ("enters", "leaves"), ("--", "-"), strict=True
    ):
        time, ratio = curve.time * UNITS * factor, _above_floor(curve)
        panel.plot(time, ratio, color=COLOURS[name], linestyle=style, label=label, linewidth=2.0)
    decades(panel, marks)
    panel.set_ylim(FLOOR, 3)
    panel.margins(x=0.02)
    label_y(panel, "power / peak" if marks > FEW_MARKS else "power")
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
    label_x(panel, f"time from the peak of each pulse, {unit}")
    panel.set_title("Ten decades of power")
    panel.legend(loc="upper right")
    share = percent(run.pulse_out.energy_after, 2)
    caption = (
        f"Power on a logarithmic axis; {share} of the energy that leaves comes later than three FWHM after "
        "the peak."
    )
    columns = {
        "time_in_fs": before.time * UNITS,
        "power_in_over_peak": _above_floor(before),
        "time_out_fs": after.time * UNITS,
        "power_out_over_peak": _above_floor(after),
    }
    return Drawing(name="contrast", caption=caption, figure=figure, columns=columns)


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
