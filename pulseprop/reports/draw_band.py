"""Figures over the spectrum and along the path: spectra with group delay, the budget as bars."""

from __future__ import annotations

import textwrap
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from pulseprop.propagation.numerals import LONG_NM, scaled, span, terahertz
from pulseprop.propagation.result import Run
from pulseprop.reports.curves import POINTS, extremes
from pulseprop.reports.drawing import Drawing, source_line
from pulseprop.reports.figure_style import COLOURS, Frame, canvas, label_x, label_y, styled, words
from pulseprop.reports.section_budget import on_a_line

if TYPE_CHECKING:
    from matplotlib.axes import Axes

__all__ = ["draw_budget", "draw_spectrum"]

Real = NDArray[np.float64]

SHOWN = 1e-3
"""Spectral energy over its peak that sets the stretch of the axis."""

TRUSTED = 1e-6
"""Spectral energy over its peak below which no group delay is drawn."""

LEAST_DELAY = 0.1
"""Height of the axis of group delay in widths of the pulse: less than that cannot be seen in its shape."""

CLOSEST = 0.07
"""Distance of two marks on the axis of wavelength over the length of the axis."""

LARGE_FS2 = 1e5
"""GDD from which on ps^2 are easier to read."""

WIDEST_LABELS = 8
"""Elements whose names fit below their bars in the ordinary size of type."""


@styled
def draw_spectrum(run: Run) -> Drawing:
    """Spectrum before and after; below it the group delay and the transmission of the path."""
    frequency, before, after, delay, transmission = _bands(run)
    top = float(before.max())
    mean = run.path.net_group_delay_fs or 0.0
    unit, factor = scaled([float(np.nanmax(np.abs(delay - mean)))])
    figure, panels = canvas((3.0, 2.0), source=source_line(run), frame=Frame(right=0.885, top=0.86))
    panels[0].fill_between(frequency, before / top, color=COLOURS["before"], alpha=0.25, linewidth=0)
    panels[0].plot(frequency, before / top, color=COLOURS["before"], linestyle="--", label="enters")
    panels[0].plot(frequency, after / top, color=COLOURS["after"], label="leaves")
    label_y(panels[0], "spectrum / peak")
    panels[0].set_ylim(0, None)
    panels[0].tick_params(labelbottom=False)
    panels[0].legend(loc="upper right")
    _wavelength_axis(panels[0], float(frequency[0]), float(frequency[-1]))
    panels[1].plot(frequency, (delay - mean) * factor, color=COLOURS["warm"])
    _room(panels[1], LEAST_DELAY * run.pulse_in.fwhm_fs * factor)
    label_y(panels[1], f"group delay, {unit}", "warm")
    label_x(panels[1], "frequency, THz")
    right = panels[1].twinx()
    right.spines.right.set_visible(True)
    right.plot(frequency, transmission, color=COLOURS["green"], linewidth=1.4)
    label_y(right, "transmission", "green", right=True)
    right.set_ylim(0, 1.05)
    for panel in panels:
        panel.set_xlim(frequency[0], frequency[-1])
    caption = (
        "Energy per frequency before and after the path; the path's group delay against its average over the "
        f"transmitted spectrum, {span(mean, 4)}; and its transmission."
    )
    columns = {
        "frequency_THz": frequency,
        "spectrum_in_J_per_THz": before,
        "spectrum_out_J_per_THz": after,
        "group_delay_fs": delay,
        "transmission": transmission,
    }
    return Drawing(name="spectrum", caption=caption, figure=figure, columns=columns)


def _bands(run: Run) -> tuple[Real, Real, Real, Real, Real]:
    """Frequency in THz, both spectra in J/THz, group delay in fs and transmission where there is light."""
    fields = run.fields
    frequency = fields.grid_in.frequency * 1e-12
    before, after = (
        (amplitude.real**2 + amplitude.imag**2) * 1e12
        for amplitude in (fields.spectrum_in, fields.spectrum_out)
    )
    seen = np.flatnonzero(before > SHOWN * before.max())
    margin = (seen[-1] - seen[0]) // 10 + 2
    part = slice(max(int(seen[0]) - margin, 0), min(int(seen[-1]) + margin + 1, before.size))
    delay = np.where(before > TRUSTED * before.max(), fields.group_delay * 1e15, np.nan)
    rows = [column[part] for column in (frequency, before, after, delay, fields.transmission)]
    return _thin(rows)


def _thin(rows: list[Real]) -> tuple[Real, Real, Real, Real, Real]:
    """Every column where the leaving spectrum or the transmission is lowest or highest of its group.

    Fringes finer than a screen so become a band between their edges, and no beat of them with the pixels.
    """
    frequency, before, after, delay, transmission = rows
    group = -(-frequency.size // (POINTS // 2))
    if group > 4:
        kept = np.unique(np.concatenate([extremes(column, group) for column in (after, transmission)]))
        frequency, before, after, delay, transmission = (column[kept] for column in rows)
    return frequency, before, after, delay, transmission


def _wavelength_axis(panel: Axes, low: float, high: float) -> None:
    """Vacuum wavelength along the top of an axis from low to high THz, in nm or um; wide enough apart."""
    from matplotlib.ticker import MaxNLocator

    shortest, longest = terahertz(high), terahertz(max(low, 0.1 * high))
    unit, scale = ("nm", 1.0) if shortest < LONG_NM else ("um", 1e-3)
    places: dict[float, str] = {}
    for tick in MaxNLocator(6).tick_values(shortest * scale, longest * scale):
        if not shortest * scale <= tick <= longest * scale:
            continue
        place = terahertz(tick / scale)
        if not places or min(places) - place > CLOSEST * (high - low):
            places[place] = f"{tick:g}"
    top = panel.secondary_xaxis("top")
    top.set_xticks(list(places), list(places.values()))
    top.set_xlabel(f"vacuum wavelength, {unit}", labelpad=8)


def _room(panel: Axes, least: float) -> None:
    """At least this much height, so that rounding is not blown up into structure."""
    low, high = panel.get_ylim()
    lacking = max(least - (high - low), 0.0)
    panel.set_ylim(low - lacking / 2, high + lacking / 2)


@styled
def draw_budget(run: Run) -> Drawing:
    """GDD of each element as a bar, and the width of the pulse after it."""
    names = tuple(element.name for element in run.elements)
    gdd = np.array([np.nan if row.gdd_fs2 is None else row.gdd_fs2 for row in run.elements], dtype=float)
    width = np.array([run.pulse_in.fwhm_fs, *(row.fwhm_after_fs for row in run.elements)], dtype=float)
    figure, (panel,) = canvas(source=source_line(run), frame=Frame(right=0.885, bottom=0.2))
    _bars(panel, gdd)
    panel.set_xticks(range(len(names) + 1), ["start", *(_short(name, len(names)) for name in names)])
    panel.tick_params(axis="x", labelsize=17 * min(1.0, WIDEST_LABELS / len(names)))
    _widths(panel, width)
    panel.set_title(
        "What each element adds (orders at a line centre say little)"
        if on_a_line(run.path)
        else "What each element adds, and the pulse after it"
    )
    columns: dict[str, Real | tuple[str, ...]] = {
        "element": ("start", *names),
        "gdd_fs2": np.concatenate(([np.nan], gdd)),
        "fwhm_after_fs": width,
    }
    caption = "Group-delay dispersion of each element, and the width of the pulse after it."
    return Drawing(name="budget", caption=caption, figure=figure, columns=columns)


def _bars(panel: Axes, gdd: Real) -> None:
    """Bars in fs^2, or in ps^2 where they are large; of few elements they stay slender."""
    largest = float(np.max(np.abs(np.nan_to_num(gdd)), initial=0.0))
    factor, unit = (1.0, "fs²") if largest < LARGE_FS2 else (1e-6, "ps²")
    place = np.arange(1, gdd.size + 1)
    panel.bar(place, gdd * factor, width=min(0.55, 0.13 * (gdd.size + 1)), color=COLOURS["after"], alpha=0.85)
    panel.axhline(0, color=COLOURS["ink"], linewidth=1.2)
    panel.set_xlim(-0.5, gdd.size + 0.5)
    label_y(panel, f"GDD, {unit}", "after")


def _widths(panel: Axes, width: Real) -> None:
    unit, factor = scaled(width)
    right = panel.twinx()
    right.spines.right.set_visible(True)
    right.plot(
        range(width.size), width * factor, color=COLOURS["warm"], marker="o", markersize=9, linestyle="--"
    )
    label_y(right, f"FWHM after it, {unit}", "warm", right=True)
    right.set_ylim(0, 1.08 * float(width.max()) * factor)


def _short(name: str, count: int) -> str:
    """A name on lines short enough to stand beside its neighbours."""
    return "\n".join(textwrap.wrap(words(name), max(80 // (min(count, WIDEST_LABELS) + 1), 9))[:3])
