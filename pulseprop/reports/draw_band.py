"""Figures over the spectrum and along the path: spectra with group delay, media, the budget as bars."""

from __future__ import annotations

import textwrap
from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.propagation.numerals import scaled, span
from pulseprop.propagation.result import Run
from pulseprop.reports.curves import POINTS, SPEED_OF_LIGHT, IndexCurve, extremes
from pulseprop.reports.drawing import Drawing, source_line
from pulseprop.reports.figure_style import COLOURS, canvas, styled, words

if TYPE_CHECKING:
    from matplotlib.axes import Axes

__all__ = ["draw_budget", "draw_media", "draw_spectrum"]

Real = NDArray[np.float64]

SHOWN = 1e-3
"""Spectral energy over its peak that sets the stretch of the axis."""

TRUSTED = 1e-6
"""Spectral energy over its peak below which no group delay is drawn."""

MOST_NM = 1e4
"""Wavelength from which on an axis is in micrometres."""

LEAST_DELAY = 0.1
"""Height of the axis of group delay in widths of the pulse: less than that cannot be seen in its shape."""

CLOSEST = 0.07
"""Distance of two marks on the axis of wavelength over the length of the axis."""

WIDEST_LABELS = 8
"""Elements whose names fit below their bars in the ordinary size of type."""

LINES = ("after", "warm", "green", "before", "ink")
STYLES = ("-", "--", "-.", ":", "-")


@styled
def draw_spectrum(run: Run) -> Drawing:
    """Spectrum before and after; below it the group delay and the transmission of the path."""
    frequency, before, after, delay, transmission = _bands(run)
    top = float(before.max())
    mean = run.path.net_group_delay_fs or 0.0
    unit, factor = scaled([float(np.nanmax(np.abs(delay - mean)))])
    figure, panels = canvas((3.0, 2.0), source=source_line(run))
    panels[0].fill_between(frequency, before / top, color=COLOURS["before"], alpha=0.25, linewidth=0)
    panels[0].plot(frequency, before / top, color=COLOURS["before"], linestyle="--", label="enters")
    panels[0].plot(frequency, after / top, color=COLOURS["after"], label="leaves")
    panels[0].set_ylabel("energy per THz / peak")
    panels[0].set_ylim(0, None)
    panels[0].tick_params(labelbottom=False)
    panels[0].legend(loc="upper right")
    _wavelength_axis(panels[0], float(frequency[0]), float(frequency[-1]))
    panels[1].plot(frequency, (delay - mean) * factor, color=COLOURS["warm"])
    _room(panels[1], LEAST_DELAY * run.pulse_in.fwhm_fs * factor)
    panels[1].set_ylabel(f"group delay, {unit}", color=COLOURS["warm"])
    panels[1].set_xlabel("frequency, THz")
    right = panels[1].twinx()
    right.spines.right.set_visible(True)
    right.plot(frequency, transmission, color=COLOURS["green"], linewidth=1.4)
    right.set_ylabel("transmission", color=COLOURS["green"])
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
    """Vacuum wavelength along the top of an axis from low to high THz: nm, or um from ten micrometres on."""
    from matplotlib.ticker import MaxNLocator

    unit, scale = ("nm", 1e-3) if SPEED_OF_LIGHT * 1e-3 / high < MOST_NM else ("um", 1e-6)

    def turned(value: Any) -> Any:
        return SPEED_OF_LIGHT * scale / np.maximum(np.asarray(value, dtype=float), 1e-9)

    top = panel.secondary_xaxis("top", functions=(turned, turned))
    top.set_xlabel(f"vacuum wavelength, {unit}")
    shortest, longest = SPEED_OF_LIGHT * scale / high, SPEED_OF_LIGHT * scale / max(low, 0.1 * high)
    ticks: list[float] = []
    for tick in MaxNLocator(6).tick_values(shortest, longest):
        apart = not ticks or turned(ticks[-1]) - turned(tick) > CLOSEST * (high - low)
        if shortest <= tick <= longest and apart:
            ticks.append(tick)
    top.set_xticks(ticks)


def _room(panel: Axes, least: float) -> None:
    """At least this much height, so that rounding is not blown up into structure."""
    low, high = panel.get_ylim()
    lacking = max(least - (high - low), 0.0)
    panel.set_ylim(low - lacking / 2, high + lacking / 2)


@styled
def draw_media(curves: Sequence[IndexCurve], source: str) -> Drawing:
    """Index, absorption and GVD of media over wavelength."""
    absorbs = any(float(np.max(curve.k, initial=0.0)) > 1e-12 for curve in curves)
    figure, panels = canvas((1.0,) * (3 if absorbs else 2), source=source)
    longest = max(float(curve.wavelength_nm.max()) for curve in curves)
    unit, scale = ("nm", 1.0) if longest < MOST_NM else ("um", 1e-3)
    for number, curve in enumerate(curves):
        wavelength, k = curve.wavelength_nm * scale, np.where(curve.k > 0, curve.k, np.nan)
        for panel, values in zip(panels, (curve.n, curve.gvd, k), strict=False):
            panel.plot(
                wavelength,
                values,
                label=words(curve.name),
                color=COLOURS[LINES[number % 5]],
                linestyle=STYLES[number % 5],
            )
    panels[0].set_ylabel("index n")
    panels[1].set_ylabel("GVD, fs²/mm")
    if absorbs:
        panels[2].set_ylabel("k")
        panels[2].set_yscale("log")
    for panel in panels:
        panel.margins(x=0)
    for panel in panels[:-1]:
        panel.tick_params(labelbottom=False)
    panels[-1].set_xlabel(f"vacuum wavelength, {unit}")
    figure.align_ylabels(panels)
    panels[0].legend(loc="lower left", bbox_to_anchor=(0, 1), ncols=min(len(curves), 4))
    columns = {}
    for curve in curves:
        columns[f"wavelength_nm ({curve.name})"] = curve.wavelength_nm
        columns[f"n ({curve.name})"] = curve.n
        columns[f"k ({curve.name})"] = curve.k
        columns[f"gvd_fs2_per_mm ({curve.name})"] = curve.gvd
    caption = "Index and group-velocity dispersion of the media" + (", and their k." if absorbs else ".")
    return Drawing(name="media", caption=caption, figure=figure, columns=columns)


@styled
def draw_budget(run: Run) -> Drawing:
    """GDD of each element as a bar, and the width of the pulse after it."""
    names = tuple(element.name for element in run.elements)
    gdd = np.array([np.nan if row.gdd_fs2 is None else row.gdd_fs2 for row in run.elements], dtype=float)
    width = np.array([run.pulse_in.fwhm_fs, *(row.fwhm_after_fs for row in run.elements)], dtype=float)
    unit, factor = scaled(width)
    figure, (panel,) = canvas(source=source_line(run))
    place = np.arange(1, len(names) + 1)
    panel.bar(place, gdd, width=0.55, color=COLOURS["after"], alpha=0.85)
    panel.axhline(0, color=COLOURS["ink"], linewidth=1.2)
    panel.set_ylabel("GDD, fs²", color=COLOURS["after"])
    panel.set_xticks([0, *place], ["start", *(_short(name, len(names)) for name in names)])
    right = panel.twinx()
    right.spines.right.set_visible(True)
    right.plot(
        np.arange(len(names) + 1),
        width * factor,
        color=COLOURS["warm"],
        marker="o",
        markersize=9,
        linestyle="--",
    )
    right.set_ylabel(f"FWHM after it, {unit}", color=COLOURS["warm"])
    right.set_ylim(0, 1.08 * float(width.max()) * factor)
    panel.tick_params(axis="x", labelsize=17 * min(1.0, WIDEST_LABELS / len(names)))
    panel.set_title("What each element adds, and the pulse after it")
    columns: dict[str, Real | tuple[str, ...]] = {
        "element": ("start", *names),
        "gdd_fs2": np.concatenate(([np.nan], gdd)),
        "fwhm_after_fs": width,
    }
    caption = "Group-delay dispersion of each element, and the width of the pulse after it."
    return Drawing(name="budget", caption=caption, figure=figure, columns=columns)


def _short(name: str, count: int) -> str:
    """A name on lines short enough to stand beside its neighbours."""
    return "\n".join(textwrap.wrap(words(name), max(90 // (min(count, WIDEST_LABELS) + 1), 8))[:3])
