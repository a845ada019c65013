"""Figures over time: the pulse before and after, its field, and ten decades of it."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from pulseprop.grid import Grid
from pulseprop.propagation.numerals import percent, scaled, span, terahertz
from pulseprop.propagation.result import Run
from pulseprop.propagation.words import durations
from pulseprop.reports.curves import UNITS, PulseCurve, bounds_of, pulse_curve
from pulseprop.reports.drawing import Drawing, source_line
from pulseprop.reports.figure_style import (
    COLOURS,
    Frame,
    canvas,
    decades,
    label_x,
    label_y,
    styled,
)

if TYPE_CHECKING:
    from matplotlib.axes import Axes

__all__ = ["draw_contrast", "draw_pulse"]

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

FEW_MARKS = 4
"""Powers of ten beside a low panel."""


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
